import type { Hill } from '../../study/findings.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { startingCharge } from '../model/battery-words.ts';
import type { View } from '../model/view.ts';
import { energyText, gradeText, NO_VALUE, powerText, speedText, stretchText } from '../quantity.ts';
import { table } from './table.ts';

/** Descents on which even the least throttle is too much: what the brake would have to take; null where there are none. */
export function descents(view: View): Html | null {
  const steep = view.result.hills.filter(({ brakePower }) => brakePower > 0);
  if (steep.length === 0) return null;
  const geared = steep.some(({ gears }) => gears !== null);
  const rows = steep.map((hill): HtmlValue[] => [
    String(hill.number),
    html`<span class="who">${stretchText(hill.from, hill.to)}</span>`,
    gradeText(hill.meanGrade),
    gradeText(hill.maxGrade),
    hill.share < -1 ? speedText(hill.sustainedSpeed, view.speed, 0) : NO_VALUE,
    powerText(hill.brakePower),
    energyText(hill.brakeEnergy),
    ...(geared ? [neededGear(hill)] : []),
  ]);
  const { throttleMin } = view.result.vehicle.drive;
  const charge = startingCharge(view);
  return html`<h3>Descents that need a brake</h3>
<p>Here even ${throttleMin < 0 ? 'full regeneration' : 'closed throttle'} holds back too little for the set speed. The brake power and energy are what would be left to the brakes at a steady set speed, in the gear engaged${charge === null ? '' : ` and with the battery ${charge.state}${charge.left}`}.</p>
${table(
  'Descents that need a brake',
  [
    { head: 'hill', number: true },
    { head: 'stretch' },
    { head: 'mean grade', number: true },
    { head: 'steepest', number: true },
    { head: 'runs away to', number: true },
    { head: 'brake, greatest power', number: true },
    { head: 'brake, energy', number: true },
    ...(geared ? [{ head: 'gear that would hold', number: true }] : []),
  ],
  rows,
)}
<p class="caution">Brakes heat, and on a long descent they fade: nothing here looks at their temperature. To slow by the engine in a lower gear is the rider's choice, ahead of the descent and with the road in sight; a speed hold does not make it.</p>`;
}

const neededGear = ({ gears }: Hill): string =>
  gears === null ? NO_VALUE : gears.needed === null ? 'none' : String(gears.needed + 1);
