import { lineKey } from '../charts/line-key.ts';
import type { CandidateView, View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import type { LoopPage } from './loop-section.ts';

/** The loops of a run for the section that tells of them. */
export function loopPageOf({ result, speed, candidates }: View): LoopPage {
  const look = (name: string): CandidateView | undefined => candidates.find((one) => one.name === name);
  return {
    sheet: result.loops,
    speed,
    colourOf: (name) => look(name)?.colour ?? 1,
    keyOf: (name) => {
      const candidate = look(name);
      return candidate === undefined ? null : lineKey(candidate, PAGE_PAINT);
    },
    file: 'margins.csv',
  };
}
