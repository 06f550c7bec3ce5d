import type { CandidateLoop, LoopSheet } from '../../study/loop-sheet.ts';
import type { Canvas } from '../charts/canvas.ts';
import { loopChart } from '../charts/loop-chart.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { gearName, hasGears } from '../model/gear-words.ts';
import { loopCurves } from '../model/loop-curves.ts';
import {
  factorText,
  isThin,
  NOT_HELD_WORDS,
  phaseText,
  placeOfPoint,
  sensitivityText,
  worstPointWords,
} from '../model/point-words.ts';
import { NO_VALUE, type SpeedUnit, shareText, significant, speedText, timeText } from '../quantity.ts';
import { chartFigure } from './chart-figure.ts';
import type { Section } from './section.ts';
import { table } from './table.ts';

/** What a page needs to tell of loops at operating points. */
export interface LoopPage {
  readonly sheet: LoopSheet;
  readonly speed: SpeedUnit;
  /** Number of a series of the palette by candidate, and its line for people. */
  readonly colourOf: (candidate: string) => number;
  readonly keyOf: (candidate: string) => Html | null;
  /** File in which every point stands. */
  readonly file: string;
}

/** More rows than this are for a spreadsheet. */
const MOST_ROWS = 10;

/** The linear loops: margins where the route or a grid leads, worst first, and what the worst and the usual one look like. */
export function loopSection(page: LoopPage): Section {
  const { sheet } = page;
  const linear = sheet.loops.filter(({ notLinear }) => notLinear === null);
  const others = sheet.loops.filter(({ notLinear }) => notLinear !== null);
  const body = html`<p>${introduction(sheet)}</p>
${sheet.points.length > 0 && linear.map((loop, i) => loopPart(page, loop, i === 0 ? CAPTION : ''))}
${others.length > 0 && html`<p class="note">Without margins: ${others.map(({ name, notLinear }) => `${name} (${notLinear})`).join('; ')}.</p>`}
${notHeldWords(page)}`;
  return { id: 'loop', number: 0, title: 'The loop on paper', body };
}

function introduction({ points }: LoopSheet): string {
  if (points.length === 0)
    return 'Nowhere on the route does a steady throttle hold the speed: there is no loop to look at.';
  const route = points.filter(({ from }) => from === 'route').length;
  const grid = points.length - route;
  const where = [
    route > 0 &&
      `${route} operating ${route === 1 ? 'point stands' : 'points stand'} for the places of the route, weighted by the time that is spent there`,
    grid > 0 && `${grid} more ${grid === 1 ? 'is' : 'are'} those of a grid`,
  ]
    .filter((part) => part !== false)
    .join('; ');
  return `How far each loop is from oscillating, for small errors, before any limit is met: the vehicle linearised exactly where it is, every lag and delay, the sampler and the computing time in it. ${where}. Usual in practice: a gain margin of 2 or more, a phase margin of 30 to 60°, and a greatest sensitivity Ms of at most 2.`;
}

/** One candidate: its worst point in words, the table, the chart. */
function loopPart(page: LoopPage, loop: CandidateLoop, caption: string): Html {
  const { sheet, speed } = page;
  const id = `loop-${loop.name}`;
  const more = loop.order.length - MOST_ROWS;
  return html`<h3 id="${id}">${page.keyOf(loop.name)} ${loop.name}</h3>
<p>${worstPointWords(sheet, loop, speed)}</p>
${marginTable(page, loop)}${more > 0 && html`<p class="note">${more} more points stand in ${page.file}, with the figures of the loop as it would be without a sampler.</p>`}
${chartFigure(id, (canvas) => pageLoopChart(page, loop, canvas), caption)}`;
}

/** Open loop and steps of a candidate at its worst and at the usual point. */
export function pageLoopChart(page: LoopPage, loop: CandidateLoop, canvas: Canvas): Html {
  const { sheet, speed } = page;
  const words = {
    title: `Open loop and step responses of ${loop.name}`,
    desc: worstPointWords(sheet, loop, speed),
  };
  const curves = loopCurves(sheet, loop, { colour: page.colourOf(loop.name) }, speed);
  return loopChart(words, curves, speed, canvas);
}

const CAPTION =
  'Thick uprights on the open loop are its margins at the worst point: the phase above −180° where the magnitude is 0 dB, the magnitude below 0 dB where the phase is −180°. The speed is the true one, after a small step of the set speed and after one per cent more of grade.';

