// Places of the flat arrays that the kernels work on. SI. Plain literals, because bundlers put those in place of the
// names, and an engine that reads each place from a module's variable is half as fast.

// --- state: the bus of the controller (14 places, see control/bus.ts), then the plant; a copy of it is a checkpoint ---
/** Samples since the start, and seconds of a last sample that was cut short. */
export const TICK = 14;
export const PARTIAL = 15;
/** Station [m] or [s], and the road cell it lies in. */
export const STATION = 16;
export const CELL = 17;
export const SPEED = 18;
/** Acceleration at the end of the last step. */
export const ACCELERATION = 19;
/** Throttle at the actuator, and behind the drive's lag. */
export const ACTUATOR = 20;
export const THROTTLE = 21;
/** Output of the sensor's filter, before its scale error. */
export const FILTERED = 22;
/** Indices of the drive's cell over speed and throttle. */
export const SPEED_CELL = 23;
export const THROTTLE_CELL = 24;
/** Energies since the start [J], the integral of their magnitudes, the distance travelled [m]. */
export const DRIVE_WORK = 25;
export const REGENERATION_WORK = 26;
export const AERO_WORK = 27;
export const ROLLING_WORK = 28;
export const CLIMB_WORK = 29;
export const BRAKE_WORK = 30;
export const WORK_MAGNITUDE = 31;
export const TRAVELLED = 32;
export const START_SPEED = 33;
/** Air where a throttle was locked `level` the last time: density [kg/m3], temperature [K]. */
export const LOCK_DENSITY = 34;
export const LOCK_TEMPERATURE = 35;
/** Set-speed changes that have happened. */
export const CHANGES = 36;
/** Limited command of the last sample that was recorded. */
export const LAST_COMMAND = 37;
/** Rows of the log that the kernel has just written. */
export const LOGGED = 38;
/** History for delayed measurement: rows of [value, slope after it, slope before the next], see delayed-speed.ts. */
export const HISTORY = 39;
export const HISTORY_STRIDE = 3;

// --- log: a row a sample of the chunk that a kernel has just run; at the start of the sample, or summed over it ---
export const L_SPEED = 0;
export const L_ACTUATOR = 1;
/** Command after and before it is limited. */
export const L_LIMITED = 2;
export const L_COMMAND = 3;
/** 1: it began with the actuator at its rate limit. */
export const L_RATED = 4;
export const L_BRAKE_FORCE = 5;
/** Seconds and distance travelled. */
export const L_TIME = 6;
export const L_DISTANCE = 7;
/** Work of the drive while it pushed, and while it held back. */
export const L_PUSH = 8;
export const L_HOLD = 9;
export const L_DRIVE_FORCE = 10;
export const L_ACCELERATION = 11;
export const L_STRIDE = 12;
export const LOG_ROWS = 128;

// --- parameters: constant over a run ---
export const P_SAMPLE = 0;
/** Steps a sample and length of a step. */
export const P_STEPS = 1;
export const P_STEP = 2;
export const P_ROAD_CELLS = 3;
/** 1: the station is time. */
export const P_TIMED = 4;
export const P_MASS = 5;
export const P_EFFECTIVE_MASS = 6;
export const P_CDA = 7;
export const P_C0 = 8;
export const P_C1 = 9;
export const P_C2 = 10;
export const P_ACTUATOR_LAG = 11;
export const P_DRIVE_LAG = 12;
/** Greatest rate of the actuator [1/s], and the gap |u - y| above which it rules; both Infinity without a limit. */
export const P_RATE = 13;
export const P_RATE_GAP = 14;
/** Weights of the two exponentials of the lags: ta / (ta - td), and 1 / td where the two are equal. */
export const P_LAG_WEIGHT = 15;
export const P_LAG_EQUAL = 16;
/** e^(-t / lag) at half a step and at a whole one. */
export const P_ACTUATOR_HALF = 17;
export const P_ACTUATOR_FULL = 18;
export const P_DRIVE_HALF = 19;
export const P_DRIVE_FULL = 20;
export const P_FILTER = 21;
export const P_FILTER_FULL = 22;
/** Measured over true speed. */
export const P_SCALE = 23;
/** Transport and computing delay in samples, and rows of the history. */
export const P_DELAY = 24;
export const P_HISTORY = 25;
export const P_STALL_SPEED = 26;
export const P_LOW = 27;
export const P_HIGH = 28;
/** 1: the drive's force depends on altitude. */
export const P_DERATED = 29;
/** 1: there is crosswind somewhere. */
export const P_CROSSWIND = 30;
export const P_YAW_GAIN = 31;
export const P_SPEED_CELLS = 32;
export const P_THROTTLE_CELLS = 33;
/** Half-widths of the bands: four places. */
export const P_BANDS = 34;
/** True speed over the units of the set speed; overspeed at which the rider brakes, Infinity: never. */
export const P_TO_TRUE = 38;
export const P_BRAKES_ABOVE = 39;
export const P_BAND_COUNT = 40;
/** Mean over a step of e^(-t / lag) for actuator and drive, and of t e^(-t / lag) for the drive. */
export const P_ACTUATOR_MEAN = 41;
export const P_DRIVE_MEAN = 42;
export const P_DRIVE_MOMENT = 43;
export const P_SIZE = 44;

// --- road table: a row a cell between two knots; value at the near knot and change per unit of station ---
export const R_STATION = 0;
export const R_LENGTH = 1;
/** g sin(theta), g cos(theta). */
export const R_SIN = 2;
export const R_COS = 4;
export const R_HEADWIND = 6;
export const R_CROSSWIND = 8;
/** Half the air density. */
export const R_AIR = 10;
/** Full-throttle torque over its value at sea level. */
export const R_DERATE = 12;
/** Horizontal distance. */
export const R_DISTANCE = 14;
/** Integrals of g sin(theta) and of the headwind over the station up to the near knot. */
export const R_CLIMB = 16;
export const R_WIND_RUN = 17;
export const R_STRIDE = 18;

// --- what a kernel returns ---
export const RUNNING = 0;
export const END_OF_ROAD = 1;
export const STOPPED = 2;
export const STALLED = 3;
export const NON_FINITE = 4;

/** The rider's brake: time constant with which it takes the overspeed away [s], and strongest deceleration [m/s2]. */
export const BRAKE_TIME = 0.5;
export const BRAKE_LIMIT = 3;
