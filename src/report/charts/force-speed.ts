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

/** From one name to the next. */
const ROW = 14;

/** Wheel force over speed: what the drive has (shaded, strong edges) against what grades ask (thin, labelled), set speeds marked. */
export function forceSpeedChart(view: View, canvas: Canvas): Html {
  const { paint, narrow, id } = canvas;
  const { lines, topSpeed } = forceLines(view);
  const box: Box = {
    left: narrow ? 44 : 52,
    top: 30 + ROW,
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
  const setNames = sets.map((v) => {
    const text = speedText(v, view.speed, 0);
    return { at: x(view.speed.of(v)), text: narrow ? text : `set speed ${text}`, marked: true };
  });
  const above = namesAbove([...setNames, ...leaving(lines, canvas, box, points)], canvas, box);
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
  )}${clipped(`${id}-c`, marks)}${above}${names(lines, canvas, box, points)}${bottomAxis(canvas, box, x, `speed / ${view.speed.axis}`)}`;
  return drawing(canvas, box.top + box.height + BOTTOM_AXIS_HEIGHT, words, body);
}

function forceAt(line: ForceLine, speed: number): number {
  const i = line.speed.findIndex((v) => v >= speed);
  return line.force[i < 0 ? line.force.length - 1 : i]!;
}

interface NameAbove {
  readonly at: number;
  readonly text: string;
  /** A dotted line leads down through the plot. */
  readonly marked: boolean;
}

const nameOf = (line: ForceLine, { narrow }: Canvas): string => (narrow ? line.short : line.words);

/** Names of the lines that leave the plot through its upper edge, at the places where they do. */
function leaving(
  lines: readonly ForceLine[],
  canvas: Canvas,
  box: Box,
  points: (line: ForceLine) => Point[],
): readonly NameAbove[] {
  return lines.flatMap((line) => {
    const path = points(line);
    if (path[path.length - 1]![1] >= box.top) return [];
    const inside = path.filter(([, y]) => y >= box.top);
    const last = inside[inside.length - 1];
    return last === undefined ? [] : [{ at: last[0], text: nameOf(line, canvas), marked: false }];
  });
}

/** Names above the plot, clear of the axis' own name; one that would meet another stands a row higher. */
function namesAbove(items: readonly NameAbove[], { paint, narrow }: Canvas, box: Box): Html {
  const taken: { row: number; from: number; to: number }[] = [];
  const least = narrow ? 100 : 110;
  return html`${items.map(({ at, text, marked }) => {
    const half = textWidth(text, 11) / 2;
    const middle = Math.min(Math.max(at, least + half), box.left + box.width - half);
    const [from, to] = [middle - half - 3, middle + half + 3];
    const row = taken.some((one) => one.row === 0 && one.from < to && one.to > from) ? 1 : 0;
    taken.push({ row, from, to });
    const base = box.top - 5 - row * ROW;
    return html`${
      marked &&
      segment(at, base + 3, at, box.top + box.height, { stroke: paint.ink, width: 1.2, dash: '1 3' })
    }${label(middle, base, text, { anchor: 'middle', size: 11, fill: paint.ink })}`;
  })}`;
}

/** Names beside the right edge, moved apart; a line that leaves below is named at its last place inside. */
function names(
  lines: readonly ForceLine[],
  canvas: Canvas,
  box: Box,
  points: (line: ForceLine) => Point[],
): Html {
  const { paint } = canvas;
  const right = box.left + box.width;
  const bottom = box.top + box.height;
  const atEdge: { text: string; at: number; bold: boolean }[] = [];
  const below: Html[] = [];
  for (const line of lines) {
    const path = points(line);
    const end = path[path.length - 1]!;
    const text = nameOf(line, canvas);
    if (end[1] >= box.top && end[1] <= bottom)
      atEdge.push({ text, at: end[1], bold: line.kind !== 'required' });
    if (end[1] <= bottom) continue;
    const last = path.findLast(([, y]) => y <= bottom - 4);
    if (last === undefined) continue;
    const left = Math.min(last[0], right - textWidth(text, 11) - 4);
    below.push(
      html`${rectangle({ left: left - 2, top: bottom - 17, width: textWidth(text, 11) + 4, height: 14 }, paint.page, 0.85)}${label(left, bottom - 6, text, { size: 11, fill: paint.ink })}`,
    );
  }
  atEdge.sort((a, b) => a.at - b.at);
  let free = box.top + 6;
  const most = bottom - ROW * (atEdge.length - 1);
  return html`${below}${atEdge.map(({ text, at, bold }, i) => {
    const place = Math.max(free, Math.min(at, most + ROW * i));
    free = place + ROW;
    return label(right + 5, place + 4, text, { size: 11, bold, fill: paint.ink });
  })}`;
}
