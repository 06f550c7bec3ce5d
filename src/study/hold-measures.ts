import { toKmh, toPct } from '../units/convert.ts';
import { driven, type FigureRecord, type Measure } from './figure-measures.ts';
import type { Figure } from './findings.ts';
import type { HoldOff } from './hold-off.ts';
import { type HoldMeasure, NOT_SETTLED } from './hold-transient.ts';

type Kind = HoldMeasure['event']['kind'];

/**
 * Greatest of a figure over the transients of some kinds. One that is not there although there was time for it is
 * before any other; one that something else on the way, or the end of the run, cut short leaves the figure open, or
 * without a value where there is no other; null is none of them.
 */
function worstOver(
  { hold }: FigureRecord,
  kinds: readonly Kind[],
  of: (measure: HoldMeasure) => Figure | null,
  none: string,
): Measure {
  let worst: { value: number; at: number } | null = null;
  let unknown: Measure | null = null;
  for (const measure of hold().measures) {
    if (!kinds.includes(measure.event.kind)) continue;
    const value = of(measure);
    if (value === null) continue;
    const at = measure.event.distance;
    if (typeof value === 'number') {
      if (worst === null || value > worst.value) worst = { value, at };
    } else if (value.none === NOT_SETTLED) return { value, at };
    else unknown ??= { value, at };
  }
  if (worst === null) return unknown ?? { value: { none }, at: null };
  const reason = unknown?.value;
  return reason === undefined || typeof reason === 'number' ? worst : { ...worst, open: reason.none };
}

const NOT_ENGAGED = 'hold was not engaged on the way';
const NOT_RESUMED = 'hold was not resumed on the way';
const below = ({ lowest }: HoldMeasure): Figure =>
  typeof lowest === 'number' ? toKmh(Math.max(0, -lowest)) : lowest;
const above = ({ highest }: HoldMeasure): Figure =>
  typeof highest === 'number' ? toKmh(Math.max(0, highest)) : highest;

export const engageSag = (record: FigureRecord): Measure =>
  worstOver(record, ['engaged'], below, NOT_ENGAGED);
export const resumeOvershoot = (record: FigureRecord): Measure =>
  worstOver(record, ['resumed'], above, NOT_RESUMED);
export const resumeSettling = (record: FigureRecord): Measure =>
  worstOver(record, ['resumed'], ({ settling }) => settling, NOT_RESUMED);
export const commandStep = (record: FigureRecord): Measure =>
  worstOver(
    record,
    ['engaged', 'resumed', 'override_ended'],
    ({ commandStep: step }) => (typeof step === 'number' ? toPct(step) : null),
    'hold did not take over on the way',
  );

/** Time with hold off; its place is where the longest began. */
export function timeOff(record: FigureRecord): Measure {
  let time = 0;
  let longest: HoldOff | null = null;
  for (const off of record.hold().off) {
    time += off.until - off.since;
    if (longest === null || off.until - off.since > longest.until - longest.since) longest = off;
  }
  return { ...driven(record, () => time), at: longest?.from ?? null };
}

export function endsByRule(record: FigureRecord): Measure {
  const places = record.hold().endedByRule;
  return { ...driven(record, () => places.length), at: places[0] ?? null };
}
