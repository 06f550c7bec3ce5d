import { interpolateLinear } from '../numeric/interpolate.ts';
import { fromDeg } from '../units/convert.ts';
import type { Bend } from './bend.ts';
import type { Road } from './road.ts';

/** Curvature is the turn of the heading over this length: what is shorter is noise of the positions, and blunted [m]. */
export const BEND_RESOLUTION = 30;
/** A stretch that turns by less than this is no bend [rad]. */
const LEAST_TURN = fromDeg(4);

/**
 * Bends: stretches in which the curve of the road allows less than the speed that is asked for, v = sqrt(a / |kappa|).
 *
 * The curvature is that of the road's plan (`planOfPositions` has smoothed the positions), taken as the turn over
 * BEND_RESOLUTION about each place: a circle and the middle of a transition curve keep theirs exactly, the noise of
 * positions is averaged. Runs to the same side with less than BEND_RESOLUTION between them are one bend; ends are
 * interpolated between knots. A bend of less than about 20 m radius comes out wider than it is, by the smoothing of the
 * positions.
 *
 * @param road with its curvature
 * @param maxLateral greatest lateral acceleration [m/s2], > 0
 * @param speedAt true speed that is asked for at a horizontal distance [m] -> [m/s]
 * @returns in order along the way; none for a road whose heading is not known
 */
export function bendsOf(road: Road, maxLateral: number, speedAt: (distance: number) => number): Bend[] {
  if (road.curvature === null) return [];
  const curvature = curvatureOver(road, road.curvature, BEND_RESOLUTION);
  const excess = curvature.map((kappa, i) => {
    const speed = speedAt(road.distance[i]!);
    return Math.abs(kappa) - maxLateral / (speed * speed);
  });
  return joined(runsOf(road.distance, curvature, excess))
    .filter(({ turn }) => turn >= LEAST_TURN)
    .map(
      ({ from, to, sharpest }): Bend => ({
        from,
        to,
        curvature: Math.abs(curvature[sharpest]!),
        side: curvature[sharpest]! > 0 ? 'right' : 'left',
        sharpestAt: road.distance[sharpest]!,
        speed: Math.sqrt(maxLateral / Math.abs(curvature[sharpest]!)),
      }),
    );
}

/** Mean curvature over a length about each knot; over what there is of it at the ends [1/m]. */
function curvatureOver({ distance, size }: Road, curvature: Float64Array, length: number): Float64Array {
  const turn = new Float64Array(size);
  for (let i = 1; i < size; i++)
    turn[i] = turn[i - 1]! + ((curvature[i]! + curvature[i - 1]!) / 2) * (distance[i]! - distance[i - 1]!);
  const end = distance[size - 1]!;
  const behind = distance.map((x) => Math.max(0, x - length / 2));
  const ahead = distance.map((x) => Math.min(end, x + length / 2));
  const before = interpolateLinear(distance, turn, behind);
  const after = interpolateLinear(distance, turn, ahead);
  return after.map((angle, i) => (angle - before[i]!) / (ahead[i]! - behind[i]!));
}

interface Run {
  readonly from: number;
  readonly to: number;
  /** Knot of the greatest curvature. */
  readonly sharpest: number;
  /** By how much the road turns in it, without its sign [rad]. */
  readonly turn: number;
  readonly curvature: number;
}

/** Runs of knots to one side in which the curve allows less. */
function runsOf(distance: Float64Array, curvature: Float64Array, excess: Float64Array): Run[] {
  const runs: Run[] = [];
  const size = distance.length;
  for (let first = 0; first < size; first++) {
    if (excess[first]! <= 0) continue;
    const side = Math.sign(curvature[first]!);
    let end = first;
    let sharpest = first;
    let turn = 0;
    while (end < size && excess[end]! > 0 && Math.sign(curvature[end]!) === side) {
      if (Math.abs(curvature[end]!) > Math.abs(curvature[sharpest]!)) sharpest = end;
      if (end > first)
        turn += (Math.abs(curvature[end]! + curvature[end - 1]!) / 2) * (distance[end]! - distance[end - 1]!);
      end++;
    }
    runs.push({
      from: crossing(distance, excess, first, first - 1),
      to: crossing(distance, excess, end - 1, end),
      sharpest,
      turn,
      curvature: curvature[sharpest]!,
    });
    first = end - 1;
  }
  return runs;
}

/** Where the excess is 0 between a knot in a run and its neighbour outside; the knot itself where there is none. */
function crossing(distance: Float64Array, excess: Float64Array, inside: number, outside: number): number {
  const a = excess[inside]!;
  const b = excess[outside];
  if (b === undefined || b > 0) return distance[inside]!;
  return distance[inside]! + ((distance[outside]! - distance[inside]!) * a) / (a - b);
}

function joined(runs: readonly Run[]): Run[] {
  const bends: Run[] = [];
  for (const run of runs) {
    const last = bends.at(-1);
    const alike = last !== undefined && Math.sign(last.curvature) === Math.sign(run.curvature);
    if (!alike || run.from - last.to >= BEND_RESOLUTION) {
      bends.push(run);
      continue;
    }
    const sharper = Math.abs(run.curvature) > Math.abs(last.curvature) ? run : last;
    bends[bends.length - 1] = { ...sharper, from: last.from, to: run.to, turn: last.turn + run.turn };
  }
  return bends;
}
