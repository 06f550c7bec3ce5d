import type { Stretch } from '../../study/findings.ts';
import { settlingOf } from './settling.ts';
import type { CandidateView, View } from './view.ts';

/** Furthest below (0 or less) and above (0 or more) the set speed [m/s]. */
export interface ErrorRange {
  readonly low: number;
  readonly high: number;
}

/** Extreme errors of a run; where a change of set speed is being followed they say nothing of the hold and are left out. */
export const settledRange = (view: View, candidate: CandidateView): ErrorRange | null =>
  rangeOutside(candidate, settlingOf(view, candidate));

/** Extreme errors of a run with all its changes of set speed. */
export const wholeRange = (candidate: CandidateView): ErrorRange | null => rangeOutside(candidate, []);

function rangeOutside({ result }: CandidateView, settling: readonly Stretch[]): ErrorRange | null {
  const { size, edge, errorMin, errorMax } = result.bins;
  let range: ErrorRange | null = null;
  for (let i = 0; i < size; i++) {
    if (settling.some(({ from, to }) => edge[i]! < to && edge[i + 1]! > from)) continue;
    if (!Number.isFinite(errorMin[i]!) || !Number.isFinite(errorMax[i]!)) continue;
    const { low, high }: ErrorRange = range ?? { low: 0, high: 0 };
    range = { low: Math.min(low, errorMin[i]!), high: Math.max(high, errorMax[i]!) };
  }
  return range;
}
