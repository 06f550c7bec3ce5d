// Who remembers what at BUS_MEMORY. The plain PI (pi.ts) has the first place alone.

/** Integral for the next sample, in throttle, or its count; of the velocity form the increment that is still to come. */
export const INTEGRAL = 9;
/** Gains of the last sample, proportional and derivative, and what they multiplied. */
export const LAST_KP = 10;
export const LAST_KD = 11;
export const LAST_SHAPE = 12;
export const LAST_SLIP = 13;
/** Filtered measurement behind the derivative. */
export const DERIVATIVE = 14;
/** Velocity form: feedforward of the last sample. */
export const LAST_FEEDFORWARD = 15;
/** Slope sensed with an accelerometer [m/s2], and the measurement of the last sample. */
export const SLOPE = 16;
export const SLOPE_MEASURED = 17;
/** Observer: filtered force [N] and throttle, and the measurement of the last sample. */
export const OBSERVED_FORCE = 18;
export const OBSERVED_THROTTLE = 19;
export const OBSERVED_MEASURED = 20;
