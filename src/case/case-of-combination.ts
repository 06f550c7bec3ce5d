import type { CaseFile } from './case-schema.ts';
import { type Combination, ownCombination } from './matrix-of.ts';
import type { CaseDocument } from './read-case-file.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';

/** A case with its vehicle, both before they are brought to SI. */
export interface CombinedCase {
  readonly document: CaseDocument;
  readonly vehicle: VehicleDocument;
}

type Hold = CaseFile['hold'];

/**
 * A case as a combination of its matrix has it: the same case with other values under some keys, so that everything
 * else that is made of it is made by the same functions.
 *
 * Driven the other way, changes of set speed and shifts stay at their places on the ground: what held behind a place
 * on the way there holds before it on the way back. Road load that a regulation measured stays that of its test mass,
 * which without one of its own is the mass of the case itself.
 *
 * @param lengthKm of the driven road
 */
export function caseOfCombination(
  document: CaseDocument,
  vehicle: VehicleDocument,
  { load, wind, direction, gear, setSpeedKmh }: Combination,
  lengthKm: number,
): CombinedCase {
  const { file } = document;
  const own = ownCombination(document, vehicle);
  const { wind: _, ...still } = file;
  const started: Hold = {
    ...file.hold,
    set_speed_kmh: setSpeedKmh,
    ...(gear === null || gear === own.gear ? {} : { gear }),
  };
  const hold = direction === own.direction ? started : turnedHold(started, gear, lengthKm);
  return {
    document: {
      ...document,
      file: {
        ...still,
        ...(wind.file ? { wind: wind.file } : {}),
        track: { ...file.track, direction },
        hold,
      },
    },
    vehicle: loaded(vehicle, load),
  };
}

function turnedHold(hold: Hold, gear: number | null, lengthKm: number): Hold {
  const { changes, shifts } = hold;
  const speeds = [hold.set_speed_kmh, ...changes.map(({ set_speed_kmh }) => set_speed_kmh)];
  const gears = [gear ?? 1, ...shifts.map((shift) => shift.gear)];
  return {
    ...hold,
    set_speed_kmh: speeds.at(-1)!,
    changes: changes
      .map((change, i) =>
        'at_km' in change ? { ...change, at_km: lengthKm - change.at_km, set_speed_kmh: speeds[i]! } : change,
      )
      .reverse(),
    ...(shifts.length === 0 ? {} : { gear: gears.at(-1)! }),
    shifts: shifts.map(({ at_km }, i) => ({ at_km: lengthKm - at_km, gear: gears[i]! })).reverse(),
  };
}

function loaded(vehicle: VehicleDocument, load: Combination['load']): VehicleDocument {
  const { mass, road_load } = vehicle.file;
  const own = mass.kerb_kg + mass.rider_kg + mass.payload_kg;
  return {
    ...vehicle,
    file: {
      ...vehicle.file,
      mass: { ...mass, rider_kg: load.riderKg, payload_kg: load.payloadKg + load.pillionKg },
      road_load:
        'f0_n' in road_load || 'published' in road_load
          ? { ...road_load, test_mass_kg: road_load.test_mass_kg ?? own }
          : road_load,
    },
  };
}
