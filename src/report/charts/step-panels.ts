import { type Html, html } from '../html.ts';
import type { LoopCurves } from '../model/loop-curves.ts';
import type { SpeedUnit } from '../quantity.ts';
import { bottomAxis, leftAxis, scaleOf } from './axes.ts';
import { type Box, type Canvas, clip, clipped, label, segment, stroked } from './canvas.ts';
import { panelName, strokeOf } from './loop-panel.ts';
import { linePath, type Point } from './paths.ts';

/** A response is drawn until it stays within this share of its greatest value. */
const REST = 0.02;
const ROOM = 1.15;

/** What a loop answers to a step of set speed and to one per cent of grade, one panel above the other over the same time. */
export function stepPanels(
  curves: readonly LoopCurves[],
  [above, below]: readonly [Box, Box],
  speed: SpeedUnit,
  canvas: Canvas,
): Html {
  const { id, paint } = canvas;
  const stable = curves.filter(({ steps }) => steps !== null);
  const end = stable.reduce((most, one) => Math.max(most, lastOf(one)), 1);
  const x = scaleOf([0, end], above.left, above.left + above.width);
  const perUnit = 1 / speed.of(1);
  const panel = (
    which: 'setSpeed' | 'load',
    scale: number,
    box: Box,
    name: string,
    axis: string | null,
    at: readonly [number, number],
  ): Html => {
    const y = scaleOf(domainOf(stable, which, scale, at), box.top + box.height, box.top);
    const marks = stable.toReversed().map((one) => {
      const { speed: values, spacing } = one.steps![which];
      const points = Array.from(values, (value, i): Point => [x(i * spacing), y(value * scale)]);
      return stroked(linePath(points), strokeOf(one.look, canvas));
    });
    const clipId = `${id}-${which}`;
    return html`<defs>${clip(clipId, box)}</defs>${panelName(box, name, canvas)}${leftAxis(canvas, box, y, '', 4)}${
      which === 'setSpeed' &&
      segment(box.left, y(1), box.left + box.width, y(1), { stroke: paint.ink, dash: '2 3' })
    }${clipped(clipId, html`${marks}`)}${bottomAxis(canvas, box, x, axis)}${
      stable.length < curves.length &&
      label(box.left + box.width / 2, box.top + 16, unstableWords(curves), {
        anchor: 'middle',
        bold: true,
        fill: paint.warn,
      })
    }`;
  };
  return html`${panel('setSpeed', 1, above, `speed after 1 ${speed.name} of set speed / ${speed.axis}`, null, [0, 1])}${panel(
    'load',
    1 / perUnit,
    below,
    `speed after 1 % more grade / ${speed.axis}`,
    'time / s',
    [0, 0],
  )}`;
}

const unstableWords = (curves: readonly LoopCurves[]): string =>
  curves.every(({ steps }) => steps === null) ? 'unstable: no answer to draw' : 'unstable at the worst point';

function domainOf(
  curves: readonly LoopCurves[],
  which: 'setSpeed' | 'load',
  scale: number,
  [least, most]: readonly [number, number],
): readonly [number, number] {
  let [low, high] = [least, most];
  for (const { steps } of curves)
    for (const value of steps?.[which].speed ?? []) {
      low = Math.min(low, value * scale);
      high = Math.max(high, value * scale);
    }
  return [low * ROOM, high * ROOM];
}

/** Time after which both responses of a curve stay near their ends [s]. */
function lastOf({ steps }: LoopCurves): number {
  if (steps === null) return 0;
  return Math.max(settled(steps.setSpeed), settled(steps.load));
}

function settled({ speed, spacing }: { readonly speed: Float64Array; readonly spacing: number }): number {
  const end = speed[speed.length - 1] ?? 0;
  const most = speed.reduce((a, b) => Math.max(a, Math.abs(b)), 0);
  let last = speed.length - 1;
  while (last > 0 && Math.abs(speed[last]! - end) <= REST * most) last--;
  return 1.1 * (last + 1) * spacing;
}
