import { speedText } from '../quantity.ts';
import { bestDesign, lockedClause, withinClause } from './answer.ts';
import { statusWords } from './design-standing.ts';
import { isUnstable } from './loop-words.ts';
import { settledRange } from './settled-range.ts';
import type { CandidateView, View } from './view.ts';

/** What the runs alone tell, in one sentence: nothing of hills, causes and verdicts, which need the whole run. */
export function quickAnswerOf(view: View): string {
  const design = bestDesign(view);
  if (design === null) return `${lockedClause(view, true) ?? 'Nothing was replayed'}.`;
  const early = view.candidates.filter((one) => one.result.status !== 'completed');
  const others = early.filter((one) => one !== design && !one.locked);
  const parts = [
    design.result.status === 'completed'
      ? `${design.name} ${withinClause(view, design)}`
      : `${design.name} ${statusWords(design)} and does not finish the road; up to there it ${withinClause(view, design)}`,
    strayClause(view, design),
    isUnstable(design) ? 'its linear loop is unstable, so that it swings on any road' : null,
    ...(others.length === 0 ? [] : [others.map((one) => `${one.name} ${statusWords(one)}`).join(', ')]),
    lockedClause(view, false),
  ];
  return `${parts.filter((part) => part !== null).join('; ')}.`;
}

function strayClause(view: View, design: CandidateView): string | null {
  const range = settledRange(view, design);
  return (
    range &&
    `it strays from ${speedText(-range.low, view.speed)} below to ${speedText(range.high, view.speed)} above`
  );
}
