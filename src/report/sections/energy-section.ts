import { toKm, toPct, toWh } from '../../units/convert.ts';
import type { EnergySource } from '../../vehicle/energy-source.ts';
import { rectangle } from '../charts/canvas.ts';
import { energyChart } from '../charts/energy.ts';
import { lineKey } from '../charts/line-key.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { energyAccount, energyTerms, isWhole } from '../model/energy-account.ts';
import { energyUse, useDefinitions, useFigures, useText } from '../model/energy-use.ts';
import { figureLabel, figureText } from '../model/figure-text.ts';
import type { View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { fixed, NO_VALUE, significant } from '../quantity.ts';
import { chartFigure } from './chart-figure.ts';
import type { Section } from './section.ts';
import { table } from './table.ts';

/** 8: where the drive's work went. */
export function energySection(view: View): Section {
  const { source, throttleMin } = view.result.vehicle.drive;
  const terms = energyTerms(view);
  const rows = view.candidates.map((candidate): HtmlValue[] => {
    const { ledger, endDistance } = candidate.result;
    const account = energyAccount(ledger);
    return [
      html`<span class="who">${lineKey(candidate, PAGE_PAINT)} ${candidate.name}</span>`,
      fixed(toWh(ledger.drive)),
      ...terms.map((term) => {
        const share = ledger.drive > 0 && isWhole(account) ? toPct(account[term.name] / ledger.drive) : null;
        return html`${fixed(toWh(account[term.name]))}${share !== null && html`<br><span class="small">${fixed(share)} %</span>`}`;
      }),
      endDistance > 0 ? significant(toWh(ledger.drive) / toKm(endDistance)) : NO_VALUE,
    ];
  });
  const body = html`<p>All of the drive's pushing work ends in the air, in rolling, in height, in the brake, in speed, ${terms.some(({ name }) => name === 'shifts') && 'in the clutch at shifts, '}or goes back into the drive where it holds back (${throttleMin < 0 ? 'regeneration' : 'engine drag'}). Left of zero: what height or speed gave.</p>
<ul class="keys">${terms.map((term, k) => html`<li><svg class="key" viewBox="0 0 22 12" width="22" height="12" aria-hidden="true">${rectangle({ left: 0, top: 0, width: 22, height: 12 }, PAGE_PAINT.energy[k]!)}</svg> ${term.words}</li>`)}</ul>
${chartFigure('energy', (canvas) => energyChart(view, canvas), 'Energy at the wheel over the whole run, one bar a candidate, one scale.')}
${table(
  'Energy account',
  [
    { head: 'candidate' },
    { head: 'pushing work / Wh', number: true },
    ...terms.map((term) => ({ head: `${term.words} / Wh`, number: true })),
    { head: 'pushing work per km / (Wh/km)', number: true },
  ],
  rows,
)}${source !== null && useTable(view, source)}`;
  return { id: 'energy', number: 8, title: 'Energy', body };
}

/** What every run took from tank or battery, and how far that would reach. */
function useTable(view: View, source: EnergySource): Html {
  const figures = useFigures(source);
  const rows = view.candidates.map((candidate): HtmlValue[] => {
    const use = energyUse(source, candidate.result);
    return [
      html`<span class="who">${lineKey(candidate, PAGE_PAINT)} ${candidate.name}</span>`,
      use === null ? NO_VALUE : useText(use),
      ...figures.map((name) => figureText(candidate.figures[name], figureLabel(name).unit, view.speed)),
    ];
  });
  const fuel = source.kind === 'fuel';
  return html`<h3>${fuel ? 'Fuel' : 'Battery'}</h3>
${table(
  fuel ? 'Fuel' : 'Battery',
  [
    { head: 'candidate' },
    { head: 'used', number: true },
    ...figures.map((name) => ({ head: figureLabel(name).label, number: true })),
  ],
  rows,
)}
<p class="note">${useDefinitions(source)}</p>`;
}
