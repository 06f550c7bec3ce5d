import { CLOSED } from '../identify/log-kind.ts';
import type { LoggedRun } from '../identify/read-log.ts';
import type { RideStretch } from '../identify/ride.ts';
import { localRegression } from '../numeric/local-regression.ts';
import { runningIntegral } from '../numeric/running-integral.ts';
import { InputError } from '../problems/input-error.ts';
import { type RoadColumn, valueAt } from '../road/lookup.ts';
import { matchPositions } from '../road/match-positions.ts';
import type { Road } from '../road/road.ts';
import { GRAIN_OF_PLACES, SPEED_WINDOW, wrongWay } from '../study/lay-ride.ts';
import type { LoggedRide } from '../study/logged-ride.ts';
import { backwards, longestPassage } from '../study/ride-passage.ts';
import { derateFactor } from '../vehicle/derating.ts';
import { wheelForce } from '../vehicle/drive-law.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';

/** A pause between rows that breaks a stretch [s]. */
const LONGEST_STEP = 5;
/** Slower rows break a stretch: clutch, walking, standing [m/s]. */
const SLOWEST = 2.5;
/** Rows of the shortest stretch that is kept. */
const FEWEST_ROWS = 10;

/** Half-width of the window in which logged heights become a grade [m], and a scatter of heights that is none [m]. */
const GRADE_REACH = 60;
const GRAIN = 0.5;

/** Air of a ride without a case. */
export interface RideAir {
  /** [kg/m3] and [K] */
  readonly density: number;
  readonly temperature: number;
}

/** Rows of a ride before they are cut into stretches. */
interface RideRows extends Omit<RideStretch, 'driveForce' | 'driven'> {
  readonly throttle: Float64Array | null;
  readonly wheelPower: Float64Array | null;
  readonly airTemperature: Float64Array;
}

/**
 * A ride laid along the road of a case: height, wind and air are those of the road.
 *
 * @throws InputError `no-drive-in-log` where the log has no throttle
 */
export function stretchesOnRoad(
  ride: LoggedRide,
  road: Road,
  vehicle: Vehicle,
  file: string,
): readonly RideStretch[] {
  if (ride.throttle === null) throw noDrive(file, 'throttle_pct beside the places');
  const rows: RideRows = {
    ...roadAlong(road, ride.distance),
    time: ride.time,
    speed: ride.speed,
    place: ride.distance,
    throttle: ride.throttle,
    wheelPower: null,
  };
  const inGap = (i: number): boolean =>
    ride.gaps.some(({ from, to }) => ride.distance[i]! < to && ride.distance[i + 1]! > from) ||
    ride.pauses.some(({ at }) => ride.distance[i]! <= at && ride.distance[i + 1]! >= at);
  return cut(rows, vehicle, inGap);
}

/**
 * A ride with its own speed and its power at the wheel on the road of a case: by position where both have positions, else
 * by the distances of the log from the start of the driven road. Of several passages the longest counts.
 *
 * @throws InputError `ride-off-the-road` where the log does not say its place, or hardly any of it lies on the road;
 *   `ride-wrong-way`
 */
export function stretchesOfLogOnRoad(run: LoggedRun, road: Road, vehicle: Vehicle): readonly RideStretch[] {
  const place = placesOnRoad(run, road);
  const on = Int32Array.from(place.keys()).filter((i) => !Number.isNaN(place[i]!));
  if (on.length < FEWEST_ROWS)
    throw new InputError({
      code: 'ride-off-the-road',
      place: { file: run.file },
      message: 'the logged ride covers too little of the road',
      found: `${on.length} of ${place.length} rows on it`,
      allowed: 'distance_m from the start of the driven road, or lat_deg and lon_deg along it',
    });
  const whole = withoutScatter(run, on, place);
  const passage = longestPassage(whole);
  const along = whole.subarray(passage.first, passage.end);
  const { forth, back } = backwards(whole);
  if (back > forth && along[along.length - 1]! - along[0]! < back / 2) throw wrongWay(back, run.file);
  const taken = on.subarray(passage.first, passage.end);
  const pick = (values: Float64Array): Float64Array => Float64Array.from(taken, (i) => values[i]!);
  const rows: RideRows = {
    ...roadAlong(road, along),
    time: pick(run.time),
    speed: pick(run.speed),
    place: along,
    throttle: run.throttle === null ? null : pick(run.throttle),
    wheelPower: run.wheelPower === null ? null : pick(run.wheelPower),
  };
  return cut(rows, vehicle, (i) => along[i + 1]! < along[i]!);
}

/** Places as a receiver scatters them, many to the second, would go back as often as forth. */
const withoutScatter = ({ time }: LoggedRun, on: Int32Array, place: Float64Array): Float64Array =>
  localRegression(
    Float64Array.from(on, (i) => time[i]!),
    Float64Array.from(on, (i) => place[i]!),
    SPEED_WINDOW,
    GRAIN_OF_PLACES,
  ).value;

