import { type Html, html } from '../html.ts';
import type { LoopCurves } from '../model/loop-curves.ts';
import type { SpeedUnit } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT } from './axes.ts';
import { bodePanels } from './bode-panels.ts';
import { type Box, type Canvas, drawing, segment } from './canvas.ts';
import { keyRows } from './key-row.ts';
import { strokeOf } from './loop-panel.ts';
import { stepPanels } from './step-panels.ts';

const HEIGHT = 150;
const GAP = 36;
const TOP = 30;

/**
 * One loop at one or two operating points: its open loop by magnitude and phase with the margins marked, and what a step
 * of set speed and a step of grade do. Side by side, or on a narrow screen one above the other.
 */
export function loopChart(
  words: { readonly title: string; readonly desc: string },
  curves: readonly LoopCurves[],
  speed: SpeedUnit,
  canvas: Canvas,
): Html {
  const { narrow, paint } = canvas;
  const left = narrow ? 40 : 48;
  const half = narrow ? canvas.width : Math.round(canvas.width * 0.56);
  const panel = (column: number, row: number, from: number): Box => ({
    left: column + left,
    top: from + row * (HEIGHT + GAP),
    width: (column === 0 ? half : canvas.width - half) - left - 14,
    height: HEIGHT,
  });
  const both = 2 * HEIGHT + GAP + BOTTOM_AXIS_HEIGHT;
  const stepsFrom = narrow ? TOP + both + GAP : TOP;
  const column = narrow ? 0 : half;
  const bode = bodePanels(curves, [panel(0, 0, TOP), panel(0, 1, TOP)], canvas);
  const steps = stepPanels(curves, [panel(column, 0, stepsFrom), panel(column, 1, stepsFrom)], speed, canvas);
  const bottom = stepsFrom + both;
  const key = keyRows(
    curves.map(({ look, name }) => ({
      text: name,
      sign: (x: number, y: number) => segment(x, y, x + 22, y, strokeOf(look, canvas)),
    })),
    narrow ? 4 : left,
    bottom + 18,
    canvas.width - left,
    paint.ink,
  );
  return drawing(canvas, bottom + 12 + key.height, words, html`${bode}${steps}${key.body}`);
}
