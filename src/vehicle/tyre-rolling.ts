import { fromKmh, fromPerKmh2, toBar } from '../units/convert.ts';
import { checkSpec } from './check-spec.ts';

/** Speed at which the published formula changes its form, with a step [m/s]: 165 km/h. */
export const TYRE_STEP_SPEED = fromKmh(165);

/** Rolling coefficient c0 + c2 v^2. */
export interface RollingCoefficients {
  /** Dimensionless. */
  readonly c0: number;
  /** [s2/m2] */
  readonly c2: number;
}

/**
 * Rolling coefficient of motorcycle tyres over pressure p [bar] and speed V [km/h]:
 *
 *     V < 165:   0.0085 + 0.018 / p + 1.59e-6 V^2 / p
 *     V >= 165:           0.018 / p + 2.91e-6 V^2 / p
 *
 * (J. Bradley, The Racing Motorcycle, 1996; also V. Cossalter, Motorcycle Dynamics.) The two forms do not meet: at
 * 165 km/h the coefficient jumps by 1.32e-6 165^2 / p - 0.0085, up by 0.0075 at 2.25 bar, and down above 4.23 bar.
 * A road load has one form; it is that of `slow` and holds below 165 km/h.
 *
 * @param pressure of the tyres, both alike [Pa], 1 to 4 bar
 * @throws InputError `out-of-range`
 */
export function tyreRolling(pressure: number): {
  readonly slow: RollingCoefficients;
  readonly fast: RollingCoefficients;
} {
  const bar = toBar(pressure);
  checkSpec('tyre', [{ key: 'pressure', value: bar, unit: 'bar', least: 1, greatest: 4 }]);
  return {
    slow: { c0: 0.0085 + 0.018 / bar, c2: fromPerKmh2(1.59e-6) / bar },
    fast: { c0: 0.018 / bar, c2: fromPerKmh2(2.91e-6) / bar },
  };
}
