import { FILTERED, HISTORY, HISTORY_STRIDE, P_DELAY, P_HISTORY, TICK } from './layout.ts';

/**
 * The filtered speed as it was P_DELAY samples ago, by the cubic Hermite polynomial over the sample in which it falls.
 * A row of the history: value at the start of a sample, slope just after it, slope just before the next.
 */
export function readDelayed(s: Float64Array, p: Float64Array): number {
  const back = Math.ceil(p[P_DELAY]);
  const share = back - p[P_DELAY];
  const rows = p[P_HISTORY];
  const tick = s[TICK];
  const row = HISTORY + HISTORY_STRIDE * ((tick - back + rows) % rows);
  const next = back === 1 ? s[FILTERED] : s[HISTORY + HISTORY_STRIDE * ((tick - back + 1 + rows) % rows)];
  // Slopes are kept as change per sample.
  const rest = 1 - share;
  const value = s[row];
  return (
    value * (1 + 2 * share) * rest * rest +
    next * share * share * (3 - 2 * share) +
    s[row + 1] * share * rest * rest -
    s[row + 2] * share * share * rest
  );
}

/** Keeps one sample: value at its start, slopes at both its ends [per second]. Before TICK moves on. */
export function keepHistory(
  s: Float64Array,
  p: Float64Array,
  value: number,
  slopeAfter: number,
  slopeBefore: number,
  sample: number,
): void {
  const row = HISTORY + HISTORY_STRIDE * (s[TICK] % p[P_HISTORY]);
  s[row] = value;
  s[row + 1] = slopeAfter * sample;
  s[row + 2] = slopeBefore * sample;
}
