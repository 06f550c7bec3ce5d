/** Figures of a step response; times from the step [s], ratios of the final value. */
export interface StepFigures {
  /** Largest excess over the final value; 0 where there is none. */
  readonly overshoot: number;
  /** From which on the response stays within the band; Infinity where it does not within the samples. */
  readonly settling: number;
  /** Between 10 and 90 % of the final value; Infinity where it does not get there. */
  readonly rise: number;
  /** Time of the largest value. */
  readonly peakTime: number;
}

/**
 * Figures of a response to a step at time 0, sampled evenly. Crossings are found on the chord between two samples, the
 * peak on the parabola through three.
 *
 * @param values response, the first at time 0
 * @param spacing of the samples [s]
 * @param final value it goes to, not 0
 * @param band half-width of the settling band as a ratio, 0.02 by usage
 */
export function stepFigures(values: Float64Array, spacing: number, final: number, band: number): StepFigures {
  const at = (i: number): number => values[i]! / final;
  const last = values.length - 1;
  let out = last;
  while (out >= 0 && Math.abs(at(out) - 1) <= band) out--;
  let settling = Number.POSITIVE_INFINITY;
  if (out < 0) settling = 0;
  else if (out < last)
    settling = spacing * (out + crossing(at(out), at(out + 1), at(out) > 1 ? 1 + band : 1 - band));
  const peak = parabolicPeak(values.map((value) => value / final));
  return {
    overshoot: Math.max(0, peak.value - 1),
    settling,
    rise: firstCrossing(at, last, 0.9, spacing) - firstCrossing(at, last, 0.1, spacing),
    peakTime: peak.index * spacing,
  };
}

/** Largest value of evenly spaced samples, refined by the parabola through it and its neighbours. */
export function parabolicPeak(values: Float64Array): { readonly index: number; readonly value: number } {
  let top = 0;
  for (let i = 1; i < values.length; i++) if (values[i]! > values[top]!) top = i;
  const value = values[top]!;
  if (top === 0 || top === values.length - 1) return { index: top, value };
  const left = values[top - 1]! - value;
  const right = values[top + 1]! - value;
  const bend = left + right;
  if (bend === 0) return { index: top, value };
  const shift = (left - right) / (2 * bend);
  return { index: top + shift, value: value - ((left - right) * shift) / 4 };
}

const crossing = (from: number, to: number, level: number): number => (level - from) / (to - from);

function firstCrossing(at: (i: number) => number, last: number, level: number, spacing: number): number {
  if (at(0) >= level) return 0;
  for (let i = 1; i <= last; i++)
    if (at(i) >= level) return spacing * (i - 1 + crossing(at(i - 1), at(i), level));
  return Number.POSITIVE_INFINITY;
}