/** Margins, the worst first. */
export function marginTable({ sheet, speed }: LoopPage, loop: CandidateLoop): Html {
  const { points } = sheet;
  const [first] = points;
  const geared = first !== undefined && hasGears(first.vehicle.drive);
  const loaded = points.some(({ load }) => load !== null);
  const rows = loop.order.slice(0, MOST_ROWS).map((i): HtmlValue[] => {
    const point = points[i]!;
    const { margins, setSpeed, load } = loop.figures[i]!;
    const { gainMargin, phaseMargin, sensitivity, delayMargin, bandwidth } = margins;
    const none = (value: number | null, text: string): string => (value === null ? NO_VALUE : text);
    const standing = margins.stable ? (isThin(margins) ? 'thin' : '') : 'unstable';
    const flagged = (text: string): HtmlValue =>
      standing === '' ? text : html`<span class="flag">${text} ${standing}</span>`;
    return [
      ...(geared ? [gearName(point.gear)] : []),
      html`<span class="who">${placeOfPoint({ ...point, load: null }, speed).replace(/^gear.\d+, /, '')}</span>`,
      ...(loaded ? [point.load ?? 'own'] : []),
      point.weight > 0 ? timeShare(point.weight) : 'grid',
      margins.stable ? flagged(sensitivityText(sensitivity)) : html`<span class="flag">unstable</span>`,
      none(phaseMargin, phaseText(phaseMargin)),
      none(gainMargin, factorText(gainMargin)),
      none(delayMargin, timeLeft(delayMargin)),
      none(bandwidth, significant(bandwidth ?? 0, 2)),
      setSpeed === null ? NO_VALUE : settlingText(setSpeed.settling),
      setSpeed === null ? NO_VALUE : shareText(setSpeed.overshoot),
      load === null ? NO_VALUE : significant(speed.of(load.droop), 2),
    ];
  });
  return table(
    `Margins of ${loop.name}`,
    [
      ...(geared ? [{ head: 'gear' }] : []),
      { head: 'operating point' },
      ...(loaded ? [{ head: 'load' }] : []),
      { head: 'share of time', number: true },
      { head: 'Ms', number: true },
      { head: 'phase margin', number: true },
      { head: 'gain margin', number: true },
      { head: 'more delay allowed', number: true },
      { head: 'bandwidth / (rad/s)', number: true },
      { head: 'settles within 2 %', number: true },
      { head: 'overshoot', number: true },
      { head: `lost on 1 % of grade / ${speed.axis}`, number: true },
    ],
    rows,
    'dense',
  );
}

const timeLeft = (time: number | null): string =>
  time === null || !Number.isFinite(time) ? 'no limit' : timeText(time);

const timeShare = (share: number): string =>
  share < 0.01 ? `below\u00a0${shareText(0.01)}` : shareText(share);

const settlingText = (time: number): string => (Number.isFinite(time) ? timeText(time) : 'over 10\u00a0min');

/** Where there is no loop, by reason. */
function notHeldWords({ sheet: { notHeld, points }, speed }: LoopPage): Html | null {
  if (notHeld.length === 0) return null;
  const route = notHeld.filter(({ from }) => from === 'route');
  const grid = notHeld.filter(({ from }) => from === 'grid');
  const reasons = [...new Set(route.map(({ reason }) => reason))].map((reason) => {
    const share = route.filter((one) => one.reason === reason).reduce((sum, one) => sum + one.share, 0);
    return `${NOT_HELD_WORDS[reason]} for ${timeShare(share)} of the time`;
  });
  const vehicle = points[0]?.vehicle;
  const onGrid = grid.map((one) => {
    const place =
      vehicle === undefined ? speedText(one.speed, speed, 0) : placeOfPoint({ ...one, vehicle }, speed);
    return `${place}: ${NOT_HELD_WORDS[one.reason]}`;
  });
  return html`${reasons.length > 0 && html`<p class="note">Along the route there is no steady throttle, and so no such loop: ${reasons.join('; ')}.</p>`}${onGrid.length > 0 && html`<details><summary>${onGrid.length} points of the grid cannot be held</summary><ul>${onGrid.map((text) => html`<li>${text}</li>`)}</ul></details>`}`;
}