function placesOnRoad({ distance, latitudeDeg, longitudeDeg, time }: LoggedRun, road: Road): Float64Array {
  const end = road.distance[road.size - 1]!;
  if (
    latitudeDeg !== null &&
    longitudeDeg !== null &&
    road.latitudeDeg !== null &&
    road.longitudeDeg !== null
  ) {
    const line = { ...road, latitudeDeg: road.latitudeDeg, longitudeDeg: road.longitudeDeg };
    return matchPositions(line, latitudeDeg, longitudeDeg).along;
  }
  return distance?.map((x) => (x >= 0 && x <= end ? x : Number.NaN)) ?? time.map(() => Number.NaN);
}

/** What a road has at places. */
function roadAlong(
  road: Road,
  place: Float64Array,
): Pick<RideRows, 'elevation' | 'grade' | 'headwind' | 'crosswind' | 'airDensity' | 'airTemperature'> {
  const along = (column: RoadColumn): Float64Array => place.map((x) => valueAt(road, column, x));
  return {
    elevation: along('elevation'),
    grade: along('grade'),
    headwind: along('headwind'),
    crosswind: along('crosswind'),
    airDensity: along('airDensity'),
    airTemperature: along('airTemperature'),
  };
}

/**
 * A ride by its own columns: height or grade, wind where it was logged, and the air of the request.
 *
 * @throws InputError `no-drive-in-log`, `no-height-in-log`
 */
export function stretchesOfLog(run: LoggedRun, air: RideAir, vehicle: Vehicle): readonly RideStretch[] {
  const { time, speed, throttle, wheelPower, file } = run;
  if (throttle === null && wheelPower === null) throw noDrive(file, 'wheel_power_kw or throttle_pct');
  const way = run.distance?.map((x) => x - run.distance![0]!) ?? runningIntegral(time, speed);
  const grade =
    run.grade ??
    (run.elevation === null ? null : localRegression(rising(way), run.elevation, GRADE_REACH, GRAIN).slope);
  if (grade === null)
    throw new InputError({
      code: 'no-height-in-log',
      place: { file, line: 1 },
      message: 'the ride has no height, and without it nobody knows what the hills took',
      found: 'neither elevation nor grade',
      allowed: 'elevation_m or grade_pct, or --case with the road',
    });
  const elevation =
    run.elevation ??
    runningIntegral(
      time,
      speed.map((v, i) => (v * grade[i]!) / Math.sqrt(1 + grade[i]! * grade[i]!)),
    );
  const rows: RideRows = {
    time,
    speed,
    place: way,
    elevation,
    grade,
    headwind: run.headwind ?? speed.map(() => 0),
    crosswind: speed.map(() => 0),
    airDensity: speed.map(() => air.density),
    airTemperature: speed.map(() => air.temperature),
    throttle,
    wheelPower,
  };
  return cut(rows, vehicle, () => false);
}

/** Distances that rise at every row, where the vehicle stood as well. */
function rising(way: Float64Array): Float64Array {
  const out = way.slice();
  for (let i = 1; i < out.length; i++) out[i] = Math.max(out[i]!, out[i - 1]! + 1e-6);
  return out;
}

const noDrive = (file: string, allowed: string): InputError =>
  new InputError({
    code: 'no-drive-in-log',
    place: { file, line: 1 },
    message: 'the ride does not say what drove the vehicle, so that nothing can be held against it',
    found: 'neither power nor throttle',
    allowed,
  });

/** Stretches without a pause, a gap, a missing throttle or a crawl. */
function cut(rows: RideRows, vehicle: Vehicle, broken: (row: number) => boolean): readonly RideStretch[] {
  const { time, speed, throttle } = rows;
  const stretches: RideStretch[] = [];
  const usable = (i: number): boolean => speed[i]! >= SLOWEST && !Number.isNaN(throttle?.[i] ?? 0);
  for (let from = 0; from < time.length; from++) {
    if (!usable(from)) continue;
    let to = from;
    while (to + 1 < time.length && usable(to + 1) && time[to + 1]! - time[to]! <= LONGEST_STEP && !broken(to))
      to++;
    if (to - from + 1 >= FEWEST_ROWS) stretches.push(stretchOf(rows, vehicle, from, to + 1));
    from = to;
  }
  return stretches;
}

function stretchOf(rows: RideRows, vehicle: Vehicle, from: number, to: number): RideStretch {
  const part = (values: Float64Array): Float64Array => values.slice(from, to);
  const { drive } = vehicle;
  const power = rows.wheelPower === null ? null : part(rows.wheelPower);
  const throttle = rows.throttle === null ? null : part(rows.throttle);
  const [density, temperature] = [part(rows.airDensity), part(rows.airTemperature)];
  const derate = density.map((rho, i) => derateFactor(drive, rho, temperature[i]!));
  return {
    time: part(rows.time),
    speed: part(rows.speed),
    place: part(rows.place),
    elevation: part(rows.elevation),
    grade: part(rows.grade),
    headwind: part(rows.headwind),
    crosswind: part(rows.crosswind),
    airDensity: density,
    driveForce:
      power === null
        ? (i, v) => wheelForce(drive, drive.gear, v, throttle![i]!, derate[i]!)
        : (i, v) => power[i]! / Math.max(v, 1),
    driven: Uint8Array.from(part(rows.time), (_, i) =>
      power === null ? (throttle![i]! > CLOSED ? 1 : 0) : power[i]! > 0 ? 1 : 0,
    ),
  };
}
