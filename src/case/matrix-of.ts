import { InputError, type Problem } from '../problems/input-error.ts';
import type { CaseFile } from './case-schema.ts';
import { PILLION_KG } from './matrix-schema.ts';
import type { CaseDocument } from './read-case-file.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';
import { windSchema } from './weather-schema.ts';
import { placeOf } from './yaml-source.ts';

/** The lists of a matrix, in the order of its combinations: the last one changes fastest. */
export const MATRIX_LISTS = ['loads', 'winds', 'directions', 'gears', 'set_speeds_kmh'] as const;
export type MatrixList = (typeof MATRIX_LISTS)[number];

/** One combination, in the units of the file. What a list does not say is what the case has. Plain data. */
export interface Combination {
  readonly load: CombinedLoad;
  readonly wind: CombinedWind;
  readonly direction: 'there' | 'back' | 'both';
  /** At the start, from 1; null: the drive has no gears. */
  readonly gear: number | null;
  readonly setSpeedKmh: number;
}
export interface CombinedLoad {
  readonly label: string;
  readonly riderKg: number;
  readonly payloadKg: number;
  readonly pillionKg: number;
}
export interface CombinedWind {
  readonly label: string;
  /** As it was given, at its height [m/s]; 0: still air. */
  readonly speed: number;
  /** Where it blows from, clockwise from true north; null: still air. */
  readonly fromDeg: number | null;
  /** As the file has it; null: still air. */
  readonly file: CaseFile['wind'] | null;
}

/** The combinations of a case, and which of its lists it gives. */
export interface Matrix {
  readonly lists: readonly MatrixList[];
  readonly combinations: readonly Combination[];
}

/**
 * Every combination of the lists of a case, the last list changing fastest; null where the case has no matrix.
 *
 * @throws InputError `no-gears`, `out-of-range` for gears that the vehicle does not have
 */
export function matrixOf(document: CaseDocument, vehicle: VehicleDocument): Matrix | null {
  const { matrix } = document.file;
  if (matrix === undefined) return null;
  refuseGears(document, vehicle);
  const own = ownCombination(document, vehicle);
  const { hold } = document.file;
  const loads = matrix.loads?.map((load) => loadOf(load, own.load)) ?? [own.load];
  const winds = matrix.winds?.map((wind) => windOf(wind, document.file.wind)) ?? [own.wind];
  const gears: readonly (number | null)[] = matrix.gears ?? [own.gear];
  const combinations = loads.flatMap((load) =>
    winds.flatMap((wind) =>
      (matrix.directions ?? [own.direction]).flatMap((direction) =>
        gears.flatMap((gear) =>
          (matrix.set_speeds_kmh ?? [hold.set_speed_kmh]).map(
            (setSpeedKmh): Combination => ({ load, wind, direction, gear, setSpeedKmh }),
          ),
        ),
      ),
    ),
  );
  return { lists: MATRIX_LISTS.filter((list) => matrix[list] !== undefined), combinations };
}

/** What the case itself has. */
export function ownCombination({ file }: CaseDocument, vehicle: VehicleDocument): Combination {
  const { drive, mass } = vehicle.file;
  const engaged = drive?.kind === 'engine' ? (drive.gear ?? drive.gear_ratios.length) : null;
  return {
    load: { label: 'own', riderKg: mass.rider_kg, payloadKg: mass.payload_kg, pillionKg: 0 },
    wind: windOf('own', file.wind),
    direction: file.track.direction,
    gear: engaged === null ? null : (file.hold.gear ?? engaged),
    setSpeedKmh: file.hold.set_speed_kmh,
  };
}

type MatrixFile = NonNullable<CaseFile['matrix']>;

export function loadOf(file: NonNullable<MatrixFile['loads']>[number], own: CombinedLoad): CombinedLoad {
  if (file === 'own') return own;
  if (file === 'solo') return { ...own, label: 'solo', payloadKg: 0 };
  if (file === 'two_up') return { ...own, label: 'two up', pillionKg: PILLION_KG };
  const riderKg = file.rider_kg ?? own.riderKg;
  const payloadKg = file.payload_kg ?? own.payloadKg;
  const pillionKg = file.pillion_kg ?? 0;
  const parts = [
    `rider ${riderKg}`,
    ...(payloadKg > 0 ? [`payload ${payloadKg}`] : []),
    ...(pillionKg > 0 ? [`pillion ${pillionKg}`] : []),
  ];
  return { label: file.name ?? `${parts.join(', ')} kg`, riderKg, payloadKg, pillionKg };
}

const STILL: CombinedWind = { label: 'still air', speed: 0, fromDeg: null, file: null };

function windOf(file: NonNullable<MatrixFile['winds']>[number], own: CaseFile['wind']): CombinedWind {
  if (file === 'none') return STILL;
  if (file === 'own') {
    if (own === undefined) return STILL;
    return { label: windWords(own), speed: own.speed_m_s, fromDeg: own.from_deg, file: own };
  }
  const { name, speed_m_s, from_deg } = file;
  // Without a wind of the case the heights and the terrain are the defaults of its schema.
  const around = own ?? windSchema.parse({ speed_m_s, from_deg });
  return {
    label: name ?? windWords(file),
    speed: speed_m_s,
    fromDeg: from_deg,
    file: { ...around, speed_m_s, from_deg },
  };
}

const windWords = ({ speed_m_s, from_deg }: { speed_m_s: number; from_deg: number }): string =>
  `${speed_m_s} m/s from ${from_deg} deg`;

function refuseGears({ source, file }: CaseDocument, { file: { drive }, source: vehicle }: VehicleDocument) {
  const gears = file.matrix?.gears;
  if (gears === undefined) return;
  const problems: Problem[] = [];
  if (drive?.kind !== 'engine')
    problems.push({
      code: 'no-gears',
      place: placeOf(source, ['matrix', 'gears']),
      message: 'the drive has no gears',
      found: drive === undefined ? 'no drive' : `kind: ${drive.kind}`,
      allowed: 'kind: engine',
    });
  else
    gears.forEach((gear, i) => {
      if (gear > drive.gear_ratios.length)
        problems.push({
          code: 'out-of-range',
          place: placeOf(source, ['matrix', 'gears', i]),
          message: `is no gear of ${vehicle.file}`,
          found: String(gear),
          allowed: `a gear from 1 to ${drive.gear_ratios.length}`,
        });
    });
  const [first, ...others] = problems;
  if (first !== undefined) throw new InputError(first, ...others);
}
