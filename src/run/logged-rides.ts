import type { CaseDocument } from '../case/read-case-file.ts';
import { placeOf } from '../case/yaml-source.ts';
import type { HoldPlan, RiderPlan } from '../loop/plan.ts';
import type { Warning } from '../problems/warning.ts';
import type { Road } from '../road/road.ts';
import type { RecoveredHill, Replayed } from '../study/findings.ts';
import { nominalCourse } from '../study/hold-course.ts';
import { layRide } from '../study/lay-ride.ts';
import type { LoggedRide } from '../study/logged-ride.ts';
import type { FigureContext } from '../study/measure-figure.ts';
import { type RideResult, rideResult } from '../study/ride-figures.ts';
import { readRide } from '../track/read-ride.ts';
import { toKm } from '../units/convert.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { InputLog } from './input-log.ts';

/**
 * Reads the logged rides of a case and lays them along its road.
 *
 * @throws InputError of the reader, readRide and layRide
 */
export function loggedRidesOf(
  { file, source }: CaseDocument,
  log: InputLog,
  road: Road,
): readonly LoggedRide[] {
  return file.logged_rides.map(({ name, file: from, track }, i) => {
    const bytes = log.read(from, placeOf(source, ['logged_rides', i, 'file']));
    return layRide(readRide({ name: from, bytes }, track), road, name, from);
  });
}

/** What the figures of the rides are taken with. */
interface RideContext extends FigureContext {
  readonly hills: readonly RecoveredHill[];
  readonly vehicle: Vehicle;
  readonly hold: HoldPlan;
  readonly rider: RiderPlan;
  readonly band: number;
  readonly replayed: readonly Replayed[];
}

/** The figures of every ride, and of the candidates over the same stretches. */
export function rideResults(rides: readonly LoggedRide[], context: RideContext): readonly RideResult[] {
  if (rides.length === 0) return [];
  const { road, hold, vehicle, rider, band, replayed } = context;
  const course = nominalCourse(road, hold, vehicle, rider.shifts);
  return rides.map((ride) => rideResult(ride, course, band, replayed, context));
}

/** Below this share of the road that it covers a ride is told to be a part [m/m]. */
const NEARLY_ALL = 0.9;

/** What a reader of the figures of a ride must know of it. */
export function rideWarnings(rides: readonly LoggedRide[], road: Road): readonly Warning[] {
  const length = road.distance[road.size - 1]!;
  return rides.flatMap(({ name, covered, leftOut, laidBy }): Warning[] => [
    ...(covered < NEARLY_ALL * length
      ? [
          {
            code: 'ride-covers-part',
            message: `The logged ride ${name} covers ${km(covered)} of ${km(length)}: its figures, and those of the candidates beside them, are of that part.`,
          },
        ]
      : []),
    ...(laidBy === 'distance'
      ? [
          {
            code: 'ride-laid-by-distance',
            message: `The logged ride ${name} is laid by its distances from the start of the driven road: what they are off, its speed is drawn away from its place.`,
          },
        ]
      : []),
    ...(leftOut > 0
      ? [
          {
            code: 'ride-points-left-out',
            message: `${leftOut} ${leftOut === 1 ? 'point' : 'points'} of the logged ride ${name} could not be used: no place or time, time running backwards, the time of the point before, or a position far off the line.`,
          },
        ]
      : []),
  ]);
}

const km = (distance: number): string => `${toKm(distance).toFixed(2)} km`;
