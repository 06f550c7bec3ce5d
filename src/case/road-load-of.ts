import { fromBar, fromDeg, fromNPerKmh, fromNPerKmh2 } from '../units/convert.ts';
import { publishedRoadLoad } from '../vehicle/published-road-load.ts';
import { roadLoadOfCoefficients, roadLoadOfRegulation } from '../vehicle/road-load.ts';
import { tyreRolling } from '../vehicle/tyre-rolling.ts';
import type { RoadLoad } from '../vehicle/vehicle.ts';
import type { VehicleFile } from './vehicle-schema.ts';

/**
 * Road load of a vehicle file.
 *
 * @param mass of the vehicle as loaded [kg], to which a table without a mass of its own belongs
 * @throws InputError `out-of-range`: a published table has no row for the mass
 */
export function roadLoadOf(file: VehicleFile['road_load'], mass: number): RoadLoad {
  if ('f0_n' in file)
    return roadLoadOfRegulation({
      f0: file.f0_n,
      f1: fromNPerKmh(file.f1_n_per_kmh),
      f2: fromNPerKmh2(file.f2_n_per_kmh2),
      testMass: file.test_mass_kg ?? mass,
      airDensity: file.air_density_kg_m3,
      yawGain: file.cda_yaw_per_rad2,
    });
  if ('published' in file) {
    const row = publishedRoadLoad(file.published, file.test_mass_kg ?? mass);
    return roadLoadOfRegulation({ ...row, yawGain: file.cda_yaw_per_rad2 });
  }
  if ('tyre_pressure_bar' in file)
    return roadLoadOfCoefficients({
      cda: file.cda_m2,
      yawGain: file.cda_yaw_per_rad2,
      ...tyreRolling(fromBar(file.tyre_pressure_bar)).slow,
    });
  const rolling = { c0: file.crr, c1: file.crr_v_s_per_m, c2: file.crr_v2_s2_per_m2 };
  if ('cda_m2' in file)
    return roadLoadOfCoefficients({ cda: file.cda_m2, yawGain: file.cda_yaw_per_rad2, ...rolling });
  const rows = file.cda_table;
  return roadLoadOfCoefficients({
    cda: rows[0]!.cda_m2,
    yawTable: {
      yaw: Float64Array.from(rows, ({ yaw_deg }) => fromDeg(yaw_deg)),
      cda: Float64Array.from(rows, ({ cda_m2 }) => cda_m2),
    },
    ...rolling,
  });
}
