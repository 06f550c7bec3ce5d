import { type Html, html } from '../html.ts';
import { type ForceLine, forceLines } from '../model/force-lines.ts';
import type { View } from '../model/view.ts';
import { fixed, speedText } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, leftAxis, scaleOf } from './axes.ts';
import {
  type Box,
  type Canvas,
  clip,
  clipped,
  drawing,
  filled,
  label,
  rectangle,
  segment,
  stroked,
  textWidth,
} from './canvas.ts';
import { envelopePath, linePath, type Point } from './paths.ts';

/** Wheel force over speed: what the drive has (shaded, strong edges) against what grades ask (thin, labelled), set speeds marked. */
export function forceSpeedChart(view: View, canvas: Canvas): Html {
  const { paint, narrow, id } = canvas;
  const { lines, topSpeed } = forceLines(view);
  const box: Box = {
    left: narrow ? 44 : 52,
    top: 28,
    width: canvas.width - (narrow ? 96 : 200),
    height: narrow ? 260 : 340,
  };
  const own = lines.filter((line) => line.kind !== 'required').flatMap((line) => line.force);
  const asked = lines.filter((line) => line.kind === 'required').flatMap((line) => line.force);
  const most = Math.max(...own) * 1.15;
  const domain: [number, number] = [
    Math.max(Math.min(...own, ...asked), -0.6 * most) * 1.1,
    Math.max(most, Math.min(Math.max(...asked), 1.3 * most)),
  ];
  const x = scaleOf([0, view.speed.of(topSpeed)], box.left, box.left + box.width);
  const y = scaleOf(domain, box.top + box.height, box.top);
  const points = (line: ForceLine): Point[] =>
    line.speed.map((v, i) => [x(view.speed.of(v)), y(line.force[i]!)]);
  const full = lines[0]!;
  const least = lines.find((line) => line.kind === 'least')!;
  const marks = lines.map((line) => {
    const thin = line !== full && line.kind === 'full';
    return stroked(linePath(points(line)), {
      stroke:
        line.kind === 'required' ? paint.muted : line.kind === 'least' ? paint.series[2]! : paint.series[1]!,
      width: line.kind === 'required' ? 1 : 2.4,
      dash: thin ? '7 3' : line.kind === 'least' ? '9 3 2 3' : '',
    });
  });
  const sets = [...new Set([view.result.hold.setSpeed, ...view.result.hold.changes.map((c) => c.setSpeed)])];
  const slowest = Math.min(...sets);
  const setMarks = sets.map((v, i) => {
    const at = x(view.speed.of(v));
    const before = sets.length > 1 && v === slowest;
    const words = narrow ? speedText(v, view.speed, 0) : `set speed ${speedText(v, view.speed, 0)}`;
    return html`${segment(at, box.top, at, box.top + box.height, { stroke: paint.ink, width: 1.2, dash: '1 3' })}${label(before ? at - 4 : at + 4, box.top + 12 + (before ? 0 : 14 * i), words, { anchor: before ? 'end' : 'start', size: 11, fill: paint.ink })}`;
  });
  const words = {
    title: 'Wheel force against speed: what the drive has and what grades ask',
    desc: `At ${speedText(view.result.hold.setSpeed, view.speed, 0)}: ${lines
      .map((line) => `${line.words} ${fixed(forceAt(line, view.result.hold.setSpeed))} N`)
      .join(', ')}.`,
  };
  const body = html`<defs>${clip(`${id}-c`, box)}</defs>${clipped(`${id}-c`, filled(envelopePath(points(least), points(full)), paint.band))}${leftAxis(
    canvas,
    box,
    y,
    'wheel force / N',
  )}${clipped(`${id}-c`, marks)}${setMarks}${names(lines, canvas, box, points)}${bottomAxis(canvas, box, x, `speed / ${view.speed.axis}`)}`;
  return drawing(canvas, box.top + box.height + BOTTOM_AXIS_HEIGHT, words, body);
}

function forceAt(line: ForceLine, speed: number): number {
  const i = line.speed.findIndex((v) => v >= speed);
  return line.force[i < 0 ? line.force.length - 1 : i]!;
}

/** Names where the lines leave the plot: at the right edge moved apart, or along the top for what leaves there. */
function names(
  lines: readonly ForceLine[],
  { paint, narrow }: Canvas,
  box: Box,
  points: (line: ForceLine) => Point[],
): Html {
  const right = box.left + box.width;
  const bottom = box.top + box.height;
  const atEdge: { text: string; at: number; bold: boolean }[] = [];
  const atTop: Html[] = [];
  for (const line of lines) {
    const path = points(line);
    const end = path[path.length - 1]!;
    const bold = line.kind !== 'required';
    const text = narrow ? line.short : line.words;
    if (end[1] >= box.top && end[1] <= bottom) {
      atEdge.push({ text, at: end[1], bold });
      continue;
    }
    const inside = path.filter(([, py]) => py >= box.top + 4 && py <= bottom - 4);
    const last = inside[inside.length - 1];
    if (last === undefined) continue;
    const above = end[1] < box.top;
    const left = Math.min(last[0], right - textWidth(text, 11) - 4);
    atTop.push(
      html`${rectangle({ left: left - 2, top: above ? box.top + 2 : bottom - 17, width: textWidth(text, 11) + 4, height: 14 }, paint.page, 0.85)}${label(left, above ? box.top + 13 : bottom - 6, text, { size: 11, fill: paint.ink })}`,
    );
  }
  atEdge.sort((a, b) => a.at - b.at);
  let free = box.top + 6;
  const most = bottom - 14 * (atEdge.length - 1);
  return html`${atTop}${atEdge.map(({ text, at, bold }, i) => {
    const place = Math.max(free, Math.min(at, most + 14 * i));
    free = place + 14;
    return label(right + 5, place + 4, text, { size: 11, bold, fill: paint.ink });
  })}`;
}
