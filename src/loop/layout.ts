// Places of the flat arrays that the kernels work on. SI. Plain literals, because bundlers put those in place of the
// names, and an engine that reads each place from a module's variable is half as fast.

// --- state: the bus of the controller (30 places, see control/bus.ts), then the plant; a copy of it is a checkpoint ---
/** Samples since the start, and seconds of a last sample that was cut short. */
export const TICK = 30;
export const PARTIAL = 31;
/** Station [m] or [s], and the road cell it lies in. */
export const STATION = 32;
export const CELL = 33;
export const SPEED = 34;
/** Acceleration at the end of the last step. */
export const ACCELERATION = 35;
/** Throttle at the actuator, and behind the drive's lag. */
export const ACTUATOR = 36;
export const THROTTLE = 37;
/** Output of the sensor's filter, before its scale error. */
export const FILTERED = 38;
/** Indices of the drive's cell over speed and throttle. */
export const SPEED_CELL = 39;
export const THROTTLE_CELL = 40;
/** Energies since the start [J], the integral of their magnitudes, the distance travelled [m]. */
export const DRIVE_WORK = 41;
export const REGENERATION_WORK = 42;
export const AERO_WORK = 43;
export const ROLLING_WORK = 44;
export const CLIMB_WORK = 45;
export const BRAKE_WORK = 46;
export const WORK_MAGNITUDE = 47;
export const START_SPEED = 48;
/** Air where a throttle was locked `level` the last time: density [kg/m3], temperature [K]. */
export const LOCK_DENSITY = 49;
export const LOCK_TEMPERATURE = 50;
/** Set-speed changes that have happened. */
export const CHANGES = 51;
/** Limited command of the last sample that was recorded. */
export const LAST_COMMAND = 52;
/** Gear engaged, index into the drive's gears; -1: the clutch is open. Ratio and effective mass in hand. */
export const GEAR = 73;
export const RATIO = 53;
export const EFFECTIVE_MASS = 54;
/** A shift under way: the gear it goes to, 0 none, 1 clutch open, 2 the rider's throttle until hold resumes; tick at which this part ends; planned shifts that have begun. A part of -1: an automatic gearbox rests after a shift. */
export const NEXT_GEAR = 55;
export const SHIFT_PART = 56;
export const SHIFT_UNTIL = 57;
export const SHIFTS = 58;
/** Gear for which a throttle was locked `level` the last time. */
export const LOCK_GEAR = 59;
/** Throttle behind the actuator's slack. */
export const PLATE = 60;
/** Distance travelled since the start [m]. */
export const TRAVELLED = 61;
/** Battery: energy left [J], heat (see Heating), factors of full-throttle force and of regeneration that follow. */
export const CHARGE = 62;
export const HEAT = 63;
export const DRIVE_FACTOR = 64;
export const REGENERATION_FACTOR = 65;
/** Drawn from fuel or battery [J]; kinetic energy lost in shifts [J]. */
export const DRAWN = 66;
export const SHIFT_WORK = 67;
/** What a sensor with pulses or noise keeps: filtered reading, and one more place. */
export const SENSED = 68;
export const SENSED_MORE = 69;
/** Effective mass at the start of the run [kg]. */
export const START_MASS = 70;
/** What a sensor of the slope keeps: the row of the road in which it reads, its reading before; see sense-slope.ts. */
export const SLOPE_ROW = 71;
export const SLOPE_READING = 72;
/** Reference beyond which the rider's brake does not go, in the units of the set speed; Infinity: that of the hold. */
export const BRAKE_REFERENCE = 74;
/** Who has the throttle (HOLD_ below), and the tick at which the grip or the clutch lever is let go. */
export const HOLD_MODE = 75;
export const HOLD_UNTIL = 76;
/** Acts of the rider that have been done. */
export const HOLD_ACTS = 77;
/** Found by the controller's step, for the next sample: a rule that ends hold (1 + its place in RULES), or RE_ENTERS; 0: nothing. */
export const HOLD_FOUND = 78;
/** Hold takes over in the controller's next step: ENGAGES or RESUMES; 0: no. */
export const HOLD_TAKES = 79;
/** Tick at which the rider resumes a hold that a rule has ended; 0: not by themselves. */
export const HOLD_RESUMES = 80;
/** Plan's set speed in force, which taps and engaging leave behind. */
export const PLANNED_SPEED = 81;
/** Speed that the rider holds by hand [m/s], true, and the deceleration at which they brake down to it; negative: the acceleration at which they gain it; 0: they have it. */
export const HAND_SPEED = 82;
export const HAND_RATE = 83;
/** Throttle of the grip in an override, and the command of the controller behind it. */
export const GRIP = 84;
export const OWN_COMMAND = 85;
/** What the rules of the unit remember: measured speed of the sample before, samples too slow, samples too fast. */
export const RULES_MEMORY = 86;
/** Faults of the sensor that have begun; the kind that is on (see sensor-faults.ts), 0: none; the tick at which it ends; what it holds on to. */
export const FAULTS_BEGUN = 89;
export const FAULT = 90;
export const FAULT_UNTIL = 91;
export const FAULT_VALUE = 92;
/** History for delayed measurement, to the end of the state: rows of [value, slopes], see delayed-speed.ts. */
export const HISTORY = 93;
export const HISTORY_STRIDE = 3;

