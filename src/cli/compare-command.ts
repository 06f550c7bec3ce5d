import { basename, join, resolve } from 'node:path';
import {
  type Comparison,
  candidatesInBoth,
  compareResults,
  isWorse,
  lostInMatrix,
} from '../report/compare/compare-results.ts';
import { comparisonAnswer, described } from '../report/compare/comparison-answer.ts';
import { comparisonJson } from '../report/compare/comparison-json.ts';
import { renderComparison } from '../report/compare/render-comparison.ts';
import type { RequirementFate } from '../report/compare/requirement-changes.ts';
import { inReaderUnit } from '../report/model/reader-unit.ts';
import { SPEED_UNITS, type Units } from '../report/quantity.ts';
import type { Invocation } from './commands.ts';
import { DONE, NOT_MET } from './exit-status.ts';
import { readResult } from './read-result.ts';
import { checkFolder, writeResult } from './result-folder.ts';
import { say } from './tell.ts';

const PAGE = 'compare.html';
const MARK = 'compare.json';

/** `ridgehold compare BEFORE AFTER`: sets two results side by side, tells people what was lost and won. */
export function compareCommand({ operands: [a, b], values }: Invocation<'compare'>): number {
  const folders = { before: basename(resolve(a)), after: basename(resolve(b)) };
  const folder = values.out ?? join('out', `${folders.before}-and-${folders.after}`);
  checkFolder(folder, [PAGE, MARK]);
  const [before, after] = [readResult(a), readResult(b)];
  const units = values.units ?? 'kmh';
  const series = new Map(
    candidatesInBoth(before.summary, after.summary).map((name) => [
      name,
      { before: before.series(name), after: after.series(name) },
    ]),
  );
  const comparison = compareResults(before.summary, after.summary, series);
  const page = renderComparison(comparison, series, { units, folders });
  const mark = comparisonJson(comparison, folders, [PAGE]);
  writeResult(folder, [
    { name: PAGE, text: page },
    { name: MARK, text: mark },
  ]);
  if (!values.quiet) {
    tellComparison(comparison, units);
    say(`The comparison is at ${join(folder, PAGE)}`);
  }
  if (values.json) process.stdout.write(mark);
  return isWorse(comparison) ? NOT_MET : DONE;
}

const FATES: Readonly<Record<RequirementFate, string | null>> = {
  lost: 'no longer met',
  gained: 'now met',
  changed: 'another verdict',
  new: 'only after',
  dropped: 'only before',
  same: null,
};

/** Cells of the matrix that are told one by one. */
const MOST_CELLS = 12;

function tellComparison(comparison: Comparison, units: Units): void {
  const speed = SPEED_UNITS[units];
  say(comparisonAnswer(comparison, speed).sentence);
  for (const change of comparison.requirements) {
    const words = FATES[change.fate];
    if (words !== null) say(`  ${words}: ${described(change, speed)}`);
  }
  const lost = lostInMatrix(comparison);
  for (const { combination, id, candidate, after } of lost.slice(0, MOST_CELLS))
    say(`  no longer met: ${id} of ${candidate} with ${inReaderUnit(combination, speed)} (${after})`);
  if (lost.length > MOST_CELLS)
    say(`  and ${lost.length - MOST_CELLS} more of the matrix, which ${MARK} lists`);
  const { files, values } = comparison.inputs;
  for (const { change, before, after } of files)
    if (change !== 'same') say(`  ${change}: ${(after ?? before)?.name}`);
  if (values === null)
    say('  what changed in the values cannot be said: a summary of schema 1.0 does not tell them');
  else if (values.length > 0)
    say(`  ${values.length === 1 ? 'one value' : `${values.length} values`} of case and vehicle changed`);
}
