import { isNone } from '../../study/findings.ts';
import { significant } from '../quantity.ts';
import { requirementWords } from './requirement-words.ts';
import { gainsText, worstWords } from './tune-answer.ts';
import type { TunedView, TuneView } from './tune-view.ts';

/** A line for each candidate and proposal, in columns: bound, name, gains, worst point, cost, requirements; then what was not proposed. */
export function tuneLines(view: TuneView): readonly string[] {
  const rows = view.tuned.map((one) => [
    keepsWords(one),
    one.name,
    gainsText(one, view.speed),
    one.loop.notLinear === null ? `Ms ${worstWords(one, view)}` : `no margins: ${one.loop.notLinear}`,
    isNone(one.cost) ? `no cost: ${one.cost.none}` : `cost ${significant(one.cost)}`,
    requirementWords(one.requirements, 'requirement'),
  ]);
  const widths = [0, 1, 2, 3, 4].map((k) => Math.max(0, ...rows.map((row) => row[k]?.length ?? 0)));
  return [
    ...rows.map((row) => `  ${row.map((cell, k) => cell.padEnd(widths[k] ?? 0)).join('  ')}`.trimEnd()),
    ...view.result.notProposed.map(({ design, reason }) => `  not proposed: ${design}: ${reason}`),
  ];
}

const keepsWords = ({ keeps }: TunedView): string =>
  keeps === null ? 'not linear' : keeps ? 'keeps' : 'exceeds';
