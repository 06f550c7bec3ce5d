import { fromDeg, fromNPerKmh, fromNPerKmh2 } from '../units/convert.ts';
import { roadLoadOfCoefficients, roadLoadOfRegulation } from '../vehicle/road-load.ts';
import type { RoadLoad, Vehicle } from '../vehicle/vehicle.ts';
import { atFileKeys } from './at-file-keys.ts';
import { driveOf } from './drive-of.ts';
import { actuatorOf, sensorOf, tractionOf } from './fittings-of.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';
import { rotatingMassKg } from './vehicle-mass.ts';
import type { VehicleFile } from './vehicle-schema.ts';

/** What a case says of the ride, where the vehicle file does not have the last word. */
export interface Ride {
  /** Engaged gear, from 1; null: that of the vehicle file. */
  readonly gear: number | null;
  readonly surface: 'dry' | 'wet';
}

/**
 * The vehicle of a file in SI, its drive compiled to the one drive law.
 *
 * @throws InputError for what the compilers of `vehicle/` refuse, with the places of the file
 */
export function vehicleOf(
  document: VehicleDocument,
  { gear, surface }: Ride = { gear: null, surface: 'dry' },
): Vehicle {
  const { file } = document;
  const { kerb_kg, rider_kg, payload_kg } = file.mass;
  const mass = kerb_kg + rider_kg + payload_kg;
  return {
    name: file.name ?? 'vehicle',
    mass,
    payload: payload_kg,
    rotatingMass: rotatingMassKg(file),
    roadLoad: atFileKeys(document, 'road_load', {}, () => roadLoadOf(file.road_load, mass)),
    drive: driveOf(document, gear),
    actuator: actuatorOf(file.actuator),
    sensor: sensorOf(file.speed_sensor),
    traction: tractionOf(file.traction, surface),
  };
}

function roadLoadOf(file: VehicleFile['road_load'], mass: number): RoadLoad {
  if ('f0_n' in file)
    return roadLoadOfRegulation({
      f0: file.f0_n,
      f1: fromNPerKmh(file.f1_n_per_kmh),
      f2: fromNPerKmh2(file.f2_n_per_kmh2),
      testMass: file.test_mass_kg ?? mass,
      airDensity: file.air_density_kg_m3,
      yawGain: file.cda_yaw_per_rad2,
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
