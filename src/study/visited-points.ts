import { stationAt, surroundingsAt, surroundingsBetween } from '../loop/places.ts';
import type { BinRecord } from '../loop/result.ts';
import type { Road } from '../road/road.ts';
import { fromKmh } from '../units/convert.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { Demand } from './findings.ts';
import { keptInGear } from './gear-course.ts';
import type { NotHeld, OperatingPoint, PointNotHeld } from './operating-point.ts';
import { steadyThrottle } from './steady-throttle.ts';

/** A speed in a gear at a place, and how long it lasted [s]. */
export interface Visit {
  readonly speed: number;
  readonly gear: number;
  readonly surroundings: Surroundings;
  readonly time: number;
}

/** A ride over a route: where it was, in which vehicle. */
export interface Ride {
  /** At the charge at which it is looked at. */
  readonly vehicle: Vehicle;
  /** Name of the load; null: the case's own. */
  readonly load: string | null;
  readonly visits: readonly Visit[];
}

/** Where a run was with hold on, by its record. */
export function visitsOfRecord(road: Road, bins: BinRecord): readonly Visit[] {
  const visits: Visit[] = [];
  for (let i = 0; i < bins.size; i++) {
    const time = bins.time[i] - bins.timeOff[i] - bins.timeShift[i];
    if (!(time > 0 && bins.speedMean[i] > 0)) continue;
    const middle = (bins.edge[i] + bins.edge[i + 1]) / 2;
    const surroundings = surroundingsAt(road, stationAt(road, middle));
    visits.push({ speed: bins.speedMean[i], gear: bins.gear[i], surroundings, time });
  }
  return visits;
}

/** Where an ideal hold would be: the set speed all the way, in the gears of the demand. */
export function visitsOfDemand(road: Road, demand: Demand): readonly Visit[] {
  const visits: Visit[] = [];
  for (let i = 0; i + 1 < road.size; i++) {
    const speed = demand.setSpeed[i];
    const way = road.distance[i + 1] - road.distance[i];
    if (!(way > 0 && speed > 0)) continue;
    const surroundings = surroundingsBetween(road, i, 0.5);
    visits.push({ speed, gear: demand.gear[i], surroundings, time: way / speed });
  }
  return visits;
}

/** Places that differ by less are one: speed [m/s], grade, headwind and crosswind [m/s], density [kg/m3]. */
const ALIKE = { speed: 0.25, grade: 0.0025, headwind: 0.5, crosswind: 2, density: 0.02 };
/** Classes of speed [m/s] and of throttle are no finer than this, */
const FINEST = { speed: fromKmh(5), throttle: 0.05 };
/** and no more than so many in a gear; fewer, where that makes more points than these of a ride. */
const MOST_CLASSES = 4;
const MOST_POINTS = 24;

/**
 * Few points that stand for rides over a route, weighted by time. What the loop is for small errors depends on gear, speed
 * and throttle, so the visits of a ride are sorted into classes of these, from the least to the greatest that occur;
 * a class is stood for by the visit that is nearest to its mean, a place that was really there.
 *
 * @returns points in order of load, gear, speed and throttle, weights that add up to 1; and where no steady throttle
 * holds the speed, by reason, with shares of the time of all visits
 */
export function visitedPoints(rides: readonly Ride[]): {
  readonly points: readonly OperatingPoint[];
  readonly notHeld: readonly PointNotHeld[];
} {
  const whole = sum(rides.flatMap(({ visits }) => visits.map(({ time }) => time)));
  const notHeld: PointNotHeld[] = [];
  const points = rides.flatMap((ride) => {
    const held: HeldVisit[] = [];
    for (const visit of mergeAlike(ride.visits)) {
      const vehicle = keptInGear(ride.vehicle, visit.gear);
      const throttle = steadyThrottle(vehicle, visit.speed, visit.surroundings);
      if (typeof throttle === 'number') held.push({ ...visit, throttle });
      else tally(notHeld, ride.load, visit, throttle, whole);
    }
    return classesOf(held).map((members): OperatingPoint => {
      const { speed, gear, surroundings, throttle } = nearestToMean(members);
      const weight = sum(members.map(({ time }) => time));
      return {
        speed,
        gear,
        surroundings,
        throttle,
        weight,
        vehicle: ride.vehicle,
        load: ride.load,
        from: 'route',
      };
    });
  });
  const total = sum(points.map(({ weight }) => weight));
  return { points: points.map((point) => ({ ...point, weight: point.weight / total })), notHeld };
}

