import { type Figure, isNone } from '../../study/findings.ts';
import { toPct, toWh } from '../../units/convert.ts';
import { rectangle } from '../charts/canvas.ts';
import { planChart } from '../charts/plan.ts';
import { segmentStrip } from '../charts/segment-strip.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { errorClasses } from '../model/error-classes.ts';
import { holdMarks, offMarks } from '../model/hold-marks.ts';
import { planMap } from '../model/plan-map.ts';
import type { View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { fixed, gradeText, NO_VALUE, signed, significant, stretchText, withUnit } from '../quantity.ts';
import { chartFigure } from './chart-figure.ts';
import type { Section } from './section.ts';
import { table } from './table.ts';

/** More rows than this are for a spreadsheet. */
const MOST_ROWS = 250;

/** 7: where on the route, in plan and by segment. */
export function whereSection(view: View): Section {
  const { segments, segmentsBy } = view.result;
  const how = segmentsBy === 'length' ? 'of equal length' : 'of nearly constant grade';
  const body = html`${plan(view)}
<h3>Segments</h3>
<p>${segments.length} segments ${how}; each has the worst error of the candidate in it. A wedge that points up: too fast by more than the band; down: too slow.</p>
${classKey(view)}
${chartFigure('segments', (canvas) => segmentStrip(view, canvas), `Worst speed error by segment, one row a candidate.${holdMarks(view).length > 0 ? ' Brackets: a change of set speed is being followed, or the rider shifts, and the error there is planned.' : ''}${offMarks(view).length > 0 ? ' Where the bracket says off, hold is, and there is no error.' : ''}`)}
<details><summary>Table of the segments</summary>${segmentTable(view)}</details>`;
  return { id: 'where', number: 7, title: 'Where', body };
}

function plan(view: View): Html {
  const candidate = view.candidates.find((one) => !one.locked) ?? view.candidates[0];
  const map = planMap(view.result.road);
  if (map === null || candidate === undefined)
    return html`<p>The positions of this road are not known: there is no plan to draw. <a href="#road">The road</a> and <a href="#lanes">the lanes</a> show it along the distance.</p>`;
  return html`<h3>In plan</h3>
${chartFigure(
  'plan',
  (canvas) => planChart(view, candidate, map, canvas),
  html`Worst speed error of ${candidate.name} along the route, north up. The thicker, the further from the set speed; with edges: too fast. Numbers: hills.${(view.result.bends?.unfit.length ?? 0) > 0 && html` Dotted: <a href="#no-hold">speed hold does not belong</a>.`}`,
)}<div class="narrow">${classKey(view)}</div>`;
}

function classKey(view: View): Html {
  return html`<ul class="keys">${errorClasses(view).map(
    ({ index, words }) =>
      html`<li><svg class="key" viewBox="0 0 22 12" width="22" height="12" aria-hidden="true">${rectangle({ left: 0, top: 0, width: 22, height: 12 }, PAGE_PAINT.diverging[index]!)}</svg> ${words}</li>`,
  )}</ul>`;
}

function segmentTable(view: View): Html {
  const { speed, result, candidates } = view;
  const error = (figure: Figure | undefined): string =>
    figure === undefined || isNone(figure) ? NO_VALUE : signed(speed.of(figure), 1);
  const rows = result.segments.slice(0, MOST_ROWS).map((part): HtmlValue[] => [
    String(part.number),
    html`<span class="who">${stretchText(part.from, part.to)}</span>`,
    gradeText(part.meanGrade),
    withUnit(signed(speed.of(part.meanHeadwind), 0), speed.name),
    ...candidates.flatMap((candidate): HtmlValue[] => {
      const run = part.runs.find((one) => one.candidate === candidate.name);
      const share = (figure: Figure | undefined, digits = 0): string =>
        figure === undefined || isNone(figure) ? NO_VALUE : fixed(toPct(figure), digits);
      const energy =
        run === undefined || isNone(run.wheelEnergy) ? NO_VALUE : significant(toWh(run.wheelEnergy), 2);
      return [error(run?.meanError), error(run?.worstError), share(run?.meanThrottle), energy];
    }),
  ]);
  const more = result.segments.length - rows.length;
  return html`${table(
    'Segments',
    [
      { head: 'segment', number: true },
      { head: 'stretch' },
      { head: 'grade', number: true },
      { head: 'headwind', number: true },
      ...candidates.flatMap(({ name }) => [
        { head: html`${name}<br>mean error / ${speed.axis}`, number: true },
        { head: html`worst error / ${speed.axis}`, number: true },
        { head: html`throttle / %`, number: true },
        { head: html`energy / Wh`, number: true },
      ]),
    ],
    rows,
  )}${more > 0 && html`<p class="note">${more} more segments stand in segments.csv.</p>`}`;
}
