import type { HillOutcome, Replayed } from './findings.ts';
import type { HillFacts } from './hill-facts.ts';
import { type HoldOff, holdOff, isByRule } from './hold-off.ts';
import { causeWords } from './transient-words.ts';
import { atKm } from './wording.ts';

/** What there is to say of a hold that was off on a hill. */
export interface OffOnHill {
  /** Hold was off on some of it: no formula of the whole hill tells what was done. */
  readonly any: boolean;
  /** To follow on why the outcome is what it is; empty where hold was on throughout. */
  readonly words: string;
  /** Cause and why of a candidate that was not affected while hold was on. */
  readonly unaffected: Pick<HillOutcome, 'cause' | 'why'>;
}

/** Where hold was off on what a hill is answerable for, who ended it, and where it came back. */
export function offOnHill(
  { plan, result }: Pick<Replayed, 'plan' | 'result'>,
  { from, until }: Pick<HillFacts, 'from' | 'until'>,
): OffOnHill {
  const off = holdOff(plan, result).filter((stretch) => stretch.from < until && stretch.to > from);
  const words = off.map(offWords).join('');
  if (off.some((stretch) => stretch.from <= from && stretch.to >= Math.min(until, result.endDistance)))
    return {
      any: true,
      words,
      unaffected: { cause: { none: 'hold was off here' }, why: 'Hold was off here.' },
    };
  const kept = off.length === 0 ? 'It kept its band.' : 'It kept its band while hold was on.';
  return {
    any: off.length > 0,
    words,
    unaffected: { cause: { none: 'it kept its band and met no limit' }, why: kept },
  };
}

function offWords({ ended, from, to, back }: HoldOff): string {
  const until = back ? `hold is back at ${atKm(to)}` : 'nobody resumes it';
  if (ended === null) return ` The rider rides by hand from the start; ${until}.`;
  const by = isByRule(ended) ? 'Hold ended by itself' : 'Hold ended';
  return ` ${by} at ${atKm(from)}, because ${causeWords(ended)}; ${until}.`;
}
