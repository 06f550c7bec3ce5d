import { surroundingsBetween } from '../loop/places.ts';
import { cellOf } from '../numeric/interpolate.ts';
import { meanGradeSd } from '../road/error-scales.ts';
import { valueAt } from '../road/lookup.ts';
import type { Road } from '../road/road.ts';
import { atCharge } from '../vehicle/at-charge.ts';
import { authority } from '../vehicle/authority.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { Demand, Hill, HillGears, HillKind, Stretch } from './findings.ts';
import { keptInGear } from './gear-course.ts';
import type { HillStretch } from './hill-stretches.ts';
import { runawayFrom, sustainedFrom } from './settling-speed.ts';

/** What a hill is, whoever rides it. */
export type HillFacts = Omit<Hill, 'outcomes'>;

/**
 * Figures of a hill from road and demand. The mean grade is net climb over length, its s.d. that of the road's error
 * model. The energy of the brake is the integral of (least force - force needed) along the slope.
 *
 * @param vehicle whose demand it is; null: nothing is said of gears
 */
export function hillFacts(
  road: Road,
  demand: Demand,
  stretch: HillStretch,
  number: number,
  vehicle: Vehicle | null = null,
): HillFacts {
  const { from, to, until, kind } = stretch;
  const length = to - from;
  let steepest = cellOf(road.distance, from);
  let extreme = steepest;
  for (let i = steepest; i < road.size && road.distance[i] <= to; i++) {
    if (road.distance[i] < from) continue;
    if (Math.abs(road.grade[i]) > Math.abs(road.grade[steepest])) steepest = i;
    if (moreExtreme(kind, demand, i, extreme)) extreme = i;
  }
  const short = demand.share[extreme] >= 0;
  return {
    number,
    kind,
    from,
    to,
    until,
    meanGrade: (valueAt(road, 'elevation', to) - valueAt(road, 'elevation', from)) / length,
    meanGradeSd: meanGradeSd(road, from, to),
    maxGrade: road.grade[steepest],
    share: demand.share[extreme],
    shareAt: road.distance[extreme],
    requiredForce: demand.required[extreme],
    availableForce: short ? demand.upper[extreme] : demand.lower[extreme],
    ...beforeGrip(road, vehicle, demand, extreme, short),
    sustainedSpeed: short ? demand.sustained[extreme] : demand.runaway[extreme],
    gears: vehicle === null ? null : hillGears(road, vehicle, demand, { from, to }, extreme),
    ...brakeNeeded(road, demand, { from, to }),
    unresolved: road.smoothing !== null && length < road.smoothing.shortestHill,
  };
}

/** Farther out; on a descent further down, so that its brow does not stand for it, unless more than there is is asked. */
function moreExtreme(kind: HillKind, { share: shares, required }: Demand, i: number, other: number): boolean {
  const [share, than] = [shares[i], shares[other]];
  // Where there is no force at all the share says no more.
  if (share === than) return Math.abs(required[i]) > Math.abs(required[other]);
  if (kind !== 'descent' || share > 1 || than > 1) return Math.abs(share) > Math.abs(than);
  return share < than;
}

/** What the drive has where the grip of its wheel passes on less [N]; nothing where grip is no limit. */
function beforeGrip(
  road: Road,
  vehicle: Vehicle | null,
  demand: Demand,
  knot: number,
  short: boolean,
): Pick<HillFacts, 'beforeGrip'> {
  if (vehicle === null || vehicle.traction === null) return {};
  const kept = { ...keptInGear(atCharge(vehicle), demand.gear[knot]), traction: null };
  const at = surroundingsBetween(road, knot, 0);
  const { least, greatest } = authority(kept, demand.gear[knot], demand.setSpeed[knot], at);
  const [has, passed] = short ? [greatest, demand.upper[knot]] : [least, demand.lower[knot]];
  return Math.abs(has) > Math.abs(passed) * (1 + 1e-9) ? { beforeGrip: has } : {};
}

/** Braking that holds the set speed beside the least throttle: greatest power [W], work over the stretch [J]. */
function brakeNeeded(
  road: Road,
  demand: Demand,
  { from, to }: Stretch,
): Pick<HillFacts, 'brakePower' | 'brakeEnergy'> {
  let brakePower = 0;
  let brakeEnergy = 0;
  const forceAt = (i: number): number => demand.brakePower[i] / demand.setSpeed[i];
  for (let i = cellOf(road.distance, from); i + 1 < road.size && road.distance[i] < to; i++) {
    const width = road.distance[i + 1] - road.distance[i];
    if (!(width > 0)) continue;
    const inside = (Math.min(to, road.distance[i + 1]) - Math.max(from, road.distance[i])) / width;
    const span = (road.station[i + 1] - road.station[i]) * inside;
    const way = road.along === 'time' ? span * demand.setSpeed[i] : span;
    brakePower = Math.max(brakePower, demand.brakePower[i], demand.brakePower[i + 1]);
    brakeEnergy += 0.5 * (forceAt(i) + forceAt(i + 1)) * way;
  }
  return { brakePower, brakeEnergy };
}

/** Which gear the hill needs, and what each does at the place of greatest demand. */
function hillGears(
  road: Road,
  vehicle: Vehicle,
  demand: Demand,
  { from, to }: Stretch,
  extreme: number,
): HillGears | null {
  const { gears } = vehicle.drive;
  if (gears.length < 2) return null;
  const inRange = (gear: number): boolean => {
    const { share } = demand.gears[gear];
    for (let i = cellOf(road.distance, from); i < road.size && road.distance[i] <= to; i++)
      if (road.distance[i] >= from && Math.abs(share[i]) > 1) return false;
    return true;
  };
  const needed = gears.findLastIndex((_, gear) => inRange(gear));
  const at = surroundingsBetween(road, extreme, 0);
  const speed = demand.setSpeed[extreme];
  const settles = (gear: number): number => {
    const share = demand.gears[gear].share[extreme];
    if (demand.gears[gear].shaftSpeed[extreme] < vehicle.drive.stallSpeed) return 0;
    const kept = keptInGear(vehicle, gear);
    if (share > 1) return sustainedFrom(kept, at, speed);
    return share < -1 ? runawayFrom(kept, at, speed) : speed;
  };
  return {
    engaged: demand.gear[extreme],
    needed: needed < 0 ? null : needed,
    sustained: gears.map((_, gear) => settles(gear)),
  };
}
