import { histogramChart } from '../charts/histogram.ts';
import { lineKey } from '../charts/line-key.ts';
import { type Html, html } from '../html.ts';
import { classText, timeShareText } from '../model/histogram-words.ts';
import { errorBand, type Spread, spreadsOf } from '../model/histograms.ts';
import type { View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { bandText, withUnit } from '../quantity.ts';
import { chartFigure, HALF, NARROW } from './chart-figure.ts';
import type { Section } from './section.ts';
import { table } from './table.ts';

/** How the time is spread over error, throttle and comfort; null where the record has no distributions. */
export function spreadSection(view: View): Section | null {
  const spreads = spreadsOf(view);
  if (spreads.length === 0) return null;
  const early = view.candidates.some(({ result }) => result.status !== 'completed');
  const cut = spreads.some(({ cut: { low, high } }) => low || high);
  const body = html`<p>How much of the time with hold on each candidate spent where, over the whole road${early && ', or up to where its run ended'}. All candidates of a chart share both axes; heights go with the square root of the share, so that what is rare can be seen. The band of ${bandText(view.result.band, view.speed)} is shaded${cut && '; a hatched class has all that lies beyond it'}.</p>
<div class="pair">${spreads.map((spread) =>
    chartFigure(
      `histogram-${spread.quantity.chart}`,
      (canvas) => histogramChart(spread, errorBand(view, spread), canvas),
      `${spread.quantity.words}, classes of ${withUnit(String(spread.width), spread.unit)}.`,
      { wide: HALF, narrow: NARROW },
    ),
  )}</div>
<details><summary>The same as tables</summary><div class="pair">${spreads.map((spread) => html`<div>${spreadTable(spread)}</div>`)}</div></details>
<p class="note">histograms.csv has finer classes. Acceleration is the mean over a controller sample, jerk its change from one window of 0.2 s to the next, over 0.2 s.</p>`;
  return { id: 'spread', number: 4, title: 'How the error is spread', body };
}

function spreadTable(spread: Spread): Html {
  const { quantity, rows, from, to } = spread;
  const classes = Array.from({ length: to - from + 1 }, (_, k) => k);
  return table(
    `${quantity.words}, share of the time`,
    [
      { head: `${quantity.words.toLowerCase()} / ${spread.axis}` },
      ...rows.map(({ candidate }) => ({
        head: html`<span class="who">${lineKey(candidate, PAGE_PAINT)} ${candidate.name}</span>`,
        number: true,
      })),
    ],
    classes
      .filter((k) => rows.some(({ shares }) => shares[k]! > 0))
      .map((k) => [classText(spread, k), ...rows.map(({ shares }) => timeShareText(shares[k]!))]),
    'dense',
  );
}
