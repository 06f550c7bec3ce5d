import type { CaseDocument } from '../case/read-case-file.ts';
import { placeOf } from '../case/yaml-source.ts';
import type { SensorFault } from '../loop/plan.ts';
import type { LoopResult } from '../loop/result.ts';
import type { Warning } from '../problems/warning.ts';
import type { Replayed } from '../study/findings.ts';
import { errorRange } from '../study/hill-cause.ts';
import { placeInRun } from '../study/hold-course.ts';
import { holdOff, isByRule } from '../study/hold-off.ts';
import { SHOWED, timeInRun } from '../study/sensor-cause.ts';
import { causeWords } from '../study/transient-words.ts';
import { atKm, inSeconds } from '../study/wording.ts';

/** What comes of a fault is looked for so long behind its end [s]. */
const LOOKED = 10;
/** So many faults are told one by one; the rest is counted. */
const TOLD = 3;

/**
 * What came of each fault of the speed sensor, design by design: a rule that ended hold, or how far the speed went from
 * the set speed. A throttle locked in place has no use for the sensor.
 */
export function faultWarnings({ source }: CaseDocument, replayed: readonly Replayed[]): readonly Warning[] {
  const designs = replayed.filter(({ plan }) => plan.controller.kind !== 'locked');
  const faults = designs[0]?.plan.faults ?? [];
  const warnings = faults.flatMap((fault, i): Warning[] => {
    const begun = designs.flatMap((design) => {
      const time = 'time' in fault.at ? fault.at.time : timeInRun(design.result, fault.at.distance);
      const from = 'time' in fault.at ? placeInRun(design.result, time).at : fault.at.distance;
      return Number.isFinite(time) && Number.isFinite(from) ? [{ design, time, from }] : [];
    });
    const [first] = begun;
    if (first === undefined) return [];
    const outcomes = begun.map(({ design, time }) => `${design.name}, ${outcome(design, fault, time)}`);
    return [
      {
        code: 'sensor-fault',
        message: `The speed sensor ${SHOWED[fault.shows]} for ${inSeconds(fault.for)} from ${atKm(first.from)} on: ${outcomes.join('; ')}.`,
        place: placeOf(source, ['faults', i]),
        from: first.from,
        to: Math.min(
          placeInRun(first.design.result, first.time + fault.for).at,
          first.design.result.endDistance,
        ),
      },
    ];
  });
  const more = warnings.length - TOLD;
  return warnings
    .slice(0, TOLD)
    .map((one, i) =>
      i === TOLD - 1 && more > 0
        ? { ...one, message: `${one.message} ${more} more of the faults are not told.` }
        : one,
    );
}

function outcome({ plan, result }: Replayed, fault: SensorFault, begun: number): string {
  const until = begun + fault.for + LOOKED;
  const ended = (result.holdEvents ?? []).find(
    (event) => event.kind === 'ended' && isByRule(event) && event.time >= begun && event.time <= until,
  );
  if (ended !== undefined)
    return `a rule ended hold ${inSeconds(ended.time - begun)} later, ${causeWords(ended)}`;
  const off = holdOff(plan, result).some((one) => one.since <= begun && one.until >= begun + fault.for);
  if (off) return 'hold was off';
  const errors = errorsBetween(result, begun, until);
  return errors === null
    ? 'no rule ended hold'
    : `no rule ended hold, ${errorRange(errors)} up to ${LOOKED} s behind its end`;
}

/** Extremes of the error over the time with hold on, by bin [m/s]; null: there was none. */
function errorsBetween(
  { bins }: LoopResult,
  since: number,
  until: number,
): { readonly low: number; readonly high: number } | null {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < bins.size; i++) {
    const end = bins.timeAt[i] + bins.time[i];
    if (end <= since || bins.timeAt[i] > until || bins.time[i] - bins.timeOff[i] <= 0) continue;
    low = Math.min(low, bins.errorMin[i]);
    high = Math.max(high, bins.errorMax[i]);
  }
  return low <= high ? { low, high } : null;
}
