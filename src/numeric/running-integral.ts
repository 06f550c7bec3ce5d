/**
 * Integral of samples from the first one to each, by parabolas through three neighbours, over each step the mean of the
 * one that reaches back and the one that reaches on: on an even grid Gregory's rule (-1, 13, 13, -1) / 24, of fourth
 * order; at both ends one parabola. The step itself is the trapezium less h^3 / 6 times the second divided difference.
 *
 * @param at ascending abscissae, none equal, of any length
 * @param value as long as `at`
 * @returns as long as `at`, 0 first; with two samples the trapezium
 */
export function runningIntegral(at: Float64Array, value: Float64Array): Float64Array {
  const size = at.length;
  const integral = new Float64Array(size);
  const bend = (i: number): number => {
    const left = (value[i]! - value[i - 1]!) / (at[i]! - at[i - 1]!);
    const right = (value[i + 1]! - value[i]!) / (at[i + 1]! - at[i]!);
    return (right - left) / (at[i + 1]! - at[i - 1]!);
  };
  let before = size > 2 ? bend(1) : 0;
  for (let i = 0; i + 1 < size; i++) {
    const step = at[i + 1]! - at[i]!;
    const after = i + 2 < size ? bend(i + 1) : before;
    const mean = (value[i]! + value[i + 1]!) / 2;
    integral[i + 1] = integral[i]! + step * mean - (step * step * step * (before + after)) / 12;
    before = after;
  }
  return integral;
}
