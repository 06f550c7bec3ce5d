import { firstRowFrom } from './first-row-from.ts';
import type { RideSegment, RideStretch, RideVehicle } from './ride.ts';
import { type RideLevels, resistanceAt, rideLevels } from './ride-rows.ts';

/** Longest step of the simulation [s]. */
const STEP = 0.25;
/** Slower than this the simulation stands [m/s]. */
const STANDING = 0.1;

/**
 * A ride, segment by segment, beside two states of a vehicle: the energy that the log gave at the wheel over what the
 * vehicle needs for the speeds that were ridden, and the speed that the vehicle reaches with the logged drive from the
 * logged speed at the start of each segment (midpoint rule, steps of at most 0.25 s).
 *
 * @param length of a segment, horizontal [m]
 */
export function rideSegments(
  stretches: readonly RideStretch[],
  before: RideVehicle,
  after: RideVehicle,
  length: number,
): readonly RideSegment[] {
  return stretches.flatMap((stretch) => {
    const [was, is] = [rideLevels(stretch, before), rideLevels(stretch, after)];
    return boundsOf(stretch, length).map(([from, to]): RideSegment => {
      const { time, place, speed, grade, driven } = stretch;
      const mean = (values: ArrayLike<number>): number => {
        let sum = 0;
        for (let i = from; i < to; i++) sum += (values[i]! + values[i + 1]!) * (time[i + 1]! - time[i]!);
        return sum / 2 / (time[to]! - time[from]!);
      };
      const [simulated, fitted] = [simulate(stretch, before, from, to), simulate(stretch, after, from, to)];
      return {
        from: place[from]!,
        to: place[to]!,
        duration: time[to]! - time[from]!,
        meanSpeed: mean(speed),
        meanGrade: mean(grade),
        given: was.work[to]! - was.work[from]!,
        needed: neededWork(was, before, from, to),
        neededAfter: neededWork(is, after, from, to),
        endSpeed: simulated.end,
        rmsSpeed: simulated.rms,
        rmsSpeedAfter: fitted.rms,
        closed: 1 - mean(driven),
      };
    });
  });
}

/** Work that a vehicle needs between two rows of a ride [J]. */
export function neededWork(levels: RideLevels, vehicle: RideVehicle, from: number, to: number): number {
  const { mass, rotatingMass, crr, cda } = vehicle;
  const of = (level: Float64Array): number => level[to]! - level[from]!;
  return (
    mass * of(levels.held) +
    rotatingMass * of(levels.turning) +
    mass * (crr * of(levels.rolling) + of(levels.rollingGrowth)) +
    cda * of(levels.air)
  );
}

/** First and last rows of the segments, the last one at least half as long as the others. */
function boundsOf({ place }: RideStretch, length: number): readonly (readonly [number, number])[] {
  const last = place.length - 1;
  const count = Math.max(1, Math.round((place[last]! - place[0]!) / length));
  const edges = Array.from({ length: count + 1 }, (_, k) => {
    const at = place[0]! + (k * (place[last]! - place[0]!)) / count;
    return k === count ? last : firstRowFrom(place, at);
  });
  return edges.slice(1).flatMap((to, k) => (to > edges[k]! ? [[edges[k]!, to] as const] : []));
}

function simulate(
  stretch: RideStretch,
  vehicle: RideVehicle,
  from: number,
  to: number,
): { readonly end: number; readonly rms: number } {
  const { time, speed } = stretch;
  const inertia = vehicle.mass + vehicle.rotatingMass;
  const rate = (i: number, share: number, v: number): number => {
    if (v < STANDING) return 0;
    const at = (row: number): number =>
      (stretch.driveForce(row, v) - resistanceAt(stretch, vehicle, row, v)) / inertia;
    return (1 - share) * at(i) + share * at(i + 1);
  };
  let v = speed[from]!;
  let squares = 0;
  for (let i = from; i < to; i++) {
    const whole = time[i + 1]! - time[i]!;
    const steps = Math.ceil(whole / STEP);
    const h = whole / steps;
    for (let k = 0; k < steps; k++) {
      const half = v + (h / 2) * rate(i, k / steps, v);
      v = Math.max(0, v + h * rate(i, (k + 0.5) / steps, half));
    }
    squares += (v - speed[i + 1]!) * (v - speed[i + 1]!) * whole;
  }
  return { end: v - speed[to]!, rms: Math.sqrt(squares / (time[to]! - time[from]!)) };
}
