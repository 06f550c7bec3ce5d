import { InputError } from '../problems/input-error.ts';
import type { Place } from '../problems/place.ts';
import { fromDeg, fromKm, fromKmh, fromPct } from '../units/convert.ts';

/** Where a column goes, and what its cells may be. */
export interface CsvColumn<Field extends string = string> {
  readonly field: Field;
  /** Range of a cell, in the column's own unit. */
  readonly least: number;
  readonly most: number;
  readonly convert: (value: number) => number;
}

/** The columns that a kind of CSV file may have. */
export interface CsvVocabulary<Field extends string = string> {
  /** By name: quantity and unit. */
  readonly columns: Readonly<Record<string, CsvColumn<Field>>>;
  /** Columns of words, by name: a number of a run, a direction. */
  readonly words: Readonly<Record<string, { readonly field: Field }>>;
  /** Columns whose empty cells are read, as NaN; elsewhere an empty cell is refused. */
  readonly mayBeEmpty: ReadonlySet<Field>;
  /** Names that people write without a unit, or with another one, and the columns they mean. */
  readonly meant: readonly (readonly [RegExp, readonly string[]])[];
  /** Refuses a header that lacks something; `seen` has the name of the column by its field. */
  readonly check: (seen: ReadonlyMap<Field, string>, place: Place) => void;
}

/** What a column of a track says. */
export type TrackField =
  | 'distance'
  | 'latitudeDeg'
  | 'longitudeDeg'
  | 'elevation'
  | 'grade'
  | 'heading'
  | 'headwind'
  | 'time'
  | 'speed'
  | 'throttle';

const same = (value: number): number => value;
const ANY = Number.MAX_VALUE;

/** The columns a CSV track may have, by name. */
export const CSV_COLUMNS: Readonly<Record<string, CsvColumn<TrackField>>> = {
  distance_m: { field: 'distance', least: -ANY, most: ANY, convert: same },
  distance_km: { field: 'distance', least: -ANY, most: ANY, convert: fromKm },
  lat_deg: { field: 'latitudeDeg', least: -90, most: 90, convert: same },
  lon_deg: { field: 'longitudeDeg', least: -180, most: 180, convert: same },
  elevation_m: { field: 'elevation', least: -ANY, most: ANY, convert: same },
  grade_pct: { field: 'grade', least: -100, most: 100, convert: fromPct },
  heading_deg: {
    field: 'heading',
    least: -360,
    most: 360,
    convert: (deg) => fromDeg(deg < 0 ? deg + 360 : deg % 360),
  },
  headwind_m_s: { field: 'headwind', least: -100, most: 100, convert: same },
  time_s: { field: 'time', least: -ANY, most: ANY, convert: same },
  speed_kmh: { field: 'speed', least: 0, most: 1000, convert: fromKmh },
  throttle_pct: { field: 'throttle', least: -100, most: 100, convert: fromPct },
};

export const MEANT_TRACK_COLUMNS: readonly (readonly [RegExp, readonly string[]])[] = [
  [/^(distance|dist|chainage|station|length|km|x)(_|$)/, ['distance_m', 'distance_km']],
  [/^(lat|latitude)(_|$)/, ['lat_deg']],
  [/^(lon|lng|long|longitude)(_|$)/, ['lon_deg']],
  [/^(elevation|elev|ele|altitude|alt|height|z)(_|$)/, ['elevation_m']],
  [/^(grade|gradient|slope|incline)(_|$)/, ['grade_pct']],
  [/^(heading|bearing|azimuth|course)(_|$)/, ['heading_deg']],
  [/^(headwind|wind)(_|$)/, ['headwind_m_s']],
  [/^(time|t)(_|$)/, ['time_s']],
  [/^(speed|velocity|v)(_|$)/, ['speed_kmh']],
  [/^(throttle|tps|grip)(_|$)/, ['throttle_pct']],
];

type Seen = ReadonlyMap<TrackField, string>;

function missing(seen: Seen, place: Place, message: string, allowed: string): InputError {
  return new InputError({
    code: 'missing-column',
    place,
    message,
    found: [...seen.values()].join(', '),
    allowed,
  });
}

function checkPlaces(seen: Seen, place: Place): void {
  if (seen.has('latitudeDeg') !== seen.has('longitudeDeg'))
    throw missing(seen, place, 'a latitude needs a longitude', 'lat_deg, lon_deg');
  if (!seen.has('distance') && !seen.has('latitudeDeg'))
    throw missing(
      seen,
      place,
      'the file does not say where its points are',
      'distance_m or distance_km, or lat_deg and lon_deg',
    );
}

function checkTrackColumns(seen: Seen, place: Place): void {
  checkPlaces(seen, place);
  if (!seen.has('elevation') && !seen.has('grade'))
    throw missing(seen, place, 'the file has neither elevation nor grade', 'elevation_m or grade_pct');
}

function checkRideColumns(seen: Seen, place: Place): void {
  checkPlaces(seen, place);
  if (!seen.has('time')) throw missing(seen, place, 'a logged ride needs times', 'time_s');
}

/** What a CSV track may say. Its empty cells are filled by the cleaning. */
export const TRACK_VOCABULARY: CsvVocabulary<TrackField> = {
  columns: CSV_COLUMNS,
  words: {},
  mayBeEmpty: new Set(['elevation', 'grade', 'heading', 'headwind', 'speed', 'throttle']),
  meant: MEANT_TRACK_COLUMNS,
  check: checkTrackColumns,
};

/** The same columns of a ride that was logged: it needs times, and no height. */
export const RIDE_VOCABULARY: CsvVocabulary<TrackField> = { ...TRACK_VOCABULARY, check: checkRideColumns };
