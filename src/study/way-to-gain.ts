import { surroundingsBetween } from '../loop/places.ts';
import type { PlannedShift } from '../loop/plan.ts';
import { cellOf } from '../numeric/interpolate.ts';
import type { Road } from '../road/road.ts';
import { atCharge } from '../vehicle/at-charge.ts';
import { authority } from '../vehicle/authority.ts';
import { effectiveMass } from '../vehicle/linearise.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import { throttleRange } from '../vehicle/throttle-range.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';

/** Steps along the way [m]. */
const STEP = 5;
/** Gaining less than this under full throttle, the vehicle gets no faster worth waiting for [m/s2]. */
const LEAST_GAIN = 0.05;
/** Nothing that rides is slower, for this reckoning [m/s]. */
const SLOWEST = 0.5;

/** How speed is gained by hand. SI. */
export interface Gaining {
  readonly road: Road;
  readonly vehicle: Vehicle;
  readonly shifts: readonly PlannedShift[];
  /** Greatest acceleration that the rider asks for [m/s2]. */
  readonly acceleration: number;
  /** Speed that is to be gained, at a place [m/s]. */
  readonly goalAt: (distance: number) => number;
  /** With this it is enough where full throttle gains no more [m/s]. */
  readonly enough: number;
}

/**
 * Where the speed that is asked for has been gained by hand: at the rider's acceleration, or at what full throttle gives
 * on that grade, in that wind and gear, where that is less; or where full throttle gains no more and the speed is enough.
 * Of a gearbox that shifts by itself the best gear counts, of a battery what its charge leaves; lags have no part in it.
 *
 *     d(v^2) = 2 a dx,      a = min(rider's, (F_full - F_required(v)) / m_e)
 *
 * Steps of 5 m by Heun's rule in v^2; exact where the rider's acceleration is the limit.
 *
 * @param from horizontal distance [m]
 * @param until what comes next on the way, or the road's end [m]
 * @param speed at `from` [m/s]
 * @returns horizontal distance, no further than `until` [m]
 */
export function gainedAt(gaining: Gaining, from: number, until: number, speed: number): number {
  const { acceleration, goalAt, enough } = gaining;
  const gain = fullThrottleGain(gaining);
  const limited = (v: number, x: number): number => Math.min(acceleration, gain(v, x));
  let v = speed;
  for (let x = from; x < until; x += STEP) {
    const goal = goalAt(x);
    const a = limited(v, x);
    if (v >= goal || (v >= enough && a < LEAST_GAIN)) return x;
    const trial = Math.max(SLOWEST, Math.sqrt(Math.max(0, v * v + 2 * a * STEP)));
    const mean = (a + limited(trial, x + STEP)) / 2;
    const square = Math.max(SLOWEST * SLOWEST, v * v + 2 * mean * STEP);
    if (square >= goal * goal) return Math.min(until, x + (goal * goal - v * v) / (2 * mean));
    v = Math.sqrt(square);
  }
  return until;
}

/** Acceleration under full throttle at a speed and place [m/s2]; negative where that slows down. */
function fullThrottleGain({ road, shifts, vehicle: fresh }: Gaining): (v: number, x: number) => number {
  const vehicle = atCharge(fresh);
  const throttle = throttleRange(vehicle).greatest;
  const { gearbox, gear: engaged } = vehicle.drive;
  return (v, x) => {
    const place = Math.min(x, road.distance[road.size - 1]);
    const i = cellOf(road.distance, place);
    const width = road.distance[i + 1] - road.distance[i];
    const at = surroundingsBetween(road, i, width > 0 ? (place - road.distance[i]) / width : 0);
    const planned = gearbox.kind === 'clutch' ? shifts.findLast(({ distance }) => distance <= x) : undefined;
    const { greatest, gear } = authority(vehicle, planned?.gear ?? engaged, v, at);
    return (greatest - requiredForce(vehicle, v, at)) / effectiveMass(vehicle, v, throttle, gear);
  };
}
