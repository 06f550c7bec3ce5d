import type { BendPlan, BendStop } from '../../study/bend-plan.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { unfitWords } from '../model/hold-words.ts';
import type { View } from '../model/view.ts';
import { fixed, lengthText, NO_VALUE, placeText, stretchText, trimmed, withUnit } from '../quantity.ts';
import { table } from './table.ts';

/** The bends that ask for less than the set speed, how they are ridden, and where speed hold does not belong. */
export function bendsPart(view: View, plan: BendPlan): Html {
  const { bends, stops, riding, resolution } = plan;
  const lateral = withUnit(trimmed(riding.maxLateral, 2), 'm/s²');
  const braking = withUnit(trimmed(riding.deceleration, 2), 'm/s²');
  if (bends.length === 0)
    return html`<h3>Bends</h3><p>At no more than ${lateral} to the side every bend of this road can be ridden at the set speed.</p>`;
  const length = stops.reduce((sum, { from, to }) => sum + to - from, 0);
  return html`<h3>Bends</h3>
<p>At no more than ${lateral} to the side, ${bends.length === 1 ? 'one bend asks' : `${bends.length} bends ask`} for less than the set speed. The rider brakes for ${bends.length === 1 ? 'it' : 'them'} at ${braking}, which ends hold, and resumes behind: ${lengthText(length)} of the road in ${stops.length === 1 ? 'one stretch' : `${stops.length} stretches`} by hand.</p>
<h4 id="no-hold">Where speed hold does not belong</h4>
${unfitList(view, plan)}
<details><summary>Table of the bends</summary>${table(
    'Bends',
    [
      { head: 'bend', number: true },
      { head: 'stretch' },
      { head: 'to the' },
      { head: 'radius / m', number: true },
      { head: `allows / ${view.speed.axis}`, number: true },
      { head: `ridden at / ${view.speed.axis}`, number: true },
      { head: 'hold ends', number: true },
      { head: 'resumed', number: true },
    ],
    stops.flatMap((stop) => stopRows(view, plan, stop)),
  )}<p class="note">Speed from the radius r in plan and the greatest lateral acceleration a: v = √(a r). Curves are told apart down to ${lengthText(resolution)}; what is sharper and shorter is blunted by the smoothing of the positions, and a radius below about 20 m comes out too wide. Camber, sight and grip are not looked at.</p></details>`;
}

function unfitList({ speed }: View, { unfit }: BendPlan): Html {
  if (unfit.length === 0)
    return html`<p>Nowhere by its bends: every one of them stands alone and is faster than the lowest speed that the unit holds. Traffic, sight and surface are not looked at.</p>`;
  return html`<ul>${unfit.map(
    (place) =>
      html`<li><strong>${stretchText(place.from, place.to)}</strong>: ${unfitWords(place, speed)}</li>`,
  )}</ul>
<p class="note">By its bends alone: traffic, sight and surface are not looked at, and may speak against it anywhere.</p>`;
}

function stopRows({ speed }: View, { bends }: BendPlan, stop: BendStop): HtmlValue[][] {
  return stop.speeds.map((ridden, k): HtmlValue[] => {
    const index = stop.first + k;
    const bend = bends[index]!;
    return [
      String(index + 1),
      html`<span class="who">${stretchText(bend.from, bend.to)}</span>`,
      bend.side,
      fixed(1 / bend.curvature),
      fixed(speed.of(bend.speed), 1),
      fixed(speed.of(ridden), 1),
      k === 0 ? placeText(stop.from) : '',
      k < stop.speeds.length - 1 ? '' : stop.resumes ? placeText(stop.to) : NO_VALUE,
    ];
  });
}
