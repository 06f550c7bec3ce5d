import { toWh } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { type EnergyAccount, energyAccount, energyTerms, isWhole } from '../model/energy-account.ts';
import type { View } from '../model/view.ts';
import { energyText, fixed } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, scaleOf } from './axes.ts';
import { type Box, type Canvas, drawing, hatch, label, rectangle, segment, textWidth } from './canvas.ts';

/**
 * Where the energy went, a bar for each candidate on one scale: what was taken (air, rolling, height gained, brake,
 * speed gained) to the right of zero, what was given back (height lost, speed lost, regeneration counts as taken) to the left.
 */
export function energyChart(view: View, canvas: Canvas): Html {
  const { paint, narrow, id } = canvas;
  const terms = energyTerms(view);
  const accounts = view.candidates.map((candidate) => energyAccount(candidate.result.ledger));
  const left = narrow ? 8 : 130;
  const row = narrow ? 44 : 34;
  const box: Box = {
    left,
    top: 14,
    width: canvas.width - left - 16,
    height: row * view.candidates.length,
  };
  const reach = accounts
    .filter(isWhole)
    .flatMap((account) => [sum(terms, account, 1), -sum(terms, account, -1)]);
  const x = scaleOf(
    [toWh(Math.min(0, ...reach)) * 1.02, toWh(Math.max(1, ...reach)) * 1.02],
    box.left,
    box.left + box.width,
  );
  const bars = view.candidates.map((candidate, i) => {
    const top = box.top + i * row + (narrow ? 18 : 5);
    let [right, leftward] = [0, 0];
    const whole = isWhole(accounts[i]!);
    const parts = (whole ? terms : []).map((term, k) => {
      const value = accounts[i]![term.name];
      const from = value >= 0 ? right : leftward + value;
      if (value >= 0) right += value;
      else leftward += value;
      const [a, b] = [x(toWh(from)), x(toWh(from + Math.abs(value)))];
      const bar = { left: a, top, width: b - a, height: 22 };
      const words = `${candidate.name}, ${term.words}: ${energyText(value)}`;
      return html`<g><title>${words}</title>${rectangle(bar, paint.energy[k]!)}${k % 2 === 1 && rectangle(bar, `url(#${id}-h)`)}${segment(b, top, b, top + 22, { stroke: paint.page, width: 1.5 })}${
        b - a > textWidth(term.short, 11) + 8 && named((a + b) / 2, top + 15, term.short, canvas)
      }</g>`;
    });
    const name = narrow
      ? label(box.left, top - 5, candidate.name, { fill: paint.ink })
      : label(box.left - 8, top + 15, candidate.name, { anchor: 'end', fill: paint.ink });
    const nothing = label(x(0) + 6, top + 15, 'failed numerically: no account', { fill: paint.muted });
    return html`${name}${whole ? parts : nothing}`;
  });
  const words = {
    title: 'Where the energy went',
    desc: view.candidates
      .map(
        (candidate, i) =>
          `${candidate.name}: ${terms.map((term) => `${term.words} ${fixed(toWh(accounts[i]![term.name]))} Wh`).join(', ')}.`,
      )
      .join(' '),
  };
  return drawing(
    canvas,
    box.top + box.height + BOTTOM_AXIS_HEIGHT,
    words,
    html`<defs>${hatch(`${id}-h`, 'rising', paint.page, 7)}</defs>${bars}${segment(x(0), box.top, x(0), box.top + box.height, { stroke: paint.ink })}${bottomAxis(canvas, box, x, 'energy at the wheel / Wh')}`,
  );
}

/** A name on a bar, on a plate of the page's colour: readable on every fill. */
function named(x: number, y: number, text: string, { paint }: Canvas): Html {
  const width = textWidth(text, 11) + 6;
  return html`${rectangle({ left: x - width / 2, top: y - 11, width, height: 14 }, paint.page, 0.88)}${label(x, y, text, { anchor: 'middle', size: 11, fill: paint.ink })}`;
}

function sum(terms: ReturnType<typeof energyTerms>, account: EnergyAccount, sign: 1 | -1): number {
  let total = 0;
  for (const term of terms) total += Math.max(0, sign * account[term.name]);
  return total;
}
