import { fromDeg, fromKm, fromKmh, fromPct } from '../units/convert.ts';

/** Where a column of a CSV track goes, and what its cells may be. */
export interface CsvColumn {
  readonly field:
    | 'distance'
    | 'latitudeDeg'
    | 'longitudeDeg'
    | 'elevation'
    | 'grade'
    | 'heading'
    | 'headwind'
    | 'time'
    | 'speed';
  /** Range of a cell, in the column's own unit. */
  readonly least: number;
  readonly most: number;
  readonly convert: (value: number) => number;
}

const same = (value: number): number => value;
const ANY = Number.MAX_VALUE;

/** The columns a CSV track may have, by name. */
export const CSV_COLUMNS: Readonly<Record<string, CsvColumn>> = {
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
};

/** Names that people write without a unit, or with another one, and the columns they mean. */
const MEANT: readonly (readonly [RegExp, readonly string[]])[] = [
  [/^(distance|dist|chainage|station|length|km|x)(_|$)/, ['distance_m', 'distance_km']],
  [/^(lat|latitude)(_|$)/, ['lat_deg']],
  [/^(lon|lng|long|longitude)(_|$)/, ['lon_deg']],
  [/^(elevation|elev|ele|altitude|alt|height|z)(_|$)/, ['elevation_m']],
  [/^(grade|gradient|slope|incline)(_|$)/, ['grade_pct']],
  [/^(heading|bearing|azimuth|course)(_|$)/, ['heading_deg']],
  [/^(headwind|wind)(_|$)/, ['headwind_m_s']],
  [/^(time|t)(_|$)/, ['time_s']],
  [/^(speed|velocity|v)(_|$)/, ['speed_kmh']],
];

/** The allowed names that a wrong one probably means; empty when none is near. */
export function meantColumns(name: string): readonly string[] {
  const plain = name
    .toLowerCase()
    .replace(/[\s([/-]+/g, '_')
    .replace(/[)\]]/g, '');
  return MEANT.find(([pattern]) => pattern.test(plain))?.[1] ?? [];
}
