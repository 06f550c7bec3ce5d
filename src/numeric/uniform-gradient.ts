/** Gradient of values at uniform knots: central differences, at the ends the slope of the parabola through three knots. At least 3 values. */
export function gradientAtKnots(values: Float64Array, spacing: number): Float64Array {
  const last = values.length - 1;
  const gradient = new Float64Array(last + 1);
  for (let i = 1; i < last; i++) gradient[i] = (values[i + 1]! - values[i - 1]!) / (2 * spacing);
  gradient[0] = (4 * values[1]! - 3 * values[0]! - values[2]!) / (2 * spacing);
  gradient[last] = (3 * values[last]! - 4 * values[last - 1]! + values[last - 2]!) / (2 * spacing);
  return gradient;
}

/**
 * S.d. of `gradientAtKnots` [1/spacing unit] from the band of the values' covariance: element (i, i + j), j = 0 .. 3, at [4 i + j].
 */
export function gradientSdAtKnots(covariance: Float64Array, spacing: number): Float64Array {
  const knots = covariance.length / 4;
  const at = (i: number, j: number): number => covariance[4 * i + j]!;
  const sd = new Float64Array(knots);
  const last = knots - 1;
  for (let i = 1; i < last; i++) sd[i] = at(i + 1, 0) - 2 * at(i - 1, 2) + at(i - 1, 0);
  const end = (near: number, middle: number, far: number, a: number, b: number, c: number): number =>
    9 * near + 16 * middle + far - 24 * a + 6 * b - 8 * c;
  sd[0] = end(at(0, 0), at(1, 0), at(2, 0), at(0, 1), at(0, 2), at(1, 1));
  sd[last] = end(
    at(last, 0),
    at(last - 1, 0),
    at(last - 2, 0),
    at(last - 1, 1),
    at(last - 2, 2),
    at(last - 2, 1),
  );
  return sd.map((variance) => Math.sqrt(Math.max(0, variance)) / (2 * spacing));
}