// --- who has the throttle: s[HOLD_MODE]; from BY_HAND on hold is off ---
export const ENGAGED = 0;
/** The controller, or the grip where that asks for more; then until the speed is back. */
export const OVERRIDDEN = 1;
export const RE_ENTERING = 2;
/** Hold is off: the rider holds a speed, lets it coast, has pulled the clutch. */
export const BY_HAND = 3;
export const COASTING = 4;
export const DECLUTCHED = 5;
/** s[HOLD_TAKES]: the present speed becomes the set speed, or the set speed is that of before. */
export const ENGAGES = 1;
export const RESUMES = 2;
/** s[HOLD_FOUND]: the speed is back after an override. */
export const RE_ENTERS = -1;

// --- chunk: sums over the samples that a kernel has just run, works and energies [J] ---
export const C_TICKS = 0;
/** Seconds and distance travelled. */
export const C_TIME = 1;
export const C_DISTANCE = 2;
/** Work of the drive while it pushed, and while it held back; of air, rolling, slope, the rider's brake. */
export const C_PUSH = 3;
export const C_HOLD = 4;
export const C_AERO = 5;
export const C_ROLLING = 6;
export const C_CLIMB = 7;
export const C_BRAKE = 8;
/** Change of the kinetic energy. */
export const C_KINETIC = 9;
/** Time of the samples that began at the actuator's rate limit, and of those with the brake on. */
export const C_RATED_TIME = 10;
export const C_BRAKE_TIME = 11;
/** Drawn from fuel or battery. */
export const C_DRAWN = 12;
/** At the start of the last sample: forces of drive and brake [N], acceleration. */
export const C_DRIVE_FORCE = 13;
export const C_BRAKE_FORCE = 14;
export const C_ACCELERATION = 15;
export const C_SIZE = 16;

// --- log: a row a sample of the chunk, at its start: speed, throttle behind the slack, command before it is limited, wheel force of the drive, ratio ---
export const L_SPEED = 0;
export const L_ACTUATOR = 1;
export const L_COMMAND = 2;
export const L_FORCE = 3;
export const L_RATIO = 4;
export const L_STRIDE = 5;
export const LOG_ROWS = 128;

