import type { Vehicle } from '../vehicle/vehicle.ts';
import { atFileKeys } from './at-file-keys.ts';
import { driveOf } from './drive-of.ts';
import { actuatorOf, sensorOf, tractionOf } from './fittings-of.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';
import { roadLoadOf } from './road-load-of.ts';
import { rotatingMassKg } from './vehicle-mass.ts';

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
    roadLoad: atFileKeys(document, 'road_load', { mass: ['published'] }, () =>
      roadLoadOf(file.road_load, mass),
    ),
    drive: driveOf(document, gear),
    actuator: actuatorOf(file.actuator),
    sensor: sensorOf(file.speed_sensor),
    traction: tractionOf(file.traction, surface),
  };
}
