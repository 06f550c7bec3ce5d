import { type Html, html } from '../html.ts';
import type { LoopCurves } from '../model/loop-curves.ts';
import { fixed, withUnit } from '../quantity.ts';
import { leftAxis, type Scale, scaleOf } from './axes.ts';
import { type Box, type Canvas, clip, clipped, label, segment, stroked, textWidth } from './canvas.ts';
import { decadesOf, logarithmicAxis } from './log-axis.ts';
import { panelName, strokeOf } from './loop-panel.ts';
import { linePath, type Point } from './paths.ts';

/** Magnitudes [dB] and phases [deg] further off say nothing about the margins; the lower end makes room for a gain margin. */
const DECIBELS = { high: 40, low: -40, lowest: -80 } as const;
const LOWEST_PHASE = -360;

/**
 * Magnitude and phase of open loops over frequency, one panel above the other. The margins of the first, strong curve are
 * drawn: the phase margin up from -180 degrees at the gain crossover, the gain margin down from 0 dB at the phase crossover.
 */
export function bodePanels(
  curves: readonly LoopCurves[],
  [above, below]: readonly [Box, Box],
  canvas: Canvas,
): Html {
  const { id } = canvas;
  const [from, to] = frequencyRange(curves);
  const x = scaleOf([decadesOf(from), decadesOf(to)], above.left, above.left + above.width);
  const decibels = scaleOf(magnitudeRange(curves), above.top + above.height, above.top);
  const degrees = scaleOf(phaseRange(curves, from, to), below.top + below.height, below.top);
  const lines = (values: (one: LoopCurves) => readonly number[], y: Scale): Html =>
    html`${curves.toReversed().map((one) => {
      const points = values(one).map((value, i): Point => [x(decadesOf(one.frequency[i]!)), y(value)]);
      return stroked(linePath(points), strokeOf(one.look, canvas));
    })}`;
  return html`<defs>${clip(`${id}-m`, above)}${clip(`${id}-p`, below)}</defs>${panelName(above, 'open loop: magnitude / dB', canvas)}${leftAxis(canvas, above, decibels, '', 5)}${logarithmicAxis(canvas, above, x, null)}${clipped(
    `${id}-m`,
    lines((one) => one.magnitudeDb, decibels),
  )}${panelName(below, 'open loop: phase / °', canvas)}${phaseAxis(below, degrees, canvas)}${logarithmicAxis(
    canvas,
    below,
    x,
    'frequency / (rad/s)',
  )}${clipped(
    `${id}-p`,
    lines((one) => one.phaseDeg, degrees),
  )}${segment(below.left, degrees(-180), below.left + below.width, degrees(-180), { stroke: canvas.paint.muted })}${curves[0] !== undefined && marginMarks(curves[0], { x, decibels, degrees, above, below }, canvas)}`;
}

interface Plot {
  readonly x: Scale;
  readonly decibels: Scale;
  readonly degrees: Scale;
  readonly above: Box;
  readonly below: Box;
}

function marginMarks({ crossings }: LoopCurves, plot: Plot, canvas: Canvas): Html {
  const { paint } = canvas;
  const look = { stroke: paint.ink, width: 2 };
  const thin = { stroke: paint.ink, dash: '2 3' };
  const { x, decibels, degrees, above, below } = plot;
  const words = (at: number, y: number, text: string, box: Box): Html => {
    const left = at + 7 + textWidth(text, 11) > box.left + box.width;
    return label(left ? at - 7 : at + 7, y, text, {
      anchor: left ? 'end' : 'start',
      size: 11,
      bold: true,
      fill: paint.ink,
    });
  };
  const marks: Html[] = [];
  const { gain, phase } = crossings;
  if (gain !== null) {
    const at = x(decadesOf(gain.at));
    const tip = degrees(-180 + gain.phaseMarginDeg);
    marks.push(
      segment(at, decibels(0), at, above.top + above.height, thin),
      segment(at, below.top, at, tip, thin),
      segment(at, degrees(-180), at, tip, look),
      words(at, (degrees(-180) + tip) / 2 + 4, `${fixed(gain.phaseMarginDeg)}°`, below),
    );
  }
  if (phase !== null) {
    const at = x(decadesOf(phase.at));
    const tip = Math.min(decibels(-phase.gainMarginDb), above.top + above.height);
    marks.push(
      segment(at, decibels(0), at, tip, look),
      segment(at, tip, at, above.top + above.height, thin),
      segment(at, below.top, at, degrees(-180), thin),
      words(at, (decibels(0) + tip) / 2 + 4, withUnit(fixed(phase.gainMarginDb, 1), 'dB'), above),
    );
  }
  return html`<g>${marks}</g>`;
}

