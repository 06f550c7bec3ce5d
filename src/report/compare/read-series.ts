import { InputError } from '../../problems/input-error.ts';
import { fromKmh } from '../../units/convert.ts';
import type { Curve } from '../model/columns.ts';

/** What a series tells for the charts of a comparison, over the distance [m]. */
export interface Series {
  /** Speed error [m/s]; NaN while hold is off. */
  readonly error: Curve;
  /** Throttle at the actuator [%]. */
  readonly throttle: Curve;
}

/** What a candidate did in two results. */
export interface SeriesPair {
  readonly before: Series;
  readonly after: Series;
}

/** One row a bin, or one a controller sample: told apart by a column that only one of them has. */
const BY_BIN = [
  'speed_min_kmh',
  'speed_max_kmh',
  'speed_error_kmh',
  'throttle_pct',
  'throttle_min_pct',
  'throttle_max_pct',
];
const BY_SAMPLE = ['speed_kmh', 'actuator_pct'];

/**
 * Reads a series-<candidate>.csv that `ridgehold run` wrote.
 *
 * @param file name for messages
 * @throws InputError `not-a-series`: a column is missing, a row is cut, a number is none
 */
export function readSeries(text: string, file: string): Series {
  const lines = text.split('\r\n');
  if (lines.pop() !== '') throw damaged(file, lines.length + 1, 'the last line has no end', 'whole lines');
  const header = lines[0]?.split(',') ?? [];
  const fields = lines.slice(1).map((line, i) => {
    const row = line.split(',');
    if (row.length !== header.length)
      throw damaged(file, i + 2, `${row.length} fields`, `${header.length}, as in the first line`);
    return row;
  });
  const mode = header.indexOf('mode');
  const isOff = fields.map((row) => row[mode] === 'off');
  const column = (name: string): Float64Array => {
    const at = header.indexOf(name);
    if (at < 0) throw damaged(file, 1, `no column ${name}`, 'the columns of a series');
    return Float64Array.from(fields, (row, i) => {
      // Hold is off in all of such a bin: there is no error.
      if (row[at] === '' && name === 'speed_error_kmh') return Number.NaN;
      const value = row[at] === '' ? Number.NaN : Number(row[at]);
      if (!Number.isFinite(value)) throw damaged(file, i + 2, `${name} '${row[at]}'`, 'a number');
      return value;
    });
  };
  const distance = column('distance_m');
  for (let i = 1; i < distance.length; i++)
    if (distance[i]! < distance[i - 1]!)
      throw damaged(file, i + 2, 'a distance that goes back', 'rows in order along the road');
  const set = column('set_speed_kmh');
  const error = (speed: Float64Array, i: number): number => fromKmh(speed[i]! - set[i]!);
  if (header.includes('actuator_pct')) {
    const [speed, throttle] = BY_SAMPLE.map(column) as [Float64Array, Float64Array];
    const mean = speed.map((_, i) => (isOff[i] ? Number.NaN : error(speed, i)));
    return { error: plain(distance, mean), throttle: plain(distance, throttle) };
  }
  const [low, high, mean, ...throttle] = BY_BIN.map(column) as [
    Float64Array,
    Float64Array,
    Float64Array,
    Float64Array,
    Float64Array,
    Float64Array,
  ];
  const at = middles(distance);
  // The extremes of a bin in which hold ends or begins are those of the rider too: its mean alone is the hold's.
  const held = (speed: Float64Array) => mean.map((kmh, i) => (isOff[i] ? fromKmh(kmh) : error(speed, i)));
  return {
    error: { size: at.length, at, low: held(low), mean: mean.map(fromKmh), high: held(high) },
    throttle: { size: at.length, at, low: throttle[1], mean: throttle[0], high: throttle[2] },
  };
}

const plain = (at: Float64Array, values: Float64Array): Curve => ({
  size: at.length,
  at,
  low: values,
  mean: values,
  high: values,
});

/** Middles of bins that are told by their starts; the last is as long as the one before it. */
function middles(start: Float64Array): Float64Array {
  const last = start.length - 1;
  return start.map((at, i) =>
    i < last ? (at + start[i + 1]!) / 2 : last > 0 ? at + (at - start[last - 1]!) / 2 : at,
  );
}

const damaged = (file: string, line: number, found: string, allowed: string): InputError =>
  new InputError({
    code: 'not-a-series',
    place: { file, line },
    message: 'is not what ridgehold run writes',
    found,
    allowed,
  });
