import { toPct } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { spreadSentence } from '../model/histogram-words.ts';
import type { Spread, SpreadRow } from '../model/histograms.ts';
import { fixed } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, type Scale, scaleOf } from './axes.ts';
import {
  type Box,
  type Canvas,
  drawing,
  filled,
  hatch,
  label,
  rectangle,
  segment,
  stroked,
  tenth,
} from './canvas.ts';

const LEFT = 34;
const RIGHT = 12;
/** Of a strip: room for its name, height of its plot. */
const NAME = 22;
const PLOT = 54;
/** Shares with a line and a figure; a strip shows those below its highest. */
const TICKS = [0.01, 0.1, 0.5, 1];

/**
 * Share of the time by class, a strip for each candidate, all on the same axes. Heights go with the square root of the
 * share, so that what is rare is seen beside what is usual.
 *
 * @param band half-width around zero that is marked, in the unit of the spread; null: none
 */
export function histogramChart(spread: Spread, band: number | null, canvas: Canvas): Html {
  const { width, from, to, rows } = spread;
  const box: Box = {
    left: LEFT,
    top: 22,
    width: canvas.width - LEFT - RIGHT,
    height: rows.length * (NAME + PLOT),
  };
  const x = scaleOf([(from - 0.5) * width, (to + 0.5) * width], box.left, box.left + box.width);
  const highest = Math.max(TICKS[0]!, ...rows.map(({ shares }) => Math.max(...shares)));
  const strips = rows.map((row, i) => {
    const top = box.top + i * (NAME + PLOT) + NAME;
    return strip(spread, row, band, { ...box, top, height: PLOT }, x, highest, canvas);
  });
  const words = {
    title: `${spread.quantity.words}: share of the time by class`,
    desc: rows.map((row) => spreadSentence(spread, row)).join(' '),
  };
  return drawing(
    canvas,
    box.top + box.height + BOTTOM_AXIS_HEIGHT,
    words,
    html`<defs>${hatch(`${canvas.id}-h`, 'rising', canvas.paint.page, 5)}</defs>${label(0, 13, `${spread.quantity.words}: share of the time / %`, { bold: true, fill: canvas.paint.ink })}${strips}${bottomAxis(canvas, box, x, `${spread.quantity.words.toLowerCase()} / ${spread.axis}`)}`,
  );
}

function strip(
  spread: Spread,
  { candidate, shares }: SpreadRow,
  band: number | null,
  box: Box,
  x: Scale,
  highest: number,
  { paint, id }: Canvas,
): Html {
  const bottom = box.top + box.height;
  const y = (share: number): number => bottom - box.height * Math.sqrt(share / highest);
  const colour = paint.series[candidate.colour]!;
  const { width, from, to, cut } = spread;
  const left = (k: number): number => x((from + k - 0.5) * width);
  const last = shares.length - 1;
  const end = (k: number): Html | null =>
    shares[k]! > 0
      ? rectangle(
          { left: left(k), top: y(shares[k]!), width: left(k + 1) - left(k), height: bottom - y(shares[k]!) },
          `url(#${id}-h)`,
        )
      : null;
  const marked =
    band === null ? null : ([Math.max(x(-band), box.left), Math.min(x(band), box.left + box.width)] as const);
  const ticks = TICKS.filter((tick) => tick <= highest * 1.0001);
  return html`<g>${marked !== null && rectangle({ left: marked[0], top: box.top, width: marked[1] - marked[0], height: box.height }, paint.band)}${ticks.map(
    (tick) =>
      html`${segment(box.left, y(tick), box.left + box.width, y(tick), { stroke: paint.grid })}${label(box.left - 5, y(tick) + 4, fixed(toPct(tick)), { anchor: 'end', size: 10, fill: paint.muted })}`,
  )}${filled(`${stairs(shares, left, y, bottom)}Z`, colour, 0.45)}${cut.low && end(0)}${cut.high && end(last)}${stroked(stairs(shares, left, y, bottom), { stroke: colour, width: 1.5 })}${from <= 0 && to >= 0 && segment(x(0), box.top - 3, x(0), bottom, { stroke: paint.ink, dash: '2 3' })}${segment(box.left, bottom, box.left + box.width, bottom, { stroke: paint.muted })}${label(box.left, box.top - 6, candidate.name, { fill: paint.ink })}</g>`;
}

/** From the foot of the first class over all tops to the foot of the last. */
function stairs(
  shares: Float64Array,
  left: (k: number) => number,
  y: (share: number) => number,
  bottom: number,
): string {
  let path = `M${tenth(left(0))},${tenth(bottom)}`;
  shares.forEach((share, k) => {
    path += `V${tenth(y(share))}H${tenth(left(k + 1))}`;
  });
  return `${path}V${tenth(bottom)}`;
}
