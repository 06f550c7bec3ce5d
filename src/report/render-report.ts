import { sha256 } from '@noble/hashes/sha2.js';
import { utf8ToBytes } from '@noble/hashes/utils.js';
import type { RunResult } from '../run/run-result.ts';
import { base64 } from './base64.ts';
import { type Html, html } from './html.ts';
import { type View, viewOf } from './model/view.ts';
import { lengthText, type Units } from './quantity.ts';
import { answerSection } from './sections/answer-section.ts';
import { candidatesSection } from './sections/candidates-section.ts';
import { energySection } from './sections/energy-section.ts';
import { forceSection } from './sections/force-section.ts';
import { hillsSection } from './sections/hills-section.ts';
import { lanesSection } from './sections/lanes-section.ts';
import { methodSection } from './sections/method-section.ts';
import { roadSection } from './sections/road-section.ts';
import type { Section } from './sections/section.ts';
import { whereSection } from './sections/where-section.ts';
import { STYLE } from './style.ts';

export interface ReportOptions {
  /** Unit of speeds for people; all else is metric. */
  readonly units: Units;
}

/** All sections of the page in order, each by its id. */
export function reportSections(view: View): readonly Section[] {
  return [
    answerSection(view),
    roadSection(view),
    candidatesSection(view),
    forceSection(view),
    lanesSection(view),
    hillsSection(view),
    whereSection(view),
    energySection(view),
    methodSection(view),
  ];
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
  const sections = reportSections(view);
  const policy = `default-src 'none'; style-src 'sha256-${base64(sha256(utf8ToBytes(STYLE)))}'; img-src data:; base-uri 'none'; form-action 'none'`;
  const page = html`<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="${policy}">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="referrer" content="no-referrer">
<title>${result.title}: speed-hold replay</title>
`;
  const body = html`<a class="skip" href="#answer">Skip to the answer</a>
<div class="sheet">
<header><h1>${result.title}</h1>${memo(view)}</header>
<nav aria-label="Contents"><ol>${sections.map(({ id, number, title }) => html`<li><a href="#${id}"><span class="n">${number}</span> ${title}</a></li>`)}</ol></nav>
<main>
${sections.map(
  ({ id, number, title, body }) =>
    html`<section id="${id}" aria-labelledby="${id}-h"><h2 id="${id}-h"><span class="n">${number}</span> ${title}</h2>
${body}</section>
`,
)}</main>
<footer>Ridgehold ${result.toolVersion}. Invented or real, the road and vehicle are those of the <a href="#method-inputs">inputs</a>. A simulation is no approval to ride.</footer>
</div>`;
  // The style sheet is a constant of this program: its text must stand unescaped, and its hash is in the policy.
  return `<!doctype html>\n<html lang="en">\n<head>\n${page}<style>${STYLE}</style>\n</head>\n<body>\n${body}\n</body>\n</html>\n`;
}

function memo(view: View): Html {
  const { result } = view;
  const rows: readonly (readonly [string, string])[] = [
    ['Case', result.caseName],
    ['Road', `${result.road.name}, ${lengthText(view.length)}`],
    ['Vehicle', result.vehicle.name],
    ['Candidates', String(view.candidates.length)],
    ['Speeds in', view.speed.name],
  ];
  return html`<dl class="memo">${rows.map(([name, value]) => html`<div><dt>${name}</dt><dd>${value}</dd></div>`)}</dl>`;
}
