import type { RunResult } from '../run/run-result.ts';
import { html } from './html.ts';
import { type View, viewOf } from './model/view.ts';
import { type Page, renderPage } from './page.ts';
import { lengthText, type Units } from './quantity.ts';
import { answerSection } from './sections/answer-section.ts';
import { candidatesSection } from './sections/candidates-section.ts';
import { energySection } from './sections/energy-section.ts';
import { forceSection } from './sections/force-section.ts';
import { hillsSection } from './sections/hills-section.ts';
import { lanesSection } from './sections/lanes-section.ts';
import { loopPageOf } from './sections/loop-page.ts';
import { loopSection } from './sections/loop-section.ts';
import { matrixSection } from './sections/matrix-section.ts';
import { methodSection } from './sections/method-section.ts';
import { riderSection } from './sections/rider-section.ts';
import { roadSection } from './sections/road-section.ts';
import type { Section } from './sections/section.ts';
import { spreadSection } from './sections/spread-section.ts';
import { whereSection } from './sections/where-section.ts';

export interface ReportOptions {
  /** Unit of speeds for people; all else is metric. */
  readonly units: Units;
}

/** All sections of the page in order, each by its id, numbered from 1. */
export function reportSections(view: View): readonly Section[] {
  const { matrix } = view.result;
  const spread = spreadSection(view);
  const rider = riderSection(view);
  return [
    answerSection(view),
    ...(matrix === null ? [] : [matrixSection(view, matrix)]),
    roadSection(view),
    candidatesSection(view),
    ...(spread === null ? [] : [spread]),
    forceSection(view),
    lanesSection(view),
    ...(rider === null ? [] : [rider]),
    hillsSection(view),
    whereSection(view),
    energySection(view),
    ...(view.result.loops.points.length === 0 ? [] : [loopSection(loopPageOf(view))]),
    methodSection(view),
  ].map((section, i) => ({ ...section, number: i + 1 }));
}

/**
 * A run as a page that needs nothing else: no script, no font, no picture is fetched, and a content security policy
 * holds it to that. Texts that came from files are escaped by construction. The same result gives the same bytes.
 *
 * @param result of `runCase`
 * @param options see ReportOptions
 * @returns the whole HTML document; below 1.5 MB for a road of 100 km
 */
export function renderReport(result: RunResult, options: ReportOptions): string {
  const view = viewOf(result, options.units);
  return renderPage({
    title: `${result.title}: speed-hold replay`,
    heading: result.title,
    memo: reportMemo(view),
    sections: reportSections(view),
    foot: html`Ridgehold ${result.toolVersion}. Invented or real, the road and vehicle are those of the <a href="#method-inputs">inputs</a>. A simulation is no approval to ride.`,
  });
}

/** Names and values under the heading. */
export function reportMemo({ result, length, candidates, speed }: View): Page['memo'] {
  return [
    ['Case', result.caseName],
    ['Road', `${result.road.name}, ${lengthText(length)}`],
    ['Vehicle', result.vehicle.name],
    ['Candidates', String(candidates.length)],
    ['Speeds in', speed.name],
  ];
}
