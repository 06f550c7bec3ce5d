import { cos } from '../numeric/elementary.ts';
import { InputError, type Problem } from '../problems/input-error.ts';
import { toKmh } from '../units/convert.ts';
import type { CoastRun, Direction } from './coast-down.ts';
import { pieceMeans } from './coast-rows.ts';
import { CLOSED } from './log-kind.ts';
import type { LoggedRun } from './read-log.ts';

/** Slower than this a run is left out: bearings, seals and a shuffling road take over [m/s]. */
export const SLOWEST = 2.5;
/** What the intervals need: samples of a run, runs a way, and runs where wind and slope were logged. */
export const FEWEST_SAMPLES = 20;
export const FEWEST_EACH_WAY = 2;
export const FEWEST_LOGGED = 3;
/** Highest over lowest speed below which air and tyres cannot be told apart. */
export const LEAST_RATIO = 2;
/** Longest time between rows over which a speed may be interpolated [s]. */
const LONGEST_GAP = 3;
/** A rise of the speed that is no noise, on a road whose slope is not known [m/s]. */
const RISE = 0.5;

const MEASURE =
  'five runs or more each way over the same level stretch, from the highest speed of interest down to below half of it, at 5 samples a second or more';

/**
 * The runs of a coast-down, cut to where the vehicle coasts: behind the last row of an open throttle, where a throttle
 * was logged, and down to 9 km/h.
 *
 * @throws InputError with every fault: `too-few-samples`, `gap-in-run`, `not-coasting`, `mixed-columns`, `one-direction`,
 *   `direction-unknown`, `too-few-runs`, `speed-range-too-narrow`; each says what was found and what to measure
 */
export function coastRunsOf(logs: readonly LoggedRun[]): readonly CoastRun[] {
  const towards = logs[0]?.heading ?? null;
  const told = logs.map((log) => log.direction ?? sideOf(log.heading, towards));
  const cut = logs.map((log, i) => coasting(log, told[i] ?? 'there'));
  const faults = cut.flatMap(faultsOfRun);
  const whole = cut.filter(({ time }) => time.length >= FEWEST_SAMPLES);
  faults.push(...faultsOfAll(logs, told, whole));
  const [first, ...others] = faults;
  if (first !== undefined) throw new InputError(first, ...others);
  return cut;
}

/** Which way a heading goes, beside that of the first run, which goes there. */
const sideOf = (heading: number | null, towards: number | null): Direction | null =>
  heading === null || towards === null ? null : cos(heading - towards) >= 0 ? 'there' : 'back';

function coasting(log: LoggedRun, direction: Direction): CoastRun {
  const { speed, throttle } = log;
  const open = throttle?.findLastIndex((share) => share > CLOSED) ?? -1;
  const slow = speed.findIndex((v, i) => i > open && v < SLOWEST);
  const part = (values: Float64Array | null): Float64Array | null =>
    values?.slice(open + 1, slow < 0 ? undefined : slow) ?? null;
  return {
    file: log.file,
    name: log.name,
    direction,
    time: part(log.time)!,
    speed: part(speed)!,
    elevation: part(log.elevation),
    grade: part(log.grade),
    headwind: part(log.headwind),
  };
}

