import { gearInForce } from '../loop/gearbox.ts';
import type { HoldPlan, LoopPlan, PlannedShift } from '../loop/plan.ts';
import { cellOf } from '../numeric/interpolate.ts';
import type { Road } from '../road/road.ts';
import { inGear } from './gear-course.ts';
import { type HoldCourse, nominalCourse } from './hold-course.ts';
import { heldThroughout } from './hold-off.ts';

/**
 * Part of a road as a road of its own: distances and stations start at 0 again, ends are interpolated.
 *
 * @param from horizontal distance [m]; on a step of the road the side behind it counts
 * @param to horizontal distance [m], > from
 */
export function cutRoad(road: Road, from: number, to: number): Road {
  const first = cellOf(road.distance, from);
  const start = Math.max(from, road.distance[0]);
  const end = Math.min(to, road.distance[road.size - 1]);
  let last = first + 1;
  while (last + 1 < road.size && road.distance[last] < end) last++;
  const size = last - first + 1;
  const cutAt = (i: number, place: number): number => {
    const width = road.distance[i + 1] - road.distance[i];
    return width > 0 ? (place - road.distance[i]) / width : 0;
  };
  const startShare = cutAt(first, start);
  const endShare = cutAt(last - 1, end);
  const cut = (column: Float64Array): Float64Array => {
    const part = column.slice(first, last + 1);
    part[0] = column[first] + startShare * (column[first + 1] - column[first]);
    part[size - 1] = column[last - 1] + endShare * (column[last] - column[last - 1]);
    return part;
  };
  const fromZero = (column: Float64Array): Float64Array => {
    const part = cut(column);
    const zero = part[0];
    return part.map((x) => x - zero);
  };
  const maybe = (column: Float64Array | null): Float64Array | null => (column === null ? null : cut(column));
  return {
    ...road,
    size,
    station: fromZero(road.station),
    distance: fromZero(road.distance),
    elevation: cut(road.elevation),
    rawElevation: maybe(road.rawElevation),
    grade: cut(road.grade),
    gradeSd: cut(road.gradeSd),
    heading: road.heading === null ? null : road.heading.slice(first, last + 1),
    curvature: maybe(road.curvature),
    headwind: cut(road.headwind),
    crosswind: cut(road.crosswind),
    airDensity: cut(road.airDensity),
    airTemperature: cut(road.airTemperature),
    latitudeDeg: maybe(road.latitudeDeg),
    longitudeDeg: maybe(road.longitudeDeg),
    masks: [],
    repairs: [],
    warnings: [],
    turnsAt: null,
    points: null,
  };
}

/**
 * The plan over part of its road, started settled at the set speed and in the gear that the plan has at its beginning,
 * with hold on throughout; changes of set speed and shifts inside come along.
 *
 * @param course where the changes of the plan stand; the road's own places where it is left out
 */
export function windowPlan(
  plan: LoopPlan,
  from: number,
  to: number,
  course: HoldCourse = nominalCourse(plan.road, plan.hold, plan.vehicle),
): LoopPlan {
  const held = heldThroughout(plan);
  const { road, vehicle, rider } = held;
  return {
    ...held,
    road: cutRoad(road, from, to),
    vehicle: inGear(vehicle, gearInForce(plan, from)),
    hold: windowHold(course.hold ?? held.hold, from, to, course),
    rider: { ...rider, shifts: windowShifts(rider.shifts, from, to) },
  };
}

const windowShifts = (shifts: readonly PlannedShift[], from: number, to: number): PlannedShift[] =>
  shifts
    .filter(({ distance }) => distance > from && distance < to)
    .map((shift) => ({ ...shift, distance: shift.distance - from }));

function windowHold(
  { starts: _, ...hold }: HoldPlan,
  from: number,
  to: number,
  { changes }: HoldCourse,
): HoldPlan {
  const before = changes.findLastIndex((change) => change.at <= from);
  const setSpeed = before < 0 ? hold.setSpeed : hold.changes[before].setSpeed;
  return {
    ...hold,
    setSpeed,
    startSpeed: setSpeed,
    changes: hold.changes
      .map((change, k) => ({ ...change, at: { distance: changes[k].at - from } }))
      .filter((change) => change.at.distance > 0 && change.at.distance < to - from),
  };
}
