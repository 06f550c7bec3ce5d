import { HISTORY, HISTORY_STRIDE, P_DELAY, P_HISTORY, P_SAMPLE, TICK } from './layout.ts';

// The history is a ring of rows at the end of the state, one more than the samples that the delay reaches back: filtered
// speed at the start of a sample, slope just after it, slope just before the next. The row after the latest is the
// oldest.

/** Row of the sample that starts now. */
export function latestRow(s: Float64Array, p: Float64Array): number {
  return HISTORY + HISTORY_STRIDE * (s[TICK] % p[P_HISTORY]);
}

function rowAfter(s: Float64Array, row: number): number {
  return row + HISTORY_STRIDE < s.length ? row + HISTORY_STRIDE : HISTORY;
}

/**
 * Keeps the filtered speed z of the sample that starts now, and gives it as it was P_DELAY samples ago, by the cubic
 * Hermite polynomial over the sample in which that falls.
 */
export function readDelayed(s: Float64Array, p: Float64Array, row: number, z: number): number {
  s[row] = z;
  const old = rowAfter(s, row);
  const share = p[P_HISTORY] - 1 - p[P_DELAY];
  const rest = 1 - share;
  const bend = share * rest * p[P_SAMPLE];
  return (
    s[old] * (1 + 2 * share) * rest * rest +
    s[rowAfter(s, old)] * (3 - 2 * share) * share * share +
    bend * (rest * s[old + 1] - share * s[old + 2])
  );
}

/** Keeps the slopes of the sample that has been run [per second]; returns the row of the next. */
export function keepHistory(s: Float64Array, row: number, after: number, before: number): number {
  s[row + 1] = after;
  s[row + 2] = before;
  return rowAfter(s, row);
}
