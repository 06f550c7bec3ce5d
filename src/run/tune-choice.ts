import { isNone } from '../study/findings.ts';
import type { TunedCandidate } from './tune-result.ts';
import { isMissed } from './with-matrix.ts';

type Choosable = Pick<TunedCandidate, 'requirements' | 'cost'>;

/** Requirements of the case that a candidate does not meet, what is not judged among them. */
export const missedBy = ({ requirements }: Pick<TunedCandidate, 'requirements'>): number =>
  requirements.filter(isMissed).length;

/** Negative where the first is to be taken before the second: it misses fewer requirements, or as many and costs less. */
export const byChoice = (one: Choosable, other: Choosable): number =>
  missedBy(one) - missedBy(other) || costOf(one) - costOf(other) || 0;

/** The one to take of several, the first of equals; null where none has a cost. */
export function firstChoice<T extends Choosable>(several: readonly T[]): T | null {
  const [first] = several.filter(({ cost }) => !isNone(cost)).sort(byChoice);
  return first ?? null;
}

const costOf = ({ cost }: Choosable): number => (isNone(cost) ? Number.POSITIVE_INFINITY : cost);
