import { fromNPerKmh2 } from '../units/convert.ts';
import { checkSpec } from './check-spec.ts';
import type { RegulationSpec } from './road-load.ts';

/** Road loads that regulations publish for motorcycles whose own is not known, F = a + b V^2 by loaded mass. */
export const PUBLISHED_ROAD_LOADS = ['40 CFR 86.529-98', 'UN GTR 2'] as const;

export type PublishedRoadLoad = (typeof PUBLISHED_ROAD_LOADS)[number];

/** Figure F98-9 from an inertia of 100 kg up in steps of 10 kg, as far as it has been seen: A [N] and C [N/(km/h)2]. */
const CFR_A = [
  0, 0.82, 1.7, 2.57, 3.44, 4.32, 5.19, 6.06, 6.94, 7.81, 8.69, 9.56, 10.43, 11.31, 12.18, 13.06, 13.93, 14.8,
  15.68, 16.55, 17.43, 18.3, 19.17, 20.05, 20.92,
] as const;
const CFR_C = [
  0.0224, 0.0227, 0.023, 0.0233, 0.0235, 0.0238, 0.0241, 0.0244, 0.0246, 0.0249, 0.0252, 0.0255, 0.0257,
  0.026, 0.0263, 0.0266, 0.0268, 0.0271, 0.0274, 0.0277, 0.0279, 0.0282, 0.0285, 0.0288, 0.029,
] as const;

/** Range of the loaded mass [kg]: of the rows of 40 CFR 86.529-98, and of those of UN GTR No. 2. */
const MASSES = {
  '40 CFR 86.529-98': { least: 95, greatest: 345 },
  'UN GTR 2': { least: 95, greatest: 505 },
} as const;

/** Reference air of road load tests [kg/m3]: 40 CFR 1066.310, and dry air at 100 kPa and 293 K (from memory). */
const AIR_DENSITY = { '40 CFR 86.529-98': 1.17, 'UN GTR 2': 1.189 } as const;

/**
 * Published road load for a loaded mass, in steps of 10 kg. A step is not a line: 205 kg belongs to the row of 200 kg,
 * 206 kg to that of 210 kg.
 *
 * - US 40 CFR 86.529-98, figure F98-9: A and C by inertia, 100 to 340 kg. It names no air; 1.17 kg/m3 is that of
 *   40 CFR 1066.310.
 * - UN GTR No. 2, annex 3 (also Reg. (EU) 134/2014), from memory: a = 0.088 m [N, one decimal], the rolling of the
 *   front wheel alone, and b = 0.000015 m + 0.02 [N/(km/h)2, four decimals].
 *
 * The second is set on a roller on which the driven tyre adds its own loss: on a road it is on the low side.
 *
 * @param table one of `PUBLISHED_ROAD_LOADS`
 * @param mass of vehicle and rider [kg], 95 to 345 and 95 to 505
 * @returns for `roadLoadOfRegulation`
 * @throws InputError `out-of-range`
 */
export function publishedRoadLoad(table: PublishedRoadLoad, mass: number): RegulationSpec {
  checkSpec('published road load', [{ key: 'mass', value: mass, unit: 'kg', ...MASSES[table] }]);
  const step = Math.max(0, Math.ceil((Math.round(mass) - 105) / 10));
  const testMass = 100 + 10 * step;
  const airDensity = AIR_DENSITY[table];
  if (table === '40 CFR 86.529-98')
    return { f0: CFR_A[step]!, f1: 0, f2: fromNPerKmh2(CFR_C[step]!), testMass, airDensity };
  // Whole tenths and ten-thousandths: a half is then exact and goes up, as the table has it.
  const a = Math.round((88 * testMass) / 100) / 10;
  const b = Math.round((15 * testMass) / 100 + 200) / 10_000;
  return { f0: a, f1: 0, f2: fromNPerKmh2(b), testMass, airDensity };
}
