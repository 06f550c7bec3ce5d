/**
 * Poles of a closed loop outside the stability border, counted by how often 1 + L turns round 0 along it (H. Nyquist, Bell
 * System Technical Journal 11 (1932) 126-147). The curve is the upper half of the border, from its place on the real axis
 * where frequencies are low to that where they are high, and passes poles of L that lie on the border on their outer side,
 * so that they count as inside; it must be sampled so finely that L turns by less than half a turn between two samples
 * wherever it is not small.
 *
 * In the z plane the border is the unit circle, from z = 1 to z = -1; in the s plane the imaginary axis, from s = 0 up to
 * where L has gone to a real value, 0 as a rule.
 *
 * @param re real part of L along the curve, and
 * @param im its imaginary part; first and last count as real
 * @param openOutside poles of L outside the border
 * @returns how many closed poles lie outside; only a whole number not below 0 is one
 */
export function closedPolesOutside(
  re: ArrayLike<number>,
  im: ArrayLike<number>,
  openOutside: number,
): number {
  const last = re.length - 1;
  // Half turns, anticlockwise, from crossings of the negative real axis and the two ends; im >= 0 is the upper side.
  let halfTurns = 0;
  let x = 1 + re[0]!;
  let y = 0;
  if (x < 0) halfTurns -= 1;
  for (let i = 1; i <= last; i++) {
    const nextX = 1 + re[i]!;
    const nextY = i === last ? 0 : im[i]!;
    if (y >= 0 !== nextY >= 0 && x + (nextX - x) * (y / (y - nextY)) < 0) halfTurns += y >= 0 ? 2 : -2;
    x = nextX;
    y = nextY;
  }
  if (x < 0) halfTurns += 1;
  return openOutside - halfTurns;
}
