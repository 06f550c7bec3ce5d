/**
 * Which points of a line in space are kept so that no left-out point is further than the tolerance from the
 * chord that replaces it (Ramer 1972; Douglas and Peucker 1973), with a stack instead of recursion.
 * A line that goes out and comes back keeps its turning point.
 *
 * @param x,y,z points [m], equal lengths
 * @param tolerance [m], >= 0
 * @returns indices that are kept, increasing, the ends among them; all of them for fewer than three points
 */
export function simplifyLine(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  z: ArrayLike<number>,
  tolerance: number,
): number[] {
  const size = x.length;
  const keep = new Uint8Array(size);
  if (size > 0) keep[0] = keep[size - 1] = 1;
  const open: [number, number][] = size > 2 ? [[0, size - 1]] : [];
  for (let stretch = open.pop(); stretch !== undefined; stretch = open.pop()) {
    const [from, to] = stretch;
    let far = tolerance * tolerance;
    let at = -1;
    for (let i = from + 1; i < to; i++) {
      const gap = squareToChord(x, y, z, i, from, to);
      if (gap > far) {
        far = gap;
        at = i;
      }
    }
    if (at < 0) continue;
    keep[at] = 1;
    open.push([from, at], [at, to]);
  }
  return Array.from(keep.keys()).filter((i) => keep[i] === 1);
}

/** Square of the distance from point i to the chord between two points [m2]. */
function squareToChord(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  z: ArrayLike<number>,
  i: number,
  from: number,
  to: number,
): number {
  const ax = x[to]! - x[from]!;
  const ay = y[to]! - y[from]!;
  const az = z[to]! - z[from]!;
  const bx = x[i]! - x[from]!;
  const by = y[i]! - y[from]!;
  const bz = z[i]! - z[from]!;
  const square = ax * ax + ay * ay + az * az;
  const t = square > 0 ? Math.min(1, Math.max(0, (ax * bx + ay * by + az * bz) / square)) : 0;
  const dx = bx - t * ax;
  const dy = by - t * ay;
  const dz = bz - t * az;
  return dx * dx + dy * dy + dz * dz;
}