// --- parameters: constant over a run ---
export const P_SAMPLE = 0;
/** Steps a sample and length of a step. */
export const P_STEPS = 1;
export const P_STEP = 2;
/** 1: the station is time. */
export const P_TIMED = 3;
export const P_MASS = 4;
/** Mass with the turning wheels, without what turns before the gear; with it: EFFECTIVE_MASS. */
export const P_BASE_MASS = 5;
/** Drag area with the air from ahead; from behind: P_CDA_BEHIND. */
export const P_CDA = 6;
export const P_C0 = 7;
export const P_C1 = 8;
export const P_C2 = 9;
export const P_ACTUATOR_LAG = 10;
export const P_DRIVE_LAG = 11;
/** Greatest rate of the actuator [1/s], and the gap |u - y| above which it rules; both Infinity without a limit. */
export const P_RATE = 12;
export const P_RATE_GAP = 13;
/** Weights of the two exponentials of the lags: ta / (ta - td), and 1 / td where the two are equal. */
export const P_LAG_WEIGHT = 14;
export const P_LAG_EQUAL = 15;
/** Mean over a whole step of what lags.ts calls the decay of the drive, and the pull. */
export const P_DRIVE_MEAN = 16;
export const P_PULL_MEAN = 17;
export const P_FILTER = 18;
/** Measured over true speed. */
export const P_SCALE = 19;
/** Transport delay, computing delay and dead time in samples, and rows of the history. */
export const P_DELAY = 20;
export const P_HISTORY = 21;
/** Shaft speed below which the drive stalls. */
export const P_STALL_SPEED = 22;
/** Range of the command, between the actuator's end stops. */
export const P_LEAST = 23;
export const P_GREATEST = 24;
/** 1: there is crosswind somewhere. */
export const P_CROSSWIND = 25;
/** Half-widths of the bands: four places. */
export const P_BANDS = 26;
/** True speed over the units of the set speed; overspeed at which the rider brakes, Infinity: never. */
export const P_TO_TRUE = 30;
export const P_BRAKES_ABOVE = 31;
export const P_BAND_COUNT = 32;
export const P_CDA_BEHIND = 33;
/** Step of the command, 0: none; half of the slack. */
export const P_RESOLUTION = 34;
export const P_PLAY = 35;
/** 1: the drive can be derated; there is a fuel tank or battery (see below); a sensor with pulses or noise; an automatic gearbox; a belt. */
export const P_DERATED = 38;
export const P_SOURCE = 39;
export const P_SENSED = 40;
export const P_AUTOMATIC = 41;
export const P_BELT = 42;
/** What a belt keeps of its ratio's distance from rest over a sample. */
export const P_BELT_KEPT = 43;
/** Throttle at which the drive's law steps; 0: nowhere. */
export const P_LAW_STEP = 44;
/** What tells the slope (see sense-slope.ts); how far ahead it looks [s]; what a lag of it keeps over a sample. */
export const P_SLOPE = 36;
export const P_AHEAD = 37;
export const P_SLOPE_KEPT = 45;
/** 1: hold can change hands: rules of the unit, acts of the rider, faults of the sensor. */
export const P_HOLD = 46;
/** The rider's brake takes off no more than this [m/s2]. */
export const P_STRONGEST_BRAKE = 47;
export const P_SIZE = 48;

// --- p[P_SOURCE]: when tank or battery is drawn from; 0: there is none ---
export const DRAWN_BY_SAMPLE = 1;
export const DRAWN_BY_CHUNK = 2;

// --- lags: a row of decays over a whole step, and one over a part of it; see lags.ts ---
export const G_DRIVE_HALF = 0;
export const G_PULL_HALF = 1;
export const G_DRIVE = 2;
export const G_PULL = 3;
export const G_ACTUATOR = 4;
/** Of the sensor's filter: decay, weights of the rise of speed and of the accelerations at both ends. */
export const G_FILTER = 5;
export const G_FILTER_RISE = 6;
export const G_FILTER_BEGIN = 7;
export const G_FILTER_END = 8;
export const G_STRIDE = 9;
/** After a whole step in which rate limit or slack has a say: mean throttle, throttle, actuator, plate. */
export const G_MOVED_MEAN = 18;
export const G_MOVED_DRIVE = 19;
export const G_MOVED_ACTUATOR = 20;
export const G_MOVED_PLATE = 21;
export const G_SIZE = 22;

// --- road table: a row a cell between two knots; value at the near knot and change per unit of station ---
export const R_STATION = 0;
export const R_LENGTH = 1;
/** g sin(theta), headwind: with a third place, the integral over the station up to the near knot. */
export const R_SIN = 2;
export const R_HEADWIND = 5;
/** g cos(theta). */
export const R_COS = 8;
export const R_CROSSWIND = 10;
/** Half the air density. */
export const R_AIR = 12;
/** Full-throttle torque over its value at sea level. */
export const R_DERATE = 14;
export const R_STRIDE = 16;

// --- here: the cells of road and drive in which the vehicle is, forces per unit of effective mass ---
export const H_STATION = 0;
export const H_LENGTH = 1;
export const H_SIN = 2;
export const H_COS = 4;
export const H_HEADWIND = 6;
export const H_AIR = 8;
export const H_DERATE = 10;
/** Edges of the drive's cell: speed, throttle. */
export const H_FLOOR = 12;
export const H_CEILING = 13;
export const H_LOW = 14;
export const H_HIGH = 15;
/** The drive's law over vehicle speed, a0 + a1 v + x (b0 + b1 v + b2 v^2 + b3 / v), and what derating by all of it takes away. */
export const H_LAW = 16;
export const H_LOSS = 22;
/** One over the effective mass and over the ratio in hand; Infinity with the clutch open. */
export const H_PER_MASS = 28;
export const H_PER_RATIO = 29;
export const H_SIZE = 30;

// --- what a kernel returns ---
export const RUNNING = 0;
export const END_OF_ROAD = 1;
export const STOPPED = 2;
export const STALLED = 3;
export const NON_FINITE = 4;
