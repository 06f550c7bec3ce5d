import { localRegression } from '../numeric/local-regression.ts';
import { InputError } from '../problems/input-error.ts';
import { valueAt } from '../road/lookup.ts';
import { matchPositions, ON_ROAD } from '../road/match-positions.ts';
import type { Road } from '../road/road.ts';
import { distanceBetween } from '../track/geodesic.ts';
import type { RideLog } from '../track/read-ride.ts';
import { toKm } from '../units/convert.ts';
import type { LoggedRide } from './logged-ride.ts';
import { backwards, type Fixes, longestPassage, part } from './ride-passage.ts';
import { breakAfter, rowsOf } from './ride-rows.ts';

/** Half-width of the window in which places become a speed [s]. */
export const SPEED_WINDOW = 4;
/** A fix this far from the curve through its neighbours has half their weight, however little they scatter [m]. */
export const GRAIN_OF_PLACES = 3;
/** Beside fixes off the road a fix farther off than this is on its way there [m], if it is within so long of them [s]. */
const LEAVING = 8;
const LEAVING_TIME = 10;
/** A ride over less of the road tells nothing about it. */
export const LEAST_COVER = 0.1;

/**
 * Lays a logged ride along the driven road. By position where both have positions: see matchPositions; else by the
 * distances of the log, or the legs of its positions, from the start of the driven road. Of several passages over the road
 * the longest counts. Places are smoothed by robust local parabolas over +-4 s of fixes without a break (localRegression), and
 * the speed is their slope, along the slope of the road; a speed of the log itself is taken as it is.
 *
 * Nothing of the log off the driven road is in the result.
 *
 * @param name of the ride
 * @param file of the log, for messages
 * @throws InputError `ride-needs-distance` on a road along time, `ride-wrong-way`, `ride-off-the-road` where it covers less
 *   than a tenth of the road
 */
export function layRide(log: RideLog, road: Road, name: string, file: string): LoggedRide {
  if (road.along === 'time')
    throw new InputError({
      code: 'ride-needs-distance',
      place: { file },
      message: 'a logged ride cannot be laid along a road that is written by time',
      allowed: 'a road by distance',
    });
  const { along, off, laidBy } = placesOf(log, road);
  const fixes = fixesOnRoad(log, along);
  const passage = longestPassage(fixes.along);
  const taken = part(fixes, passage.first, passage.end);
  const smooth = smoothed(taken, road, log.speed !== null);
  const rows = rowsOf(taken, smooth.along, smooth.speed, road.distance[road.size - 1]!);
  refuseElsewhere(log, road, fixes, rows.covered, file);
  return {
    name,
    ...rows,
    throttle: log.throttle === null ? null : rows.throttle,
    laidBy,
    rmsOffset: off === null ? null : rmsOf(off),
    speedFrom: log.speed === null ? 'way' : 'log',
    leftOut: log.leftOut,
  };
}

interface Places {
  /** [m]; NaN off the road. */
  readonly along: Float64Array;
  /** [m]; null: laid by distance. */
  readonly off: Float64Array | null;
  readonly laidBy: LoggedRide['laidBy'];
}

function placesOf({ time, distance, latitudeDeg, longitudeDeg }: RideLog, road: Road): Places {
  if (latitudeDeg !== null && longitudeDeg !== null) {
    if (road.latitudeDeg !== null && road.longitudeDeg !== null) {
      const line = { ...road, latitudeDeg: road.latitudeDeg, longitudeDeg: road.longitudeDeg };
      const { along, off } = matchPositions(line, latitudeDeg, longitudeDeg);
      return { along: withoutLeaving(time, along, off), off, laidBy: 'position' };
    }
    if (distance === null) return byDistance(wayAlong(latitudeDeg, longitudeDeg), road);
  }
  return byDistance(distance ?? new Float64Array(0), road);
}

/**
 * Where a ride leaves the road at a slant, its way along the road is shorter than its own: fixes on the way there or back
 * are taken as off the road too.
 */
