import { LIMIT_OFF, LIMIT_OVERRIDE } from '../../loop/plan.ts';
import type { HoldTransient } from '../../study/hold-transient.ts';
import { toPct } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import type { HoldMoment } from '../model/hold-moments.ts';
import { EVENT_NAMES } from '../model/hold-words.ts';
import type { CandidateView, View } from '../model/view.ts';
import { placeText } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, leftAxis, type Scale, scaleOf } from './axes.ts';
import {
  type Box,
  type Canvas,
  clip,
  clipped,
  drawing,
  hatch,
  label,
  rectangle,
  segment,
  stroked,
} from './canvas.ts';
import { spans } from './limit-spans.ts';
import { linePath, type Point } from './paths.ts';
import { trace } from './trace.ts';

/** A candidate with what followed the event in its run. */
interface Shown {
  readonly candidate: CandidateView;
  readonly transient: HoldTransient;
}

/**
 * A small picture of what followed an event of the hold, over time from it: speed against set speed and reference above;
 * the command below. All candidates that had the event there, on the same axes.
 */
export function holdPicture(view: View, moment: HoldMoment, canvas: Canvas): Html {
  const { id, paint } = canvas;
  const shown = shownAt(view, moment);
  const guide = shown.find(({ candidate }) => !candidate.locked) ?? shown[0];
  const width = canvas.width - 50;
  const upper: Box = { left: 40, top: 34, width, height: 112 };
  const lower: Box = { left: 40, top: 180, width, height: 76 };
  const x = scaleOf(timeDomain(shown), upper.left, upper.left + width);
  const speeds = scaleOf(speedDomain(view, shown), upper.top + upper.height, upper.top);
  const { throttleMin, throttleMax } = view.result.vehicle.drive;
  const room = 0.12 * (throttleMax - throttleMin);
  const throttles = scaleOf(
    [toPct(throttleMin - room), toPct(throttleMax + room)],
    lower.top + lower.height,
    lower.top,
  );
  const along = (
    { picture, event }: HoldTransient,
    scale: Scale,
    values: ArrayLike<number>,
    of: (value: number) => number,
  ): Point[] =>
    Array.from({ length: picture.size }, (_, i) => [x(picture.time[i]! - event.time), scale(of(values[i]!))]);
  const aims = guide !== undefined && aimLines(guide.transient, along, speeds, view, canvas);
  const body = html`<defs>${clip(`${id}-u`, upper)}${clip(`${id}-l`, lower)}${hatch(`${id}-off`, 'rising', paint.muted, 7)}</defs>${
    guide !== undefined && spansOf(guide.transient, x, [upper, lower], canvas)
  }${leftAxis(canvas, upper, speeds, '', 4)}${label(0, 13, `speed / ${view.speed.axis}`, { bold: true, fill: paint.ink })}${clipped(
    `${id}-u`,
    html`${aims}${shown.map(({ candidate, transient }) =>
      trace(along(transient, speeds, transient.picture.speed, view.speed.of), candidate, upper, canvas),
    )}`,
  )}${leftAxis(canvas, lower, throttles, 'command / %', 3)}${clipped(
    `${id}-l`,
    html`${[throttleMin, throttleMax].map((limit) =>
      segment(lower.left, throttles(toPct(limit)), lower.left + width, throttles(toPct(limit)), {
        stroke: paint.warn,
        dash: '4 2',
      }),
    )}${shown.map(({ candidate, transient }) =>
      trace(along(transient, throttles, transient.picture.command, toPct), candidate, lower, canvas),
    )}`,
  )}${momentLine(moment, x, [upper, lower], canvas)}${bottomAxis({ ...canvas, narrow: true }, upper, x, null)}${bottomAxis({ ...canvas, narrow: true }, lower, x, 'time from the event / s')}`;
  const words = {
    title: `${EVENT_NAMES[moment.kind]} at ${placeText(moment.distance)}: speed and command over time`,
    desc: shown.map(({ transient }) => transient.words).join(' '),
  };
  return drawing(canvas, lower.top + lower.height + BOTTOM_AXIS_HEIGHT, words, body);
}