function faultsOfRun({ file, name, time, speed, elevation, grade }: CoastRun): Problem[] {
  const place = { file };
  const which = / run (.+)$/.exec(name)?.[0].trim() ?? 'the run';
  if (time.length < FEWEST_SAMPLES)
    return [
      {
        code: 'too-few-samples',
        place,
        message: `${which} has too few samples of coasting above ${kmh(SLOWEST)}`,
        found: `${time.length}`,
        allowed: `${FEWEST_SAMPLES} or more; log 5 a second or more`,
      },
    ];
  const gap = time.findIndex((t, i) => i > 0 && t - time[i - 1]! > LONGEST_GAP);
  if (gap > 0)
    return [
      {
        code: 'gap-in-run',
        place,
        message: `${which} has a gap`,
        found: `${(time[gap]! - time[gap - 1]!).toFixed(1)} s without a row, from ${time[gap - 1]!.toFixed(1)} s after its first row`,
        allowed: `rows up to ${LONGEST_GAP} s apart; two runs instead of one, told apart by a column run`,
      },
    ];
  const means = pieceMeans(speed);
  const [start, end] = [means[0]!, means[means.length - 1]!];
  const level = elevation === null && grade === null;
  const rise = means.findIndex((mean, i) => i > 0 && mean > means[i - 1]! + RISE);
  if (end < start && !(level && rise > 0)) return [];
  const found =
    rise > 0
      ? `a rise from ${kmh(means[rise - 1]!)} to ${kmh(means[rise]!)}`
      : `${kmh(start)} to ${kmh(end)}`;
  return [
    {
      code: 'not-coasting',
      place,
      message: `${which} does not slow down`,
      found,
      allowed: 'a vehicle that rolls out of gear; cut off what comes before, or log throttle_pct',
    },
  ];
}

function faultsOfAll(
  logs: readonly LoggedRun[],
  told: readonly (Direction | null)[],
  runs: readonly CoastRun[],
): Problem[] {
  const place = { file: [...new Set(logs.map(({ file }) => file))].join(', ') };
  const faults: Problem[] = [];
  const add = (code: string, message: string, found: string, allowed: string): void => {
    faults.push({ code, place, message, found, allowed });
  };
  const winds = runs.filter(({ headwind }) => headwind !== null).length;
  const slopes = runs.filter(({ elevation, grade }) => elevation !== null || grade !== null).length;
  for (const [count, words] of [
    [winds, 'headwind_m_s'],
    [slopes, 'elevation_m or grade_pct'],
  ] as const)
    if (count > 0 && count < runs.length)
      add(
        'mixed-columns',
        'some runs have a column that others lack',
        `${words} in ${count} of ${runs.length} runs`,
        'all runs, or none',
      );
  const there = runs.filter(({ direction }) => direction === 'there').length;
  const back = runs.length - there;
  const ways = `${counted(there, 'run')} there, ${counted(back, 'run')} back`;
  const logged = winds > 0 && slopes > 0;
  const untold = told.filter((direction) => direction === null).length;
  if (untold > 0 && untold < logs.length)
    add(
      'direction-unknown',
      'some runs do not say which way they went',
      `${untold} of ${logs.length}`,
      'a column direction with there or back in all of them',
    );
  else if (!logged && (there === 0 || back === 0))
    add(
      'one-direction',
      'runs in one direction cannot tell wind and slope from drag',
      untold > 0 ? `${counted(logs.length, 'run')}, none with a direction` : ways,
      `runs both ways, told by a column direction (there or back), or headwind_m_s and elevation_m in each row: ${MEASURE}`,
    );
  else if (logged ? runs.length < FEWEST_LOGGED : Math.min(there, back) < FEWEST_EACH_WAY)
    add(
      'too-few-runs',
      'too few runs to say how far they scatter',
      logged ? counted(runs.length, 'run') : ways,
      logged
        ? `${FEWEST_LOGGED} runs at the very least; ${MEASURE}`
        : `${FEWEST_EACH_WAY} runs each way at the very least; ${MEASURE}`,
    );
  const speeds = runs.flatMap(({ speed }) => [...pieceMeans(speed)]);
  if (speeds.length === 0) return faults;
  const [high, low] = [speeds.reduce((a, b) => Math.max(a, b)), speeds.reduce((a, b) => Math.min(a, b))];
  if (high < LEAST_RATIO * low)
    add(
      'speed-range-too-narrow',
      'the speeds lie too close together to tell air from tyres',
      `${kmh(high)} to ${kmh(low)}, a ratio of ${(high / low).toFixed(2)}`,
      `a ratio of ${LEAST_RATIO} or more: from ${kmh(high)} down to ${kmh(high / LEAST_RATIO)} or slower; ${MEASURE}`,
    );
  return faults;
}

const kmh = (speed: number): string => `${toKmh(speed).toFixed(0)} km/h`;
const counted = (count: number, what: string): string => `${count} ${what}${count === 1 ? '' : 's'}`;
