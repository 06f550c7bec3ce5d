import { type Html, html } from '../html.ts';
import type { ForceLine } from '../model/force-lines.ts';
import { type Box, type Canvas, label, rectangle, segment, textWidth } from './canvas.ts';
import type { Point } from './paths.ts';

/** From one name to the next. */
export const ROW = 14;
const SIZE = 11;

/** A line as it is drawn. */
export interface DrawnLine {
  readonly line: ForceLine;
  readonly points: readonly Point[];
}

export interface NameAbove {
  readonly at: number;
  readonly text: string;
  /** A dotted line leads down through the plot. */
  readonly marked: boolean;
}

interface Taken {
  readonly left: number;
  readonly right: number;
  readonly base: number;
}

const nameOf = (line: ForceLine, { narrow }: Canvas): string => (narrow ? line.short : line.words);

/** Of the lines of what a vehicle has, the thin ones of gears that are not engaged carry their name once, at full throttle. */
const isNamed = ({ kind, engaged, gear }: ForceLine): boolean => gear === null || engaged || kind === 'full';

/** Names of the lines that leave the plot through its upper edge, at the places where they do. */
export function namesLeaving(lines: readonly DrawnLine[], canvas: Canvas, box: Box): readonly NameAbove[] {
  return lines.flatMap(({ line, points }) => {
    if (!isNamed(line) || points[points.length - 1]![1] >= box.top) return [];
    const last = points.findLast(([, y]) => y >= box.top);
    return last === undefined ? [] : [{ at: last[0], text: nameOf(line, canvas), marked: false }];
  });
}

/** Names above the plot, clear of the axis' own name; one that would meet another stands a row higher. */
export function namesAbove(items: readonly NameAbove[], { paint, narrow }: Canvas, box: Box): Html {
  const taken: { row: number; from: number; to: number }[] = [];
  const least = narrow ? 100 : 110;
  return html`${items.map(({ at, text, marked }) => {
    const half = textWidth(text, SIZE) / 2;
    const middle = Math.min(Math.max(at, least + half), box.left + box.width - half);
    const [from, to] = [middle - half - 3, middle + half + 3];
    const row = taken.some((one) => one.row === 0 && one.from < to && one.to > from) ? 1 : 0;
    taken.push({ row, from, to });
    const base = box.top - 5 - row * ROW;
    return html`${
      marked &&
      segment(at, base + 3, at, box.top + box.height, { stroke: paint.ink, width: 1.2, dash: '1 3' })
    }${label(middle, base, text, { anchor: 'middle', size: SIZE, fill: paint.ink })}`;
  })}`;
}

/**
 * Names at the ends of the lines: beside the right edge, moved apart; inside the plot for a line that ends there (a
 * rev limit); at its last place inside for one that leaves below.
 */
export function namesAtEnds(lines: readonly DrawnLine[], canvas: Canvas, box: Box): Html {
  const { paint } = canvas;
  const right = box.left + box.width;
  const bottom = box.top + box.height;
  const atEdge: { text: string; at: number; bold: boolean }[] = [];
  const inside: Html[] = [];
  const taken: Taken[] = [];
  const plate = (left: number, wanted: number, text: string, bold: boolean): void => {
    const width = textWidth(text, SIZE);
    const meets = (base: number) =>
      taken.some(
        (one) => one.left < left + width + 4 && one.right > left - 4 && Math.abs(one.base - base) < ROW,
      );
    let base = wanted;
    while (meets(base) && base > box.top + 2 * ROW) base -= ROW;
    taken.push({ left, right: left + width, base });
    inside.push(
      html`${rectangle({ left: left - 2, top: base - 11, width: width + 4, height: 14 }, paint.page, 0.85)}${label(left, base, text, { size: SIZE, bold, fill: paint.ink })}`,
    );
  };
  for (const { line, points } of lines) {
    if (!isNamed(line)) continue;
    const [x, y] = points[points.length - 1]!;
    const text = nameOf(line, canvas);
    const bold = line.engaged || line.kind === 'grip';
    const width = textWidth(text, SIZE);
    if (y > bottom) {
      const last = points.findLast(([, at]) => at <= bottom - 4);
      if (last !== undefined) plate(Math.min(last[0], right - width - 4), bottom - 6, text, false);
    } else if (y >= box.top) {
      if (x >= right - 1) atEdge.push({ text, at: y, bold });
      else {
        const beside = x + 4 + width <= right - 2;
        plate(beside ? x + 3 : x - width - 3, Math.max(box.top + 12, y - 5), text, bold);
      }
    }
  }
  atEdge.sort((a, b) => a.at - b.at);
  let free = box.top + 6;
  const most = bottom - ROW * (atEdge.length - 1);
  return html`${inside}${atEdge.map(({ text, at, bold }, i) => {
    const place = Math.max(free, Math.min(at, most + ROW * i));
    free = place + ROW;
    return label(right + 5, place + 4, text, { size: SIZE, bold, fill: paint.ink });
  })}`;
}
