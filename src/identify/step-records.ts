import { InputError, type Problem } from '../problems/input-error.ts';
import { toKmh, toPct } from '../units/convert.ts';
import type { LoggedRun } from './read-log.ts';
import type { FittedStep, StepRecord } from './step-test.ts';
import { stepLevels } from './two-point-step.ts';

/** A change of the throttle that is no step but the noise of its sensor. */
const LEAST_STEP = 0.01;
/** A step is done within this time [s]; what takes longer is a ramp. */
const LONGEST_RISE = 0.5;
/** Time before a step that must be quiet [s]. */
const QUIET = 2;
const FEWEST_SAMPLES = 30;
/** Time constants that a record must last. */
const LEAST_CONSTANTS = 2.5;
/** Change of speed over its scatter before the step, below which there is nothing to fit. */
const LEAST_CHANGE = 5;

const MEASURE =
  'hold a steady speed in one gear on a level road, step the throttle by 3 to 10 % at once, keep it until the speed is steady again (four time constants), then step back; at 5 samples a second or more';

/**
 * The steps of the throttle in logs: each from the quiet before it to the next change.
 *
 * @throws InputError `missing-column`, `no-step`: what was found, and what to measure
 */
export function stepRecordsOf(logs: readonly LoggedRun[]): readonly StepRecord[] {
  const records = logs.flatMap(stepsOf);
  if (records.length > 0) return records;
  const file = [...new Set(logs.map((log) => log.file))].join(', ');
  throw new InputError({
    code: 'no-step',
    place: { file },
    message: 'there is no step of the throttle',
    found: `a throttle between ${rangeWords(logs)}`,
    allowed: `a step of ${toPct(LEAST_STEP)} % or more within ${LONGEST_RISE} s, and ${QUIET} s of a steady throttle before it; ${MEASURE}`,
  });
}

function rangeWords(logs: readonly LoggedRun[]): string {
  const all = logs.flatMap(({ throttle }) => [...(throttle ?? [])]);
  const [low, high] = [all.reduce((a, b) => Math.min(a, b)), all.reduce((a, b) => Math.max(a, b))];
  return `${toPct(low).toFixed(1)} and ${toPct(high).toFixed(1)} %, none of whose changes is one`;
}

function stepsOf(log: LoggedRun): StepRecord[] {
  const { throttle, time, speed, file } = log;
  if (throttle === null)
    throw new InputError({
      code: 'missing-column',
      place: { file, line: 1 },
      message: 'a step test needs the throttle',
      found: 'none',
      allowed: 'throttle_pct',
    });
  const changes = changesOf(throttle, time);
  return changes.flatMap(({ from, to }, k): StepRecord[] => {
    const first = k === 0 ? 0 : changes[k - 1]!.to;
    const last = k + 1 < changes.length ? changes[k + 1]!.from : time.length - 1;
    const at = time[to]!;
    if (time[from]! - time[first]! < QUIET || time[to]! - time[from]! > LONGEST_RISE) return [];
    // Of the time before, as much as is quiet from the step before: its own response has faded by its end.
    const start = time.findIndex(
      (t, i) => i >= first && t >= time[from]! - Math.max(QUIET, (time[from]! - time[first]!) / 4),
    );
    return [
      {
        file,
        name: `${log.name} at ${at.toFixed(1)} s`,
        at,
        from: throttle[from]!,
        to: throttle[to]!,
        time: time.slice(start, last + 1).map((t) => t - at),
        speed: speed.slice(start, last + 1),
      },
    ];
  });
}

/** Changes of the throttle: the row before each and the first row at its new level. */
function changesOf(
  throttle: Float64Array,
  time: Float64Array,
): readonly { readonly from: number; readonly to: number }[] {
  const found: { from: number; to: number }[] = [];
  for (let i = 1; i < throttle.length; i++) {
    if (Math.abs(throttle[i]! - throttle[i - 1]!) < LEAST_STEP / 2) continue;
    const before = found.at(-1);
    // Rows of one step that the logger caught half-way.
    if (before !== undefined && before.to === i - 1 && time[i]! - time[before.from]! <= LONGEST_RISE)
      before.to = i;
    else found.push({ from: i - 1, to: i });
  }
  return found.filter(({ from, to }) => Math.abs(throttle[to]! - throttle[from]!) >= LEAST_STEP);
}

/**
 * Refuses steps that are too short or too small for their fit.
 *
 * @param fits null where a record has none
 * @throws InputError with every fault: `too-few-samples`, `step-too-small`, `step-too-short`
 */
export function checkSteps(
  records: readonly StepRecord[],
  fits: readonly (FittedStep | null)[],
): readonly FittedStep[] {
  const faults = records.flatMap((record, i) => faultsOf(record, fits[i] ?? null));
  const [first, ...others] = faults;
  if (first !== undefined) throw new InputError(first, ...others);
  return fits.filter((fit) => fit !== null);
}

function faultsOf(record: StepRecord, fit: FittedStep | null): Problem[] {
  const place = { file: record.file };
  const which = `the step at ${record.at.toFixed(1)} s`;
  const lasts = record.time[record.time.length - 1]!;
  if (record.time.length < FEWEST_SAMPLES)
    return [
      {
        code: 'too-few-samples',
        place,
        message: `${which} has too few samples`,
        found: String(record.time.length),
        allowed: `${FEWEST_SAMPLES} or more; ${MEASURE}`,
      },
    ];
  const { before, after } = stepLevels(record);
  const quiet = record.speed.filter((_, i) => record.time[i]! < 0);
  const scatter = Math.sqrt(quiet.reduce((sum, v) => sum + (v - before) * (v - before), 0) / quiet.length);
  if (Math.abs(after - before) < LEAST_CHANGE * scatter)
    return [
      {
        code: 'step-too-small',
        place,
        message: `the speed hardly answers ${which}`,
        found: `${toKmh(Math.abs(after - before)).toFixed(2)} km/h, where it scatters by ${toKmh(scatter).toFixed(2)} km/h before the step`,
        allowed: `${LEAST_CHANGE} times the scatter or more: a larger step, or a smoother speed; ${MEASURE}`,
      },
    ];
  if (fit !== null && fit.fit.timeConstant.value * LEAST_CONSTANTS <= lasts) return [];
  const found = fit === null ? 'no end' : `a time constant of ${fit.fit.timeConstant.value.toFixed(1)} s`;
  return [
    {
      code: 'step-too-short',
      place,
      message: `${which} was not held until the speed settled`,
      found: `${found} in ${lasts.toFixed(1)} s`,
      allowed: `${LEAST_CONSTANTS} time constants or more; ${MEASURE}`,
    },
  ];
}
