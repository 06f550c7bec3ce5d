import { InputError } from '../problems/input-error.ts';
import type { Warning } from '../problems/warning.ts';
import { STANDARD_GRAVITY } from '../units/constants.ts';
import { toNPerKmh, toNPerKmh2 } from '../units/convert.ts';
import { editCase } from './edit-case.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';
import type { VehicleFile } from './vehicle-schema.ts';
import { placeOf } from './yaml-source.ts';

/** Numbers that a measurement puts into a vehicle file, and what is said of each. */
export interface IdentifiedVehicle {
  /** Null: it was not fitted. */
  readonly cda: number | null;
  readonly crr: number | null;
  /** Growth of the rolling coefficient that the fit had in it, c1 v + c2 v^2 [s/m, s2/m2]: `crr` is what is left of it. */
  readonly growth: { readonly c1: number; readonly c2: number };
  /** Loaded mass [kg]. */
  readonly mass: number | null;
  /** Lines of comment, without the mark: what was measured, how, and how well. */
  readonly provenance: readonly string[];
}

const marked = (lines: readonly string[]): string => lines.map((line) => `# ${line}\n`).join('');

/** As many digits as any measurement is good for. */
const written = (value: number): number => Number(value.toPrecision(5));

/**
 * The text of a vehicle file with measured numbers in the place of its own. Every other byte stays, but for the
 * comments that are put before the road load: they tell where the numbers are from. A road load in the form of
 * regulations stays in it, at the mass and the air that the file states; a table over yaw, a tyre pressure or a
 * published table, which have no place for the numbers, give way to coefficients.
 *
 * @throws InputError `no-place-for-number`, and of editCase: a number that aliases share with other places
 */
export function withIdentified(vehicle: VehicleDocument, found: IdentifiedVehicle): string {
  const { file, source } = vehicle;
  const load = file.road_load;
  let text = source.text;
  const put = (path: readonly string[], value: number): void => {
    text = editCase(text, path, written(value));
  };
  const loaded = file.mass.kerb_kg + file.mass.rider_kg + file.mass.payload_kg;
  if (found.mass !== null) put(['mass', 'kerb_kg'], file.mass.kerb_kg + found.mass - loaded);
  const mass = found.mass ?? loaded;
  const { c1, c2 } = found.growth;
  if ('f0_n' in load) {
    const weight = STANDARD_GRAVITY * (load.test_mass_kg ?? mass);
    // Without a mass of its own the form belongs to the loaded mass: with another one it is another for the same tyres.
    const rescaled = load.test_mass_kg === undefined ? mass / loaded : 1;
    if (found.crr !== null) put(['road_load', 'f0_n'], found.crr * weight);
    else if (rescaled !== 1) put(['road_load', 'f0_n'], load.f0_n * rescaled);
    const linear = found.crr !== null ? toNPerKmh(c1 * weight) : load.f1_n_per_kmh * rescaled;
    if (written(linear) !== written(load.f1_n_per_kmh)) put(['road_load', 'f1_n_per_kmh'], linear);
    if (found.cda !== null)
      put(['road_load', 'f2_n_per_kmh2'], toNPerKmh2((load.air_density_kg_m3 / 2) * found.cda));
  } else if ('cda_m2' in load && 'crr' in load) {
    if (found.cda !== null) put(['road_load', 'cda_m2'], found.cda);
    if (found.crr !== null) {
      put(['road_load', 'crr'], found.crr);
      for (const [key, value] of [
        ['crr_v_s_per_m', c1],
        ['crr_v2_s2_per_m2', c2],
      ] as const)
        if (load[key] !== value) put(['road_load', key], value);
    }
  } else if (found.cda !== null && found.crr !== null)
    text = editCase(text, ['road_load'], {
      cda_m2: written(found.cda),
      ...('cda_yaw_per_rad2' in load ? { cda_yaw_per_rad2: load.cda_yaw_per_rad2 } : {}),
      crr: written(found.crr),
      ...(c1 === 0 ? {} : { crr_v_s_per_m: written(c1) }),
      ...(c2 === 0 ? {} : { crr_v2_s2_per_m2: written(c2) }),
    });
  else if (found.cda !== null || found.crr !== null)
    throw new InputError({
      code: 'no-place-for-number',
      place: placeOf(source, ['road_load']),
      message: 'this form of road load has no place for one of the two numbers alone',
      found: found.cda === null ? 'a rolling coefficient' : 'a drag area',
      allowed: 'cda_m2 with crr, or f0_n with f2_n_per_kmh2; or both numbers fitted',
    });
  const comment = marked(found.provenance);
  const at = text.search(/^["']?road_load["']?\s*:/m);
  return at < 0 ? comment + text : text.slice(0, at) + comment + text.slice(at);
}

/** Whether a road load has places of its own for a drag area and a rolling coefficient; one that has none gives way to both. */
export const hasOwnPlaces = (load: VehicleFile['road_load']): boolean =>
  'f0_n' in load || ('cda_m2' in load && 'crr' in load);

/** What the text of `withIdentified` no longer says that the file said: a form that gave way to coefficients. */
export function identifiedWarnings(
  { file }: VehicleDocument,
  { cda, crr }: Pick<IdentifiedVehicle, 'cda' | 'crr'>,
): readonly Warning[] {
  const load = file.road_load;
  if (hasOwnPlaces(load) || cda === null || crr === null) return [];
  return [{ code: 'road-load-replaced', message: replacedWords(load) }];
}

function replacedWords(load: VehicleFile['road_load']): string {
  if ('cda_table' in load)
    return `The road load had its drag area in cda_table over yaw up to ${load.cda_table.at(-1)!.yaw_deg}°; the file that was written has one drag area, that without yaw: a side wind no longer changes it. Multiply the rows of the table by new over old and put them back where that matters.`;
  if ('tyre_pressure_bar' in load)
    return `The road load had its rolling coefficient from tyre_pressure_bar (${load.tyre_pressure_bar} bar); the file that was written has the measured one, which is that of the tyres on that day: another pressure no longer changes it.`;
  return 'The road load was the row of a published table for the mass; the file that was written has the two measured numbers in its place, and another mass no longer takes another row.';
}

/** What is known of a vehicle that has no file yet. */
export interface NewVehicle {
  readonly cda: number;
  readonly crr: number;
  /** Loaded mass [kg], and that of what turns with the wheels. */
  readonly mass: number;
  readonly rotatingMass: number;
  readonly provenance: readonly string[];
  /** What is said of the masses. */
  readonly massWords: string;
}

/** A commented vehicle file around a measured road load: the drive in it is a stand-in, and says so. */
export function newIdentifiedVehicle(vehicle: NewVehicle): string {
  return `# A vehicle written by ridgehold identify. What was measured says so; the drive is a stand-in: put your own in its place.
name: Identified vehicle

# ${vehicle.massWords} kerb_kg has all of it here: split it into kerb_kg, rider_kg and payload_kg.
mass: {kerb_kg: ${written(vehicle.mass)}, rotating_kg: ${written(vehicle.rotatingMass)}}

${marked(vehicle.provenance)}road_load: {cda_m2: ${written(vehicle.cda)}, crr: ${written(vehicle.crr)}}

# Not measured: an invented drive of a light motorcycle, so that the file can be run. \`ridgehold schema vehicle\` lists all kinds.
drive:
  kind: force
  peak_force_n: 340
  peak_power_kw: 8
  closed_throttle_force_n: 45
  lag_s: 0.15
# actuator and speed_sensor are left out: ideal, and the report says so.
`;
}
