import { InputError } from '../problems/input-error.ts';
import type { Place } from '../problems/place.ts';
import {
  CSV_COLUMNS,
  type CsvColumn,
  type CsvVocabulary,
  MEANT_TRACK_COLUMNS,
} from '../track/csv-columns.ts';
import { fromKw, fromPct } from '../units/convert.ts';

/** What a column of a log says. */
export type LogField =
  | 'time'
  | 'speed'
  | 'distance'
  | 'elevation'
  | 'grade'
  | 'headwind'
  | 'heading'
  | 'latitudeDeg'
  | 'longitudeDeg'
  | 'throttle'
  | 'wheelPower'
  | 'run'
  | 'direction';

/** Columns that a log has in common with a track. */
const SHARED = [
  'time_s',
  'speed_kmh',
  'distance_m',
  'distance_km',
  'elevation_m',
  'grade_pct',
  'headwind_m_s',
  'heading_deg',
  'lat_deg',
  'lon_deg',
] as const;

const same = (value: number): number => value;
const ofTrack = Object.fromEntries(SHARED.map((name) => [name, CSV_COLUMNS[name] as CsvColumn<LogField>]));

function checkLogColumns(seen: ReadonlyMap<LogField, string>, place: Place): void {
  const refuse = (message: string, allowed: string): never => {
    const found = [...seen.values()].join(', ');
    throw new InputError({ code: 'missing-column', place, message, found, allowed });
  };
  if (!seen.has('time')) refuse('the log does not say when', 'time_s');
  if (!seen.has('speed')) refuse('the log has no speed', 'speed_kmh or speed_m_s');
  if (seen.has('latitudeDeg') !== seen.has('longitudeDeg'))
    refuse('a latitude needs a longitude', 'lat_deg, lon_deg');
}

/** What a log of a coast-down, of a step of the throttle or of a ride may say. */
export const LOG_VOCABULARY: CsvVocabulary<LogField> = {
  columns: {
    ...ofTrack,
    speed_m_s: { field: 'speed', least: 0, most: 280, convert: same },
    throttle_pct: { field: 'throttle', least: -100, most: 100, convert: fromPct },
    wheel_power_kw: { field: 'wheelPower', least: -1000, most: 1000, convert: fromKw },
  },
  words: { run: { field: 'run' }, direction: { field: 'direction' } },
  mayBeEmpty: new Set(),
  meant: [
    [/^(throttle|tps|pedal|grip|accelerator)(_|$)/, ['throttle_pct']],
    [/^(wheel_power|power|p)(_|$)/, ['wheel_power_kw']],
    [/^(run|lap|trial|test)(_|$)/, ['run']],
    [/^(direction|dir|way)(_|$)/, ['direction']],
    [/^(speed|velocity|v)(_|$)/, ['speed_kmh', 'speed_m_s']],
    ...MEANT_TRACK_COLUMNS,
  ],
  check: checkLogColumns,
};
