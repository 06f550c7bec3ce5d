import { TOOL_VERSION } from '../../run/tool-version.ts';
import { html } from '../html.ts';
import { renderPage } from '../page.ts';
import { SPEED_UNITS, type Units } from '../quantity.ts';
import { answerPart } from './answer-part.ts';
import type { Comparison } from './compare-results.ts';
import type { Folders } from './comparison-json.ts';
import { figuresPart } from './figures-part.ts';
import { hillsPart } from './hills-part.ts';
import { inputsPart } from './inputs-part.ts';
import { methodPart } from './method-part.ts';
import type { SeriesPair } from './read-series.ts';
import { roadPart } from './road-part.ts';

export interface ComparisonOptions {
  /** Unit of speeds for people; all else is metric. */
  readonly units: Units;
  readonly folders: Folders;
}

/**
 * Two results as one page, in the look of the report and under the same policy: it asks for nothing.
 *
 * @param series of the candidates that both have, by name
 */
export function renderComparison(
  comparison: Comparison,
  series: ReadonlyMap<string, SeriesPair>,
  { units, folders }: ComparisonOptions,
): string {
  const speed = SPEED_UNITS[units];
  const { before, after } = comparison;
  const heading = before.title === after.title ? after.title : `${before.title} and ${after.title}`;
  const side = (folder: string, name: string): string => `${folder} (case ${name})`;
  return renderPage({
    title: `${heading}: two results side by side`,
    heading: `${heading}: before and after`,
    memo: [
      ['Before', side(folders.before, before.case)],
      ['After', side(folders.after, after.case)],
      ['Candidates in both', String(comparison.candidates.length)],
      ['Speeds in', speed.name],
    ],
    sections: [
      answerPart(comparison, speed),
      inputsPart(comparison, speed),
      figuresPart(comparison, speed),
      roadPart(comparison, series, speed),
      hillsPart(comparison, speed),
      methodPart(),
    ],
    foot: html`Ridgehold ${TOOL_VERSION}. A simulation is no approval to ride.`,
  });
}
