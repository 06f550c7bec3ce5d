import { InputError } from '../problems/input-error.ts';
import { LONGEST_FILL } from './limits.ts';
import { pickPoints } from './pick-points.ts';
import { placeOfPoint } from './place-of-point.ts';
import type { RawTrack } from './raw-track.ts';
import { countPoints, type RepairLog } from './repair-log.ts';

/** What is filled: a column of the raw track, and which of its values can be taken. */
export interface Fillable {
  /** Of the quantity, for messages. */
  readonly name: string;
  readonly values: Float64Array;
  readonly usable: (value: number) => boolean;
}

/**
 * Picks the kept values of a column and fills its holes linearly over distance; at the ends, with the nearest value.
 *
 * @param kept raw indices
 * @param distance of the kept points [m], strictly increasing
 * @returns one value a kept point
 * @throws InputError `long-hole` where a hole is wider than 300 m, `empty-column` where no value is usable
 */
export function fillColumn(
  raw: RawTrack,
  column: Fillable,
  kept: Int32Array,
  distance: Float64Array,
  log: RepairLog,
): Float64Array {
  const { name, values, usable } = column;
  const filled = pickPoints(values, kept);
  const end = kept.length - 1;
  for (let first = 0; first <= end; first++) {
    if (usable(filled[first]!)) continue;
    let last = first;
    while (last < end && !usable(filled[last + 1]!)) last++;
    if (first === 0 && last === end) throw emptyColumn(raw, name);
    const before = Math.max(first - 1, 0);
    const after = Math.min(last + 1, end);
    const width = distance[after]! - distance[before]!;
    if (width > LONGEST_FILL) throw longHole(raw, kept[first]!, name, width);
    noteHole(column, kept[first]!, kept[last]!, last - first + 1, log);
    const from = filled[first === 0 ? after : before]!;
    const to = filled[last === end ? before : after]!;
    for (let k = first; k <= last; k++)
      filled[k] = from + ((to - from) * (distance[k]! - distance[before]!)) / width;
    first = last;
  }
  return filled;
}

function noteHole(
  { name, values }: Fillable,
  first: number,
  last: number,
  points: number,
  log: RepairLog,
): void {
  const value = values[first]!;
  const absent = Number.isNaN(value);
  const why = absent
    ? 'is missing'
    : Number.isFinite(value)
      ? `is impossible (${value})`
      : 'is no finite number';
  const kind =
    name === 'elevation' && value !== Number.POSITIVE_INFINITY ? 'missing_elevation' : 'non_finite';
  log.add(kind, first, last, points, `${name} ${why} at ${countPoints(points)}; interpolated`);
}

export function longHole(raw: RawTrack, index: number, name: string, width: number): InputError {
  return new InputError({
    code: 'long-hole',
    place: placeOfPoint(raw, index),
    message: `${name} is missing over a long stretch`,
    found: `${width.toFixed(0)} m`,
    allowed: `up to ${LONGEST_FILL} m`,
  });
}

export function emptyColumn(raw: RawTrack, name: string): InputError {
  return new InputError({
    code: 'empty-column',
    place: { file: raw.file },
    message: `no point has a usable ${name}`,
    allowed: 'a finite number at each point',
  });
}
