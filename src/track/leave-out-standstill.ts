import { SAME_PLACE, STANDING_RADIUS, STANDING_SPEED } from './limits.ts';
import type { RawTrack } from './raw-track.ts';
import { countPoints, type RepairLog } from './repair-log.ts';

/**
 * Merges points that do not move into the one before: nearer than 5 cm; or, where there are times, slower than
 * 0.5 m/s and within 10 m since the last point kept, so that the wander of a receiver at rest adds no way.
 *
 * @param kept raw indices to look at
 * @param leg see legLength
 * @returns raw indices that stay
 */
export function leaveOutStandstill(
  raw: RawTrack,
  kept: Int32Array,
  leg: (from: number, to: number) => number,
  log: RepairLog,
): Int32Array {
  // Distances that the file gives are as fine as it likes; only equal ones are one place.
  const same = raw.distance === null ? SAME_PLACE : 0;
  const { time } = raw;
  const stay: number[] = [];
  let first = -1;
  let count = 0;
  let last = -1;
  const close = (): void => {
    if (count === 0) return;
    const rest = time === null ? 0 : time[last]! - time[stay.at(-1)!]!;
    const standing = rest >= 1 ? `, ${rest.toFixed(0)} s at rest` : '';
    log.add(
      'doubled_point',
      first,
      last,
      count,
      `${countPoints(count)} without movement merged into the one before${standing}`,
    );
    count = 0;
  };
  for (const i of kept) {
    const anchor = stay.at(-1);
    if (anchor !== undefined) {
      const moved = leg(anchor, i);
      const rest = time === null ? 0 : time[i]! - time[anchor]!;
      if (moved <= same || (moved < STANDING_RADIUS && moved < STANDING_SPEED * rest)) {
        if (count === 0) first = i;
        last = i;
        count++;
        continue;
      }
    }
    close();
    stay.push(i);
  }
  close();
  return Int32Array.from(stay);
}
