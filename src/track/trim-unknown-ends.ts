import { emptyColumn, longHole } from './fill-column.ts';
import { LONGEST_FILL } from './limits.ts';
import type { RawTrack } from './raw-track.ts';
import { countPoints, type RepairLog } from './repair-log.ts';

/**
 * Leaves out the points before the first and after the last usable elevation, such as those of a receiver that just
 * woke: an end cannot be interpolated, and a level road there would be an invention.
 *
 * @param kept raw indices
 * @param leg see legLength
 * @param usable whether an elevation can be taken
 * @returns raw indices that stay
 * @throws InputError `empty-column`, `long-hole` where more than 300 m would go
 */
export function trimUnknownEnds(
  raw: RawTrack,
  kept: Int32Array,
  leg: (from: number, to: number) => number,
  usable: (elevation: number) => boolean,
  log: RepairLog,
): Int32Array {
  const { elevation } = raw;
  if (elevation === null) return kept;
  const first = kept.findIndex((i) => usable(elevation[i]!));
  if (first < 0) throw emptyColumn(raw, 'elevation');
  const last = kept.findLastIndex((i) => usable(elevation[i]!));
  const leaveOut = (from: number, to: number, points: Int32Array, where: string): void => {
    if (points.length === 0) return;
    let width = 0;
    for (let k = from; k < to; k++) width += leg(kept[k]!, kept[k + 1]!);
    if (width > LONGEST_FILL) throw longHole(raw, points[0]!, 'elevation', width);
    const message = `${countPoints(points.length)} without elevation at the ${where} of the track left out`;
    log.add('missing_elevation', points[0]!, points.at(-1)!, points.length, message);
  };
  leaveOut(0, first, kept.slice(0, first), 'start');
  leaveOut(last, kept.length - 1, kept.slice(last + 1), 'end');
  return kept.slice(first, last + 1);
}