/** A decade below the lowest gain crossover to past the highest phase crossover, within what was scanned. */
function frequencyRange(curves: readonly LoopCurves[]): readonly [number, number] {
  const firsts = curves.map(({ frequency }) => frequency[0] ?? 1);
  const lasts = curves.map(({ frequency }) => frequency.at(-1) ?? 1);
  const gains = curves.flatMap(({ frequency, magnitudeDb }) => {
    const i = magnitudeDb.findIndex((value, k) => k > 0 && value < 0 && magnitudeDb[k - 1]! >= 0);
    return i < 0 ? [] : [frequency[i]!];
  });
  const phases = curves.flatMap(({ crossings }) => (crossings.phase === null ? [] : [crossings.phase.at]));
  const low = gains.reduce((a, b) => Math.min(a, b / 10), Number.POSITIVE_INFINITY);
  const high = [...gains.map((at) => at * 10), ...phases.map((at) => at * 3)].reduce(
    (a, b) => Math.max(a, b),
    0,
  );
  const least = firsts.reduce((a, b) => Math.max(a, b));
  const greatest = lasts.reduce((a, b) => Math.min(a, b));
  return [
    Number.isFinite(low) ? Math.max(least, low) : least,
    high > 0 ? Math.min(greatest, high) : greatest,
  ];
}

/** Down to below the gain margins, in steps of 20 dB. */
function magnitudeRange(curves: readonly LoopCurves[]): readonly [number, number] {
  const most = curves.reduce((sum, { crossings }) => Math.max(sum, crossings.phase?.gainMarginDb ?? 0), 0);
  const low = Math.min(DECIBELS.low, -20 * Math.ceil((most + 5) / 20));
  return [Math.max(DECIBELS.lowest, low), DECIBELS.high];
}

/** Lines at multiples of 45 degrees, or of 90 where there are many. */
function phaseAxis(box: Box, y: Scale, { paint }: Canvas): Html {
  const [low, high] = y.domain() as [number, number];
  const step = high - low > 270 ? 90 : 45;
  const ticks = Array.from({ length: Math.round((high - low) / step) + 1 }, (_, i) => low + i * step);
  return html`<g>${ticks.map(
    (tick) =>
      html`${segment(box.left, y(tick), box.left + box.width, y(tick), { stroke: paint.grid })}${label(box.left - 6, y(tick) + 4, fixed(tick), { anchor: 'end', size: 11, fill: paint.muted })}`,
  )}</g>`;
}

/** In steps of 90 degrees around what the curves do there. */
function phaseRange(curves: readonly LoopCurves[], from: number, to: number): readonly [number, number] {
  let [low, high] = [-180, -180];
  for (const { frequency, phaseDeg } of curves)
    phaseDeg.forEach((phase, i) => {
      if (frequency[i]! < from || frequency[i]! > to) return;
      low = Math.min(low, Math.max(phase, LOWEST_PHASE));
      high = Math.max(high, phase);
    });
  return [90 * Math.floor(low / 90), 90 * Math.ceil(high / 90)];
}
