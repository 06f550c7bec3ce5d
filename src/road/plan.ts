import { atan2, cos, sin } from '../numeric/elementary.ts';
import { interpolateLinear } from '../numeric/interpolate.ts';
import { gradientAtKnots } from '../numeric/uniform-gradient.ts';
import { lambdaOfWavelength, smoothWhittaker } from '../numeric/whittaker.ts';
import { WGS84_EQUATORIAL_RADIUS, WGS84_FLATTENING } from '../units/constants.ts';
import { fromDeg } from '../units/convert.ts';

const TURN = 2 * Math.PI;

/** Course of a road in plan at its knots. */
export interface Plan {
  /** Clockwise from true north [rad], in [0, 2 pi). */
  readonly heading: Float64Array;
  /** Positive to the right [1/m]. */
  readonly curvature: Float64Array;
}

/**
 * Heading and curvature from positions: the way east and north is added up leg by leg with the ellipsoid's two radii of
 * curvature at the leg's middle latitude (2e-7 of the geodesic on legs up to 10 km), smoothed along the distance by
 * the third-order penalised smoother, and differentiated. So position noise does not become wind noise, and a bend
 * shorter than about half the wavelength is flattened.
 *
 * @param distance of the points [m], ascending from 0
 * @param wavelength at which the smoother's gain is one half [m]
 * @param grid spacing [m] and `knots` number of the uniform knots, at least 4, which reach past the last point
 */
export function planOfPositions(
  distance: Float64Array,
  latitudeDeg: Float64Array,
  longitudeDeg: Float64Array,
  wavelength: number,
  grid: number,
  knots: number,
): Plan {
  const size = distance.length;
  const east = new Float64Array(size);
  const north = new Float64Array(size);
  const longitude = unwind(longitudeDeg, 360);
  const squareEccentricity = WGS84_FLATTENING * (2 - WGS84_FLATTENING);
  for (let i = 1; i < size; i++) {
    const middle = fromDeg((latitudeDeg[i]! + latitudeDeg[i - 1]!) / 2);
    const s = sin(middle);
    const w2 = 1 - squareEccentricity * s * s;
    const normal = WGS84_EQUATORIAL_RADIUS / Math.sqrt(w2);
    const meridian = (normal * (1 - squareEccentricity)) / w2;
    const across = fromDeg(longitude[i]! - longitude[i - 1]!);
    east[i] = east[i - 1]! + normal * cos(middle) * across;
    north[i] = north[i - 1]! + meridian * fromDeg(latitudeDeg[i]! - latitudeDeg[i - 1]!);
  }
  const weights = distance.map((x, i) => {
    const before = i === 0 ? distance[1]! : x - distance[i - 1]!;
    const after = i === size - 1 ? before : distance[i + 1]! - x;
    return Math.min((before + after) / (2 * grid), 1);
  });
  const places = distance.map((x) => Math.min(x / grid, knots - 1));
  const lambda = lambdaOfWavelength(Math.max(wavelength / grid, 3));
  const { smooth } = smoothWhittaker({ places, values: [east, north], weights, knots, lambda });
  const eastward = gradientAtKnots(smooth[0]!, grid);
  const northward = gradientAtKnots(smooth[1]!, grid);
  const heading = new Float64Array(knots);
  for (let i = 0; i < knots; i++) {
    const still = eastward[i] === 0 && northward[i] === 0;
    heading[i] = still ? (heading[i - 1] ?? 0) : wrapTurn(atan2(eastward[i]!, northward[i]!));
  }
  return { heading, curvature: curvatureOf(heading, grid) };
}

/** Heading of a column, unwound and interpolated, and the curvature it means. Angles [rad]. */
export function planOfHeading(
  distance: Float64Array,
  heading: Float64Array,
  grid: number,
  knots: number,
): Plan {
  const at = Float64Array.from({ length: knots }, (_, i) => i * grid);
  const wound = interpolateLinear(distance, unwind(heading), at).map(wrapTurn);
  return { heading: wound, curvature: curvatureOf(wound, grid) };
}

/** An angle [rad] brought to [0, 2 pi). */
export function wrapTurn(angle: number): number {
  const rest = angle - TURN * Math.floor(angle / TURN);
  return rest >= TURN ? 0 : rest;
}

/** The same directions without jumps of a turn: each differs from the one before by half a turn at most. */
export function unwind(angles: Float64Array, turn = TURN): Float64Array {
  const out = angles.slice();
  for (let i = 1; i < out.length; i++) out[i]! -= turn * Math.round((out[i]! - out[i - 1]!) / turn);
  return out;
}

function curvatureOf(heading: Float64Array, grid: number): Float64Array {
  return gradientAtKnots(unwind(heading), grid);
}
