import { medianOf } from '../numeric/running-median.ts';
import type { LoggedRide, RidePause } from './logged-ride.ts';
import type { Fixes } from './ride-passage.ts';

/** Slower than this the ride stands [m/s], if it does for as long as this [s]. */
const STANDING_SPEED = 0.5;
const SHORTEST_STOP = 3;
/** A ride that went back farther than this turned round [m]; less is the receiver's scatter. */
const WENT_BACK = 30;
/** Fixes farther apart than this many usual steps, and than so many metres or seconds, have a gap between them. */
const USUAL_STEPS = 5;
const GAP_LENGTH = 100;
const GAP_TIME = 5;

/** Rows of a ride along the road; `throttle` NaN where the log says none. */
export type RideRows = Pick<
  LoggedRide,
  'size' | 'distance' | 'time' | 'speed' | 'gaps' | 'pauses' | 'covered'
> & { readonly throttle: Float64Array };

/** 1 where no fix follows for more than 5 s and five usual steps; one a fix. */
export function breakAfter(time: Float64Array): Uint8Array {
  const steps = Float64Array.from(
    { length: Math.max(0, time.length - 1) },
    (_, i) => time[i + 1]! - time[i]!,
  );
  const longest = Math.max(GAP_TIME, steps.length === 0 ? 0 : USUAL_STEPS * medianOf(steps));
  return Uint8Array.from(time, (_, i) => (i < steps.length && steps[i]! > longest ? 1 : 0));
}

/**
 * Makes rows of strictly increasing distance of the fixes of one passage. Fixes that do not go on are left out: while the ride
 * stands, and where it turned back until it comes to the same place again; both are told as pauses and taken out of the time.
 * Where fixes are missing, or lie off the road, for more than 100 m or 5 s (and five usual steps) is a gap.
 *
 * @param fixes of one passage
 * @param along smoothed places [m]
 * @param speed [m/s], below 0 where it goes back
 * @param length of the road [m]
 */
export function rowsOf(fixes: Fixes, along: Float64Array, speed: Float64Array, length: number): RideRows {
  const { time } = fixes;
  const standing = standingAfter(fixes, along, speed);
  const breaks = breakAfter(time);
  const rows: number[] = [];
  const clock: number[] = [];
  const holes: { readonly row: number; readonly missed: number; readonly seconds: number }[] = [];
  const pauses: RidePause[] = [];
  // Since the last row: time under way and at rest, how far back, fixes off the road, longest time without a fix.
  let since = { way: 0, rest: 0, back: 0, missed: 0, silent: 0 };
  const none = since;
  for (let i = 0; i < along.length; i++) {
    const last = rows.at(-1);
    if (last !== undefined) {
      const step = time[i]! - time[i - 1]!;
      const still = standing[i - 1] === 1;
      since = {
        way: since.way + (still ? 0 : step),
        rest: since.rest + (still ? step : 0),
        back: Math.max(since.back, along[last]! - along[i]!),
        missed: since.missed + fixes.missed[i]!,
        silent: Math.max(since.silent, breaks[i - 1] === 1 && !still ? step : 0),
      };
    }
    const goesOn = along[i]! > (last === undefined ? -1 : along[last]!);
    const stands = standing[i] === 1 && i > 0 && standing[i - 1] === 1;
    if (!goesOn || stands) continue;
    let way = since.way;
    if (last !== undefined) {
      const at = along[last]!;
      if (since.rest > 0) pauses.push({ at, duration: since.rest, reason: 'stood' });
      if (since.back > WENT_BACK) {
        // What is left of the time is that for the step forward.
        way = Math.min(way, (along[i]! - at) / Math.max(STANDING_SPEED, (speed[last]! + speed[i]!) / 2));
        pauses.push({ at, duration: since.way - way, reason: 'turned_back' });
      }
      if (since.silent > 0 || since.missed > 0)
        holes.push({ row: rows.length, missed: since.missed, seconds: since.silent });
    }
    rows.push(i);
    clock.push((clock.at(-1) ?? 0) + (rows.length === 1 ? 0 : way));
    since = none;
  }
  const pick = (values: Float64Array): Float64Array => Float64Array.from(rows, (i) => values[i]!);
  const distance = pick(along);
  const gaps = gapsOf(distance, holes, length);
  let covered = (distance.at(-1) ?? 0) - (distance[0] ?? 0);
  for (const { from, to } of gaps) if (from >= distance[0]! && to <= distance.at(-1)!) covered -= to - from;
  return {
    size: rows.length,
    distance,
    time: Float64Array.from(clock),
    speed: pick(speed).map((v) => Math.max(0, v)),
    throttle: pick(fixes.throttle),
    gaps,
    pauses,
    covered,
  };
}

/** 1 where the ride stands from a fix to the next. */
function standingAfter({ time }: Fixes, along: Float64Array, speed: Float64Array): Uint8Array {
  const size = time.length;
  const standing = new Uint8Array(size);
  for (let i = 0; i + 1 < size; i++) {
    const step = time[i + 1]! - time[i]!;
    const slow = Math.abs(speed[i]!) < STANDING_SPEED && Math.abs(speed[i + 1]!) < STANDING_SPEED;
    // A logger that rests with its rider leaves nothing but a long step over a short way.
    const silent = step >= SHORTEST_STOP && Math.abs(along[i + 1]! - along[i]!) < STANDING_SPEED * step;
    standing[i] = slow || silent ? 1 : 0;
  }
  for (let from = 0; from < size; from++) {
    if (standing[from] === 0) continue;
    let to = from;
    while (standing[to] === 1) to++;
    if (time[to]! - time[from]! < SHORTEST_STOP) standing.fill(0, from, to);
    from = to;
  }
  return standing;
}

function gapsOf(
  distance: Float64Array,
  holes: readonly { readonly row: number; readonly missed: number; readonly seconds: number }[],
  length: number,
): LoggedRide['gaps'] {
  const size = distance.length;
  if (size === 0) return [{ from: 0, to: length, reason: 'no fix lies on the road' }];
  const steps = Float64Array.from({ length: size - 1 }, (_, i) => distance[i + 1]! - distance[i]!);
  const longest = Math.max(GAP_LENGTH, steps.length === 0 ? 0 : USUAL_STEPS * medianOf(steps));
  const gaps: { from: number; to: number; reason: string }[] = [];
  if (distance[0]! > longest)
    gaps.push({ from: 0, to: distance[0]!, reason: 'the ride comes onto the road later' });
  let next = 0;
  for (let row = 1; row < size; row++) {
    const hole = holes[next]?.row === row ? holes[next++] : undefined;
    const step = steps[row - 1]!;
    if (step <= longest && !(hole !== undefined && hole.seconds > 0)) continue;
    const reason =
      hole !== undefined && hole.missed > 0
        ? `${hole.missed} fixes off the road`
        : hole !== undefined && hole.seconds > 0
          ? `no fix for ${hole.seconds.toFixed(0)} s`
          : `no fix for ${step.toFixed(0)} m`;
    gaps.push({ from: distance[row - 1]!, to: distance[row]!, reason });
  }
  const end = distance[size - 1]!;
  if (length - end > longest) gaps.push({ from: end, to: length, reason: 'the ride leaves the road before' });
  return gaps;
}
