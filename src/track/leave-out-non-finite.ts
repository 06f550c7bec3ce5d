import { InputError } from '../problems/input-error.ts';
import { LARGEST_NON_FINITE_SHARE } from './limits.ts';
import { placeOfPoint } from './place-of-point.ts';
import type { RawTrack } from './raw-track.ts';
import { countPoints, type RepairLog } from './repair-log.ts';

/**
 * Leaves out points whose distance or position is no finite number, each run of them as one repair.
 *
 * @param needed what else must be finite: the times of a ride
 * @returns raw indices that stay
 * @throws InputError `non-finite` when more than one in twenty is so
 */
export function leaveOutNonFinite(
  raw: RawTrack,
  log: RepairLog,
  needed: { readonly name: string; readonly values: Float64Array } | null = null,
): Int32Array {
  const what = needed === null ? 'place' : `place or ${needed.name}`;
  const columns = [raw.distance, raw.latitudeDeg, raw.longitudeDeg, needed?.values ?? null].filter(
    (column) => column !== null,
  );
  const finite = (i: number): boolean => columns.every((column) => Number.isFinite(column[i]!));
  const kept: number[] = [];
  let first = -1;
  for (let i = 0; i <= raw.size; i++) {
    if (i < raw.size && !finite(i)) {
      if (first < 0) first = i;
      continue;
    }
    if (first >= 0) {
      const n = i - first;
      log.add('non_finite', first, i - 1, n, `${countPoints(n)} whose ${what} is no finite number left out`);
      if (n > LARGEST_NON_FINITE_SHARE * raw.size) throw tooMany(raw, first, n, what);
      first = -1;
    }
    if (i < raw.size) kept.push(i);
  }
  const missing = raw.size - kept.length;
  if (missing > LARGEST_NON_FINITE_SHARE * raw.size) throw tooMany(raw, 0, missing, what);
  return Int32Array.from(kept);
}

function tooMany(raw: RawTrack, index: number, n: number, what: string): InputError {
  return new InputError({
    code: 'non-finite',
    place: placeOfPoint(raw, index),
    message: `too many points have a ${what} that is no finite number`,
    found: `${n} of ${raw.size}`,
    allowed: 'one in twenty',
  });
}
