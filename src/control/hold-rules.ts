import { BUS_MEASURED, BUS_REFERENCE } from './bus.ts';
import type { SpeedRule, SupervisorSetup } from './supervisor-setup.ts';

/** Rules by which the unit itself ends hold, in the order in which they are looked at. */
export const RULES = ['sensor_not_believed', 'below_lowest_speed', 'too_slow', 'too_fast'] as const;

/** The rules of a speed-hold unit, looked at once a sample. */
export interface HoldRules {
  /** Hold takes over with the measurement on the bus: what the rules remember starts anew. */
  readonly begin: (bus: Float64Array) => void;
  /**
   * Looks at the measurement and the reference on the bus.
   *
   * @param overridden the rider has asked for more speed: too fast is not looked at
   * @returns 1 + the place in RULES of the first rule that ends hold; 0: none
   */
  readonly broken: (bus: Float64Array, overridden: boolean) => number;
  /** True where hold may not take over at a measured speed [m/s]. */
  readonly refuses: (measured: number) => boolean;
}

/**
 * Compiles the rules. With measured speed y, reference r, sample time Ts, hold ends at sample k where
 *
 *     sensor_not_believed   |y(k) - y(k - 1)| > believable Ts
 *     below_lowest_speed    y(k) < lowest
 *     too_slow, too_fast    r - y, or y - r, has been above `by` at every sample of the last `for` seconds
 *
 * The reference is the set speed but while it is on its way to it: at a resume and after taps, or no resume from far
 * below could ever come to its end. A measurement that is not believed says nothing about the rest.
 *
 * @param sample [s]
 * @param memory first of three places of the bus that the rules have to themselves
 */
export function holdRules(setup: SupervisorSetup, sample: number, memory: number): HoldRules {
  const seen = memory;
  const slow = memory + 1;
  const fast = memory + 2;
  const by = (rule: SpeedRule | null): number => rule?.by ?? Number.POSITIVE_INFINITY;
  const samples = (rule: SpeedRule | null): number => Math.ceil((rule?.for ?? 0) / sample - 1e-9);
  // In a typed array, because numbers that a closure holds are boxed and checked at every sample.
  const limits = Float64Array.of(
    setup.believable === null ? Number.POSITIVE_INFINITY : setup.believable * sample,
    setup.lowestSpeed,
    by(setup.tooSlow),
    samples(setup.tooSlow),
    by(setup.tooFast),
    samples(setup.tooFast),
  );

  const begin = (bus: Float64Array): void => {
    bus[seen] = bus[BUS_MEASURED];
    bus[slow] = bus[fast] = 0;
  };
  const broken = (bus: Float64Array, overridden: boolean): number => {
    const measured = bus[BUS_MEASURED];
    const error = bus[BUS_REFERENCE] - measured;
    const change = measured - bus[seen];
    bus[seen] = measured;
    // Samples in a row, the first of which is no time yet.
    bus[slow] = error > limits[2] ? bus[slow] + 1 : 0;
    bus[fast] = !overridden && -error > limits[4] ? bus[fast] + 1 : 0;
    if (change > limits[0] || change < -limits[0]) return 1;
    if (measured < limits[1]) return 2;
    if (bus[slow] > limits[3]) return 3;
    if (bus[fast] > limits[5]) return 4;
    return 0;
  };
  return { begin, broken, refuses: (measured) => measured < limits[1] };
}
