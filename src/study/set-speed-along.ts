import type { HoldPlan } from '../loop/plan.ts';
import { distanceAt } from '../road/lookup.ts';
import type { Road } from '../road/road.ts';
import type { Stretch } from './findings.ts';

/** Rate at which a change of set speed is granted to be followed when neither says its own [m/s2]. */
const GRANTED_RATE = 0.5;
/** Granted for settling after it [s]. */
const GRANTED_SETTLING = 10;

export interface SetSpeedAlong {
  /** Set speed as true speed, knot by knot; at the place of a change the new one [m/s]. */
  readonly setSpeed: Float64Array;
  /** True speed at the start [m/s]. */
  readonly startSpeed: number;
  /** Changes with their places [m] and true speeds [m/s]. */
  readonly changes: readonly { readonly at: number; readonly setSpeed: number }[];
  /**
   * From each change, and from a start at another speed: |change| / ramp (0.5 m/s2 where it steps) and 10 s for
   * settling, at the higher of the two speeds.
   */
  readonly settling: readonly Stretch[];
}

/**
 * The set speed along the road. A change at a time is placed where a vehicle at the set speeds before it would be.
 *
 * @param road the road
 * @param hold set speed and changes; speeds that mean the indicated speed are turned into true ones
 * @param scaleError of the speed sensor: measured = (1 + scaleError) true
 */
export function setSpeedAlong(road: Road, hold: HoldPlan, scaleError: number): SetSpeedAlong {
  const toTrue = hold.setSpeedIs === 'indicated' ? 1 / (1 + scaleError) : 1;
  const changes: { at: number; setSpeed: number }[] = [];
  const settling: Stretch[] = [];
  const startSpeed = hold.startSpeed * toTrue;
  let speed = hold.setSpeed * toTrue;
  const grant = (at: number, before: number, after: number, ramp: number | null): void => {
    const seconds = Math.abs(after - before) / (ramp ?? GRANTED_RATE) + GRANTED_SETTLING;
    settling.push({ from: at, to: at + seconds * Math.max(before, after) });
  };
  if (startSpeed !== speed) grant(0, startSpeed, speed, null);
  let place = 0;
  let time = 0;
  for (const change of hold.changes) {
    const next = change.setSpeed * toTrue;
    const at =
      'distance' in change.at
        ? change.at.distance
        : road.along === 'time'
          ? distanceAt(road, change.at.time)
          : place + (change.at.time - time) * speed;
    time += speed > 0 ? (at - place) / speed : 0;
    place = at;
    changes.push({ at, setSpeed: next });
    grant(at, speed, next, change.ramp);
    speed = next;
  }
  const setSpeed = new Float64Array(road.size);
  let k = -1;
  for (let i = 0; i < road.size; i++) {
    while (k + 1 < changes.length && changes[k + 1].at <= road.distance[i]) k++;
    setSpeed[i] = k < 0 ? hold.setSpeed * toTrue : changes[k].setSpeed;
  }
  return { setSpeed, startSpeed, changes, settling };
}
