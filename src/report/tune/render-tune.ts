import type { TuneResult } from '../../run/tune-result.ts';
import { html } from '../html.ts';
import { lengthOf } from '../model/road-words.ts';
import { renderPage } from '../page.ts';
import { lengthText, significant, type Units } from '../quantity.ts';
import { loopSection } from '../sections/loop-section.ts';
import type { Section } from '../sections/section.ts';
import { answerPart } from './answer-part.ts';
import { gainMapPart } from './gain-map-part.ts';
import { proposalsPart } from './proposals-part.ts';
import { tuneLoopPage } from './tune-loop-page.ts';
import { tuneMethodPart } from './tune-method-part.ts';
import { tuneView } from './tune-view.ts';

export interface TuneOptions {
  /** Unit of speeds for people; all else is metric. */
  readonly units: Units;
}

/**
 * A tuning as one page, in the look of the report and under the same policy: it asks for nothing. The same result gives
 * the same bytes.
 */
export function renderTune(result: TuneResult, { units }: TuneOptions): string {
  const view = tuneView(result, units);
  const loop = tuneLoopPage(view);
  const sections = [
    answerPart(view),
    proposalsPart(view),
    ...(result.border.length === 0 ? [] : [gainMapPart(view)]),
    withOthers(loopSection(loop), result.tuned.length - loop.sheet.loops.length),
    tuneMethodPart(view),
  ].map((section, i) => ({ ...section, number: i + 1 }));
  return renderPage({
    title: `${result.title}: gains and margins`,
    heading: `${result.title}: gains and margins`,
    memo: [
      ['Case', result.caseName],
      ['Road', `${result.road.name}, ${lengthText(lengthOf(result.road))}`],
      ['Vehicle', result.vehicle.name],
      ['Greatest sensitivity allowed', significant(result.plan.sensitivity)],
      ['Speeds in', view.speed.name],
    ],
    sections,
    foot: html`Ridgehold ${result.toolVersion}. Invented or real, the road and vehicle are those of the <a href="#method-inputs">inputs</a>. A simulation is no approval to ride.`,
  });
}

/** The other proposals are told by their margins in the table and in the file alone. */
const withOthers = (section: Section, count: number): Section =>
  count === 0
    ? section
    : {
        ...section,
        body: html`<p>The loops of the case and of the proposal to take; those of the other proposals stand in margins.csv.</p>${section.body}`,
      };
