import { exp } from '../numeric/elementary.ts';
import type { RandomStream } from '../numeric/random.ts';
import { integrateSlope } from './along-slope.ts';
import { errorScales } from './error-scales.ts';
import type { Road } from './road.ts';

/** Reach of a kernel, in its own lengths. */
const REACH = 4;

/**
 * The same road as another truth that its measurement allows: grade plus a seeded random field whose standard deviation
 * at each knot is `gradeSd`, with station and elevation integrated anew.
 *
 * A measured elevation is wrong by a bounded height, not by a random walk; so the field is the slope of a stationary
 * height error: two sums of white noise under derivatives of Gaussians, one as long as the smoothing lets pass, one as
 * long as the source's own height error asks (`errorScales`). On a road out and back both ways share the field.
 * Where `gradeSd` is zero the grade stays as it is; a road without smoothing comes back unchanged.
 * Air keeps its values: metres of height change its density by less than 1e-3.
 *
 * @param stream normal numbers, drawn twice a grid spacing
 */
export function perturbRoad(road: Road, stream: Pick<RandomStream, 'normal'>): Road {
  const scales = errorScales(road);
  if (scales === null) return road;
  const short = slopeField(road, scales.short, stream);
  const long = slopeField(road, scales.long, stream);
  const shortPart = Math.sqrt(1 - scales.longShare);
  const longPart = Math.sqrt(scales.longShare);
  const grade = road.grade.map(
    (g, i) => g + road.gradeSd[i]! * (shortPart * short[i]! + longPart * long[i]!),
  );
  const line = integrateSlope(road.distance, grade, road.elevation[0]!);
  return { ...road, grade, elevation: line.elevation, station: line.station };
}

/** Unit-variance field at the knots; odd about the turn of a road out and back. */
function slopeField(road: Road, length: number, stream: Pick<RandomStream, 'normal'>): Float64Array {
  const { distance, grid, turnsAt, size } = road;
  const oneWay = turnsAt ?? distance[size - 1]!;
  const margin = Math.ceil((REACH * length) / grid);
  const noise = Float64Array.from({ length: Math.ceil(oneWay / grid) + 1 + 2 * margin }, () =>
    stream.normal(),
  );
  const outward = turnsAt === null ? size : size / 2;
  const field = new Float64Array(size);
  const onGrid = kernelAt(0, margin, grid / length);
  for (let i = 0; i < outward; i++) {
    const x = distance[i]! / grid;
    const nearest = Math.floor(x + 1e-9);
    const kernel = x - nearest < 1e-9 ? onGrid : kernelAt(x - nearest, margin, grid / length);
    let sum = 0;
    for (let j = 0; j < kernel.length; j++) sum += kernel[j]! * noise[nearest + j]!;
    field[i] = sum;
    if (turnsAt !== null) field[size - 1 - i] = -field[i]!;
  }
  return field;
}

/** Weights of the 2 margin + 1 noise values around a knot that stands `past` spacings after the middle one; unit sum of squares. */
function kernelAt(past: number, margin: number, spacing: number): Float64Array {
  const kernel = new Float64Array(2 * margin + 1);
  let squares = 0;
  for (let j = 0; j < kernel.length; j++) {
    const u = (j - margin - past) * spacing;
    kernel[j] = u * exp((-u * u) / 2);
    squares += kernel[j]! * kernel[j]!;
  }
  return kernel.map((weight) => weight / Math.sqrt(squares));
}
