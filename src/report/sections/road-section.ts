import type { RepairKind } from '../../track/track.ts';
import { hatch, rectangle } from '../charts/canvas.ts';
import { demandFill, profileChart } from '../charts/profile.ts';
import { REPAIR_KINDS, repairKey } from '../charts/repair-marks.ts';
import { hasWind, roadLanesChart } from '../charts/road-lanes.ts';
import { WARNED_OPACITY, warnedStretches } from '../charts/stretches.ts';
import { type Html, html } from '../html.ts';
import { DEMAND_CLASSES } from '../model/demand-classes.ts';
import type { View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { fixed, gradeText, lengthText, shareText, speedText, withUnit } from '../quantity.ts';
import { chartFigure } from './chart-figure.ts';
import type { Section } from './section.ts';

/** 2: the road as it was driven, and what it asks of the drive. */
export function roadSection(view: View): Section {
  const body = html`<p>${roadWords(view)}</p>
${chartFigure('profile', (canvas) => profileChart(view, canvas), caption(view))}
${demandKey()}${unfitKey(view)}${repairKeys(view)}
${chartFigure('road-grade', (canvas) => roadLanesChart(view.result.road, view.speed, canvas), gradeCaption(view))}`;
  return { id: 'road', number: 2, title: 'The road', body };
}

function roadWords(view: View): string {
  const { road, hold } = view.result;
  let [climb, drop, steepest, falling] = [0, 0, 0, 0];
  for (let i = 0; i < road.size; i++) {
    steepest = Math.max(steepest, road.grade[i]!);
    falling = Math.min(falling, road.grade[i]!);
    if (i === 0) continue;
    const rise = road.elevation[i]! - road.elevation[i - 1]!;
    climb += Math.max(0, rise);
    drop -= Math.min(0, rise);
  }
  const changes = hold.changes.length;
  const speeds =
    changes === 0
      ? `The set speed is ${speedText(hold.setSpeed, view.speed, 0)}`
      : `The set speed starts at ${speedText(hold.setSpeed, view.speed, 0)} and changes ${changes === 1 ? 'once' : `${changes} times`}`;
  const along =
    road.along === 'time'
      ? ' The disturbances run along time; distance is nominal: time at the set speed.'
      : '';
  return `${road.name}: ${lengthText(view.length)}, ${withUnit(fixed(climb), 'm')} up and ${withUnit(fixed(drop), 'm')} down, grades from ${gradeText(falling)} to ${gradeText(steepest)}. ${speeds}; at it, ${shareText(view.result.demand.holdableShare)} of the length can be held: there the drive has what the road asks, and no hill or change of set speed before it is still being recovered from.${along}${windWords(view)}`;
}

function windWords(view: View): string {
  const { headwind } = view.result.road;
  let [low, high] = [0, 0];
  for (const value of headwind) {
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  return low === 0 && high === 0
    ? ' No wind.'
    : low >= 0
      ? ` Headwind up to ${speedText(high, view.speed, 0)}.`
      : ` Wind from ${speedText(-low, view.speed, 0)} behind to ${speedText(high, view.speed, 0)} ahead.`;
}

function caption(view: View): Html {
  const { smoothing, rawElevation } = view.result.road;
  if (smoothing === null)
    return html`Elevation as given, without smoothing${rawElevation === null && ', from a written profile'}. Brackets: <a href="#hills">hills</a>; bold: more, or less, than the drive has.`;
  return html`Strong: smoothed (${smoothing.source} source, half gain at ${lengthText(smoothing.wavelength)})${rawElevation !== null && '; faint: as measured'}. A hill shorter than ${lengthText(smoothing.shortestHill)} is not resolved. Elevation noise ${fixed(smoothing.residualSd, 1)} m, grade of the source uncertain by ${gradeText(smoothing.sourceGradeSd).replace('+', '')} (one s.d.). Brackets: <a href="#hills">hills</a>; bold: more, or less, than the drive has.`;
}

function gradeCaption(view: View): Html {
  const { smoothing } = view.result.road;
  const known =
    smoothing === null
      ? 'Grade as given, without uncertainty.'
      : 'Grade as the runs meet it; the shade is twice its standard deviation on both sides, and may leave the plot where little is known.';
  return html`${known}${hasWind(view.result.road) && ' Wind at rider height, shelter counted.'}`;
}

/** What the shades under the line mean. */
function demandKey(): Html {
  const swatch = (index: number): Html => {
    const { name } = DEMAND_CLASSES[index]!;
    const box = { left: 0, top: 0, width: 26, height: 14 };
    const id = `demand-key-${index}`;
    const over =
      name === 'above'
        ? html`${hatch(id, 'rising', PAGE_PAINT.ink, 5)}${rectangle(box, `url(#${id})`)}`
        : name === 'below' &&
          html`${hatch(id, 'falling', PAGE_PAINT.warn, 5)}${rectangle(box, `url(#${id})`)}`;
    return html`<svg class="key" viewBox="0 0 26 14" width="26" height="14" aria-hidden="true">${rectangle(box, demandFill(name, PAGE_PAINT))}${over}</svg>`;
  };
  return html`<p class="keyline">Demand on the drive at the set speed:</p><ul class="keys">${DEMAND_CLASSES.map(
    ({ words }, index) => html`<li>${swatch(index)} ${words}</li>`,
  )}</ul>`;
}

function unfitKey({ result: { bends } }: View): Html | null {
  const count = bends?.unfit.length ?? 0;
  if (count === 0) return null;
  const box = { left: 0, top: 0, width: 26, height: 10 };
  const { warn } = PAGE_PAINT;
  return html`<p class="keyline">By its bends:</p><ul class="keys"><li><svg class="key" viewBox="0 0 26 10" width="26" height="10" aria-hidden="true">${hatch('unfit-key-1', 'rising', warn, 4)}${hatch('unfit-key-2', 'falling', warn, 4)}${rectangle(box, 'url(#unfit-key-1)')}${rectangle(box, 'url(#unfit-key-2)')}</svg> <a href="#no-hold">speed hold does not belong</a> (${count})</li></ul>`;
}

function repairKeys(view: View): Html | null {
  const { repairs, masks } = view.result.road;
  const warned = warnedStretches(view.result.road).length;
  if (repairs.length === 0 && masks.length === 0 && warned === 0) return null;
  const counts = new Map<RepairKind, number>();
  for (const { kind } of repairs) counts.set(kind, (counts.get(kind) ?? 0) + 1);
  return html`<p class="keyline">Repairs to the track, at their places (<a href="#method-repairs">all of them</a>):</p><ul class="keys">${[
    ...counts,
  ].map(
    ([kind, count]) => html`<li>${repairKey(kind, PAGE_PAINT)} ${REPAIR_KINDS[kind].words} (${count})</li>`,
  )}${
    masks.length > 0 &&
    html`<li><span class="masked" aria-hidden="true"></span> elevation masked (${masks.length})</li>`
  }${
    warned > 0 &&
    html`<li><svg class="key" viewBox="0 0 26 14" width="26" height="14" aria-hidden="true">${rectangle({ left: 0, top: 0, width: 26, height: 14 }, PAGE_PAINT.warn, WARNED_OPACITY)}</svg> <a href="#method-cautions">stretch with a warning</a> (${warned})</li>`
  }</ul>`;
}
