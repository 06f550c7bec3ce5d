/** The values at some indices of a column, in their order. */
export function pickPoints(values: Float64Array, indices: Int32Array): Float64Array {
  const picked = new Float64Array(indices.length);
  for (let k = 0; k < indices.length; k++) picked[k] = values[indices[k]!]!;
  return picked;
}
