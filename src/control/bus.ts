/** Places of the bus between the loop and a controller. Speeds as the sensor indicates them [m/s], throttle as a ratio. */

/** Measured speed: scale error, filter and delays included. */
export const BUS_MEASURED = 0;
/** Reference of this sample, and the set speed that it moves to. */
export const BUS_REFERENCE = 1;
export const BUS_TARGET = 2;
/** Greatest change of the reference in one sample [m/s]; Infinity: it steps. */
export const BUS_REFERENCE_STEP = 3;
/** Command before and after it is limited to the drive's range. */
export const BUS_COMMAND = 4;
export const BUS_LIMITED = 5;
/** Parts of the command; the derivative counts as proportional, an observer's estimate as feedforward. */
export const BUS_PROPORTIONAL = 6;
export const BUS_INTEGRAL = 7;
export const BUS_FEEDFORWARD = 8;
/** What the controller carries to its next sample: twelve places, shared out in memory.ts. */
export const BUS_MEMORY = 9;
/** Throttle at which a locked throttle is held; the loop sets it. */
export const BUS_LOCK = 21;
/** Gear in hand, index into the drive's gears; with the clutch open the one that comes next. The loop sets it. */
export const BUS_GEAR = 22;
/** What tells the slope [m/s2], set by the loop for a controller that asks for it: an accelerometer's reading a + g sin(theta), or g sin(theta) of the known road ahead. */
export const BUS_SLOPE = 23;
/** Samples in which something that is wrong in the controller had a say: a place for each of BITES in bites.ts. */
export const BUS_BITES = 24;
export const BUS_SIZE = 30;
