import { findStops } from './find-stops.ts';
import { SAME_PLACE, STANDING_RADIUS, STANDING_SPEED } from './limits.ts';
import type { RawTrack } from './raw-track.ts';
import { countPoints, type RepairLog } from './repair-log.ts';

/**
 * Merges points that do not move. First the stops of a receiver that goes on scattering (see findStops), each into the
 * point nearest to its middle; then, into the one before, points nearer to it than 5 cm, or, where there are times, slower
 * than 0.5 m/s and within 10 m of it.
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
    log.add(
      'doubled_point',
      first,
      last,
      count,
      `${countPoints(count)} without movement merged into the one before${atRest(rest)}`,
    );
    count = 0;
  };
  const stops = findStops(raw, kept);
  let next = 0;
  // From when on the last point that stayed was left: the end of its stop.
  let since = 0;
  for (let k = 0; k < kept.length; k++) {
    const i = kept[k]!;
    const stop = stops[next];
    if (stop?.first === k) {
      close();
      const middle = kept[stop.middle]!;
      const left = stop.last - stop.first;
      const touched = kept[stop.middle === stop.first ? k + 1 : k]!;
      const end = kept[stop.last]!;
      const rest = time === null ? 0 : time[end]! - time[i]!;
      const message = `${countPoints(left)} without movement merged into the one in their middle${atRest(rest)}`;
      log.add('doubled_point', touched, end, left, message, middle);
      stay.push(middle);
      since = time?.[end] ?? 0;
      k = stop.last;
      next++;
      continue;
    }
    const anchor = stay.at(-1);
    if (anchor !== undefined) {
      const moved = leg(anchor, i);
      const rest = time === null ? 0 : time[i]! - since;
      if (moved <= same || (moved < STANDING_RADIUS && moved < STANDING_SPEED * rest)) {
        if (count === 0) first = i;
        last = i;
        count++;
        continue;
      }
    }
    close();
    stay.push(i);
    since = time?.[i] ?? 0;
  }
  close();
  return Int32Array.from(stay);
}

const atRest = (seconds: number): string => (seconds >= 1 ? `, ${seconds.toFixed(0)} s at rest` : '');
