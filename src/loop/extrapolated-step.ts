/** Right-hand side of an ordinary differential equation: writes dy/dt at (t, y) to `out`. */
export type Slope = (time: number, y: Float64Array, out: Float64Array) => void;

/** Substeps of the midpoint rule, one row of the extrapolation table each. */
const SUBSTEPS = [2, 4, 6, 8, 10, 12];

/**
 * One step of the extrapolated modified midpoint rule (W. B. Gragg, SIAM J. Numer. Anal. 2 (1965) 384-403; Hairer,
 * Norsett and Wanner, Solving Ordinary Differential Equations I, II.9, from memory): the rule's error has even powers
 * of the substep only, so that each row of Aitken and Neville's table gains two orders. Six rows: order 12.
 *
 * The slope is never asked for at the end of the step, so that one with a jump there is taken from the left.
 *
 * @param slope smooth over the step
 * @param y state at `time`; becomes the state at time + h
 */
export function extrapolatedStep(slope: Slope, time: number, y: Float64Array, h: number): void {
  if (h === 0) return;
  const first = new Float64Array(y.length);
  slope(time, y, first);
  let above: Float64Array[] = [];
  SUBSTEPS.forEach((count, row) => {
    const entries = [midpoint(slope, time, y, first, h / count, count)];
    for (let k = 1; k <= row; k++) {
      const ratio = count / SUBSTEPS[row - k]!;
      const weight = 1 / (ratio * ratio - 1);
      const coarse = above[k - 1]!;
      entries.push(entries[k - 1]!.map((value, i) => value + weight * (value - coarse[i]!)));
    }
    above = entries;
  });
  y.set(above[SUBSTEPS.length - 1]!);
}

/** Gragg's rule over `count` substeps (even), without the smoothing step, which extrapolation does not need. */
function midpoint(
  slope: Slope,
  time: number,
  y: Float64Array,
  first: Float64Array,
  h: number,
  count: number,
): Float64Array {
  const k = new Float64Array(y.length);
  let before = y;
  let now = y.map((value, i) => value + h * first[i]!);
  for (let step = 1; step < count; step++) {
    slope(time + step * h, now, k);
    const after = before.map((value, i) => value + 2 * h * k[i]!);
    before = now;
    now = after;
  }
  return now;
}