interface HeldVisit extends Visit {
  readonly throttle: number;
}

/** Visits that hardly differ, as the one of them that lasted longest, for the time of all. */
function mergeAlike(visits: readonly Visit[]): readonly Visit[] {
  const kept = new Map<string, { visit: Visit; time: number }>();
  for (const visit of visits) {
    const { grade, headwind, crosswind, airDensity } = visit.surroundings;
    const key = [
      visit.gear,
      Math.round(visit.speed / ALIKE.speed),
      Math.round(grade / ALIKE.grade),
      Math.round(headwind / ALIKE.headwind),
      Math.round(crosswind / ALIKE.crosswind),
      Math.round(airDensity / ALIKE.density),
    ].join();
    const known = kept.get(key);
    if (known === undefined) kept.set(key, { visit, time: visit.time });
    else {
      known.time += visit.time;
      if (visit.time > known.visit.time) known.visit = visit;
    }
  }
  return Array.from(kept.values(), ({ visit, time }) => ({ ...visit, time }));
}

/** Visits by gear, then by class of speed, then by class of throttle, each in rising order. */
function classesOf(visits: readonly HeldVisit[]): readonly (readonly HeldVisit[])[] {
  for (let most = MOST_CLASSES; ; most--) {
    const classes = groups(visits, ({ gear }) => gear).flatMap((inGear) => {
      const speedClass = classing(inGear, ({ speed }) => speed, FINEST.speed, most);
      const throttleClass = classing(inGear, ({ throttle }) => throttle, FINEST.throttle, most);
      return groups(inGear, speedClass).flatMap((atSpeed) => groups(atSpeed, throttleClass));
    });
    if (classes.length <= MOST_POINTS || most === 1) return classes;
  }
}

/** Number of the class of a visit, the first and the last centred on the least and the greatest value. */
function classing(
  visits: readonly HeldVisit[],
  of: (visit: HeldVisit) => number,
  finest: number,
  most: number,
): (visit: HeldVisit) => number {
  const values = visits.map(of);
  const least = values.reduce((a, b) => Math.min(a, b));
  const greatest = values.reduce((a, b) => Math.max(a, b));
  const widths = Math.min(most - 1, Math.floor((greatest - least) / finest));
  if (widths <= 0) return () => 0;
  return (visit) => Math.round(((of(visit) - least) / (greatest - least)) * widths);
}

/** Groups with the same whole number, in rising order of it. */
function groups(
  visits: readonly HeldVisit[],
  of: (visit: HeldVisit) => number,
): readonly (readonly HeldVisit[])[] {
  const found = new Map<number, HeldVisit[]>();
  for (const visit of visits) {
    const key = of(visit);
    const known = found.get(key);
    if (known === undefined) found.set(key, [visit]);
    else known.push(visit);
  }
  return [...found.entries()].sort(([a], [b]) => a - b).map(([, members]) => members);
}

function nearestToMean(members: readonly HeldVisit[]): HeldVisit {
  const time = sum(members.map((visit) => visit.time));
  const mean = (of: (visit: HeldVisit) => number): number =>
    sum(members.map((visit) => of(visit) * visit.time)) / time;
  const speed = mean((visit) => visit.speed);
  const throttle = mean((visit) => visit.throttle);
  const away = (visit: HeldVisit): number =>
    Math.abs(visit.speed - speed) / FINEST.speed + Math.abs(visit.throttle - throttle) / FINEST.throttle;
  return members.reduce((best, visit) => (away(visit) < away(best) ? visit : best));
}

/** Adds a visit to what is told of its reason. */
function tally(
  notHeld: PointNotHeld[],
  load: string | null,
  { speed, gear, surroundings, time }: Visit,
  reason: NotHeld,
  whole: number,
): void {
  const share = time / whole;
  const at = notHeld.findIndex((one) => one.load === load && one.gear === gear && one.reason === reason);
  const known = notHeld[at];
  if (known === undefined) notHeld.push({ speed, gear, surroundings, load, reason, share, from: 'route' });
  else notHeld[at] = { ...known, share: known.share + share };
}

const sum = (values: readonly number[]): number => values.reduce((total, value) => total + value, 0);