function withoutLeaving(time: Float64Array, along: Float64Array, off: Float64Array): Float64Array {
  const kept = along.slice();
  const drop = (edge: number, step: 1 | -1): void => {
    for (let i = edge + step; i >= 0 && i < time.length; i += step) {
      if (!(off[i]! > LEAVING) || Math.abs(time[i]! - time[edge]!) > LEAVING_TIME) return;
      kept[i] = Number.NaN;
    }
  };
  for (let i = 0; i < along.length; i++)
    if (Number.isNaN(along[i]!)) {
      drop(i, -1);
      drop(i, 1);
    }
  return kept;
}

function byDistance(way: Float64Array, road: Road): Places {
  const end = road.distance[road.size - 1]!;
  return { along: way.map((x) => (x >= 0 && x <= end ? x : Number.NaN)), off: null, laidBy: 'distance' };
}

function wayAlong(latitudeDeg: Float64Array, longitudeDeg: Float64Array): Float64Array {
  const way = new Float64Array(latitudeDeg.length);
  for (let i = 1; i < way.length; i++)
    way[i] =
      way[i - 1]! +
      distanceBetween(latitudeDeg[i - 1]!, longitudeDeg[i - 1]!, latitudeDeg[i]!, longitudeDeg[i]!);
  return way;
}

function fixesOnRoad({ time, speed, throttle }: RideLog, along: Float64Array): Fixes {
  const on = Int32Array.from(along.keys()).filter((i) => !Number.isNaN(along[i]!));
  const pick = (values: Float64Array | null): Float64Array =>
    Float64Array.from(on, (i) => values?.[i] ?? Number.NaN);
  return {
    time: pick(time),
    along: pick(along),
    speed: pick(speed),
    throttle: pick(throttle),
    missed: Float64Array.from(on, (i, k) => (k === 0 ? 0 : i - on[k - 1]! - 1)),
  };
}

/** Places without the scatter of the receiver, and speeds along the slope (below 0 where it goes back), stretch by stretch without a break. */
function smoothed(
  { time, along, speed }: Fixes,
  road: Road,
  logged: boolean,
): { readonly along: Float64Array; readonly speed: Float64Array } {
  const size = time.length;
  const length = road.distance[road.size - 1]!;
  const place = new Float64Array(size);
  const speeds = new Float64Array(size);
  const breaks = breakAfter(time);
  for (let from = 0; from < size; ) {
    let to = from + 1;
    while (to < size && breaks[to - 1] === 0) to++;
    const { value, slope } = localRegression(
      time.subarray(from, to),
      along.subarray(from, to),
      SPEED_WINDOW,
      GRAIN_OF_PLACES,
    );
    for (let i = from; i < to; i++) {
      const grade = valueAt(road, 'grade', value[i - from]!);
      const own = logged ? speed[i]! : Number.NaN;
      place[i] = Math.min(length, Math.max(0, value[i - from]!));
      speeds[i] = Number.isNaN(own) ? slope[i - from]! * Math.sqrt(1 + grade * grade) : own;
    }
    from = to;
  }
  return { along: place, speed: speeds };
}

function refuseElsewhere(log: RideLog, road: Road, { along }: Fixes, covered: number, file: string): void {
  const length = road.distance[road.size - 1]!;
  if (covered >= LEAST_COVER * length) return;
  const { forth, back } = backwards(along);
  if (back > forth && back >= LEAST_COVER * length) throw wrongWay(back, file);
  throw new InputError({
    code: 'ride-off-the-road',
    place: { file },
    message: 'the logged ride covers too little of the road',
    found: `${km(covered)} of ${km(length)}; ${along.length} of ${log.size} points lie on the road`,
    allowed: `at least ${LEAST_COVER * 100} % of the road, points within ${ON_ROAD} m of it`,
  });
}

/** The refusal of a ride against the road [m]. */
export const wrongWay = (back: number, file: string): InputError =>
  new InputError({
    code: 'ride-wrong-way',
    place: { file },
    message: 'the logged ride goes the other way along the road',
    found: `${km(back)} against the way that is driven`,
    allowed: 'a ride in the direction of the case, or another track.direction',
  });

const km = (distance: number): string => `${toKm(distance).toFixed(2)} km`;

function rmsOf(off: Float64Array): number {
  let [sum, count] = [0, 0];
  for (const one of off)
    if (!Number.isNaN(one)) {
      sum += one * one;
      count++;
    }
  return count === 0 ? 0 : Math.sqrt(sum / count);
}
