/** Three-point Gauss-Legendre rule on [0, 1]: exact to the fifth power. */
const NODE = 0.5 - Math.sqrt(0.15);
const OUTER = 5 / 18;
const INNER = 8 / 18;

/** Distance along the slope and elevation that belong to a grade over horizontal distance. */
export interface SlopeLine {
  /** [m], starts at 0. */
  readonly station: Float64Array;
  /** [m] */
  readonly elevation: Float64Array;
}

/**
 * Integrates a grade that is linear in the station between knots: each horizontal cell dx is ds = dx / mean(cos theta)
 * long along the slope and climbs ds mean(sin theta). So the elevation of a road is the integral of its grade, to
 * rounding, as the loop integrates it; of the elevations measured only the first enters here.
 *
 * @param distance horizontal [m], not decreasing; equal neighbours mark a step of the grade
 * @param grade tan(theta)
 * @param start elevation of the first knot [m]
 */
export function integrateSlope(distance: Float64Array, grade: Float64Array, start: number): SlopeLine {
  const size = distance.length;
  const station = new Float64Array(size);
  const elevation = new Float64Array(size);
  elevation[0] = start;
  for (let i = 1; i < size; i++) {
    const a = grade[i - 1]!;
    const b = grade[i]!;
    const low = a + (b - a) * NODE;
    const mid = (a + b) / 2;
    const high = b + (a - b) * NODE;
    const cosLow = 1 / Math.sqrt(1 + low * low);
    const cosMid = 1 / Math.sqrt(1 + mid * mid);
    const cosHigh = 1 / Math.sqrt(1 + high * high);
    const along = (distance[i]! - distance[i - 1]!) / (OUTER * (cosLow + cosHigh) + INNER * cosMid);
    station[i] = station[i - 1]! + along;
    elevation[i] =
      elevation[i - 1]! + along * (OUTER * (low * cosLow + high * cosHigh) + INNER * mid * cosMid);
  }
  return { station, elevation };
}
