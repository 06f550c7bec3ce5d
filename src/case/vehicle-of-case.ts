import { InputError, type Problem } from '../problems/input-error.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { NOT_GIVEN } from './fields.ts';
import { gearsOfRide } from './gears-of-ride.ts';
import type { DefaultUsed } from './list-defaults.ts';
import type { CaseDocument } from './read-case-file.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';
import { speedsOfGears } from './speeds-of-gears.ts';
import { speedsOfUnit } from './speeds-of-unit.ts';
import { unitDefaults } from './unit-of.ts';
import { vehicleOf } from './vehicle-of.ts';
import { placeOf } from './yaml-source.ts';

/**
 * The vehicle as a case rides it: in its gear, on its surface.
 *
 * @throws InputError for what the case asks of a vehicle that does not have it, with the places of the case:
 *   `no-traction`, `no-gears`, `no-clutch`, `out-of-range` (gear), `gear-engaged-already`, and `beyond-the-gear` for set
 *   speeds that the engaged gear cannot turn, `not-in-order` for those that a rule of the unit does not allow; for what the compilers of `vehicle/` refuse, with those of the vehicle
 */
export function vehicleOfCase(document: CaseDocument, vehicle: VehicleDocument): Vehicle {
  const [first, ...others] = rideProblems(document, vehicle);
  if (first !== undefined) throw new InputError(first, ...others);
  const { hold, road } = document.file;
  return vehicleOf(vehicle, { gear: hold.gear ?? null, surface: road.surface ?? 'dry' });
}

/** What a case asks of a vehicle that does not have it: surface, gears, set speeds that a gear cannot turn. */
export function rideProblems(document: CaseDocument, vehicle: VehicleDocument): readonly Problem[] {
  const problems = [
    ...surfaceProblems(document, vehicle),
    ...gearsOfRide(document, vehicle),
    ...speedsOfUnit(document),
  ];
  return problems.length === 0 ? speedsOfGears(document, vehicle) : problems;
}

/** Every default that a ride uses: those of case and vehicle that the other does not have the last word on. */
export function rideDefaults(document: CaseDocument, vehicle: VehicleDocument): readonly DefaultUsed[] {
  const { hold, road } = document.file;
  const dry: DefaultUsed = { key: 'road.surface', value: 'dry', of: 'case', source: NOT_GIVEN };
  const slips = vehicle.file.traction !== undefined && road.surface === undefined;
  return [
    ...document.defaults,
    ...unitDefaults(document),
    ...(slips ? [dry] : []),
    ...vehicle.defaults.filter(({ key }) => hold.gear === undefined || key !== 'drive.gear'),
  ];
}

function surfaceProblems({ source, file }: CaseDocument, vehicle: VehicleDocument): Problem[] {
  if (file.road.surface === undefined || vehicle.file.traction !== undefined) return [];
  return [
    {
      code: 'no-traction',
      place: placeOf(source, ['road', 'surface']),
      message: 'has no meaning for a vehicle whose grip is not known',
      found: file.road.surface,
      allowed: `nothing, or traction in ${vehicle.source.file}`,
    },
  ];
}
