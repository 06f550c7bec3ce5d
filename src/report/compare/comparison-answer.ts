import { figureLabel, figureText, figureTextBeside } from '../model/figure-text.ts';
import type { SpeedUnit } from '../quantity.ts';
import { type Comparison, isWorse, lostOf } from './compare-results.ts';
import type { Change } from './figure-changes.ts';
import type { MatrixChange } from './matrix-changes.ts';
import type { SummaryRequirement } from './read-summary.ts';
import type { RequirementChange } from './requirement-changes.ts';

/**
 * `worse`: something that was met no longer is. `better`: something more is met, and nothing lost. `apart`: no
 * requirement is asked of the same candidate in both.
 */
export interface ComparisonAnswer {
  readonly standing: 'worse' | 'better' | 'even' | 'apart';
  readonly sentence: string;
}

/** Requirements that the sentence names; of the rest it tells how many. */
const NAMED = 2;

/** Two results in one sentence: what was met and no longer is, what is met now, and how the figures moved. */
export function comparisonAnswer(comparison: Comparison, speed: SpeedUnit): ComparisonAnswer {
  const lost = lostOf(comparison);
  const gained = comparison.requirements.filter(({ fate }) => fate === 'gained');
  const inBoth = comparison.requirements.some(({ before, after }) => before !== null && after !== null);
  const more = gained.length > 0 || comparison.matrix?.changes.some(({ fate }) => fate === 'gained');
  const standing = isWorse(comparison) ? 'worse' : more ? 'better' : inBoth ? 'even' : 'apart';
  const parts = [
    requirementClause(comparison, lost, gained, speed),
    ...matrixClauses(comparison),
    ...endClauses(comparison),
    figureClause(comparison),
  ];
  return { standing, sentence: `${parts.join('; ')}.` };
}

function requirementClause(
  { before, after, requirements }: Comparison,
  lost: readonly RequirementChange[],
  gained: readonly RequirementChange[],
  speed: SpeedUnit,
): string {
  if (lost.length > 0) {
    const head =
      lost.length === 1
        ? 'One requirement that was met no longer is'
        : `${numberWord(lost.length)} requirements that were met no longer are`;
    const more =
      gained.length === 0
        ? ''
        : `; ${countOf(gained.length, 'other')} now met that ${was(gained.length)} not`;
    return `${head}: ${listed(lost, speed)}${more}`;
  }
  if (gained.length > 0)
    return `All that was met still is, and ${gained.length === 1 ? 'one requirement' : `${gained.length} requirements`} more: ${listed(gained, speed)}`;
  if (before.requirements.length + after.requirements.length === 0) return 'Neither result has a requirement';
  if (requirements.every((one) => one.before === null || one.after === null))
    return 'No requirement is asked of the same candidate in both results';
  const met = requirements.filter((one) => one.after?.verdict === 'met').length;
  const asked = after.requirements.length;
  const stands = requirements.every(({ fate }) => fate === 'same')
    ? 'Every requirement stands as it did'
    : 'Nothing that was met is lost';
  return `${stands} (${met} of ${asked} met)`;
}

/** A count at the start of a sentence. */
const numberWord = (count: number): string =>
  ['None', 'One', 'Two', 'Three', 'Four', 'Five', 'Six', 'Seven', 'Eight', 'Nine', 'Ten'][count] ??
  String(count);

const countOf = (count: number, noun: string): string =>
  count === 1 ? `one ${noun} is` : `${count} ${noun}s are`;
const was = (count: number): string => (count === 1 ? 'was' : 'were');

function listed(changes: readonly RequirementChange[], speed: SpeedUnit): string {
  const named = changes.slice(0, NAMED).map((change) => described(change, speed));
  const more = changes.length - named.length;
  return `${named.join(', ')}${more > 0 ? ` and ${more} more` : ''}`;
}

/** `SH-02 of pi-60s (furthest above, 3.2 km/h before and 4.6 km/h after, at most 4.0 km/h)`. */
export function described({ id, candidate, before, after }: RequirementChange, speed: SpeedUnit): string {
  const who = `${id} of ${candidate}`;
  if (after === null) return `${who} (no longer asked)`;
  const { label } = figureLabel(after.figure);
  const words =
    before === null
      ? valueText(after, null, speed)
      : `${valueText(before, after, speed)} before and ${valueText(after, before, speed)} after`;
  return `${who} (${label.toLowerCase()}, ${words}, ${limitText(after, speed)})`;
}

/** What was measured, told apart from what the other run measured and from the limit. */
export function valueText(
  asked: SummaryRequirement,
  other: SummaryRequirement | null,
  speed: SpeedUnit,
): string {
  if (asked.measured === null) return 'no figure';
  const beside = [asked.limit, ...(typeof other?.measured === 'number' ? [other.measured] : [])];
  return figureTextBeside(asked.measured, beside, figureLabel(asked.figure).unit, speed);
}

export const limitText = ({ sense, limit, figure }: SummaryRequirement, speed: SpeedUnit): string =>
  `${sense} ${figureText(limit, figureLabel(figure).unit, speed)}`;

/** Verdicts of the matrix that changed, of those that both have. */
function matrixClauses({ matrix }: Comparison): string[] {
  if (matrix === null) return [];
  if (matrix.combinations === 0) return ['the matrices are not compared: no combination is in both'];
  const count = (fate: MatrixChange['fate']) => matrix.changes.filter((one) => one.fate === fate).length;
  const [lost, gained] = [count('lost'), count('gained')];
  const of = `of ${matrix.verdicts} verdicts in the ${matrix.combinations} combinations that both have`;
  if (lost + gained === 0) return [`none ${of} is lost or won`];
  return [`${of} ${lost} ${lost === 1 ? 'is' : 'are'} lost and ${gained} won`];
}

/** Candidates that end on the way in one run only. */
function endClauses({ candidates }: Comparison): string[] {
  return candidates
    .filter(({ before, after }) => (before.status === 'completed') !== (after.status === 'completed'))
    .map(({ name, after }) =>
      after.status === 'completed'
        ? `${name} now reaches the end of the road`
        : `${name} no longer reaches the end of the road`,
    );
}

function figureClause({ candidates }: Comparison): string {
  if (candidates.length === 0) return 'no candidate is in both';
  const changes = candidates.flatMap(({ figures }) => figures.map(({ change }) => change));
  const count = (wanted: Change) => changes.filter((change) => change === wanted).length;
  const [better, worse, same] = [count('better'), count('worse'), count('same')];
  if (same === changes.length) return 'every figure is the same';
  return `of the figures ${better} ${better === 1 ? 'is' : 'are'} better, ${worse} worse and ${same} the same`;
}