const shownAt = (view: View, { shown }: HoldMoment): readonly Shown[] =>
  view.candidates.flatMap((candidate) => {
    const transient = shown.find((one) => one.candidate === candidate.name);
    return transient !== undefined && transient.picture.size > 1 ? [{ candidate, transient }] : [];
  });

/** The set speed, dotted, and what the controller aims at while hold is on, in short dashes: those of the guide. */
function aimLines(
  transient: HoldTransient,
  along: (of: HoldTransient, scale: Scale, values: ArrayLike<number>, unit: (v: number) => number) => Point[],
  speeds: Scale,
  { speed }: View,
  { paint }: Canvas,
): Html {
  const { picture } = transient;
  const reference = picture.reference.map((value, i) =>
    (picture.limit[i]! & LIMIT_OFF) === 0 ? value : Number.NaN,
  );
  return html`${stroked(linePath(along(transient, speeds, picture.setSpeed, speed.of)), { stroke: paint.ink, dash: '1 2' })}${stroked(
    linePath(along(transient, speeds, reference, speed.of)),
    { stroke: paint.muted, width: 1, dash: '4 3' },
  )}`;
}

/** From the first sample to the last of a design; a locked throttle alone where there is none. */
function timeDomain(shown: readonly Shown[]): readonly [number, number] {
  const designs = shown.filter(({ candidate }) => !candidate.locked);
  let [start, end] = [0, 1];
  for (const { transient } of designs.length > 0 ? designs : shown) {
    const { picture, event } = transient;
    start = Math.min(start, picture.time[0]! - event.time);
    end = Math.max(end, picture.time[picture.size - 1]! - event.time);
  }
  return [start, end];
}

/** Designs decide the scale. */
function speedDomain({ speed, result }: View, shown: readonly Shown[]): readonly [number, number] {
  const designs = shown.filter(({ candidate }) => !candidate.locked);
  let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (const { transient } of designs.length > 0 ? designs : shown) {
    const { picture } = transient;
    for (let i = 0; i < picture.size; i++)
      for (const value of [speed.of(picture.speed[i]!), speed.of(picture.setSpeed[i]!)]) {
        if (!Number.isFinite(value)) continue;
        low = Math.min(low, value);
        high = Math.max(high, value);
      }
  }
  if (low > high) return [0, 1];
  const room = Math.max(speed.of(result.band), (high - low) * 0.12);
  return [low - room, high + room];
}

/** Behind the lines: hatched where hold of the guide was off, plain where its grip had the throttle. */
function spansOf(
  { picture, event }: HoldTransient,
  x: Scale,
  boxes: readonly Box[],
  { paint, id }: Canvas,
): Html {
  const columns = (bit: number, fill: string, opacity: number, words: string) =>
    spans(picture, bit).map(([begin, end]) => {
      const [left, right] = [x(begin - event.time), x(end - event.time)];
      return html`<g><title>${words}</title>${boxes.map((box) =>
        rectangle({ ...box, left, width: Math.max(1, right - left) }, fill, opacity),
      )}</g>`;
    });
  return html`${columns(LIMIT_OFF, `url(#${id}-off)`, 0.35, 'hold is off')}${columns(LIMIT_OVERRIDE, paint.grid, 0.7, 'the grip has the throttle')}`;
}

/** The moment itself, through both plots, with its word. */
function momentLine(
  { kind }: HoldMoment,
  x: Scale,
  [upper, lower]: readonly [Box, Box],
  { paint }: Canvas,
): Html {
  const at = x(0);
  return html`${segment(at, upper.top - 4, at, upper.top + upper.height, { stroke: paint.ink })}${segment(at, lower.top, at, lower.top + lower.height, { stroke: paint.ink })}${label(at, upper.top - 8, EVENT_NAMES[kind], { anchor: at < 80 ? 'start' : 'middle', size: 11, fill: paint.ink })}`;
}
