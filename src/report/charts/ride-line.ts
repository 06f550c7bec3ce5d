import { type Html, html } from '../html.ts';
import type { RideView } from '../model/view.ts';
import type { Paint } from '../paint.ts';
import { type Box, type Canvas, segment, stroked, tenth } from './canvas.ts';
import { linePath, type Point } from './paths.ts';

/** Fine dashes, finer than those of any candidate. */
const DASH = '4 1.4';
/** From one mark on a line to the next, and half its size [user units]. */
const APART = 44;
const SIZE = 3;

/** A logged ride's line in a plot: fine dashes, and rings, squares or other marks on it, tell it from the candidates without colour. */
export function rideLine(points: readonly Point[], ride: RideView, box: Box, { paint }: Canvas): Html {
  const marks: Point[] = [];
  for (const point of points) {
    const last = marks.at(-1);
    const [x, y] = point;
    const seen = x >= box.left && x <= box.left + box.width && y >= box.top && y <= box.top + box.height;
    if (seen && (last === undefined || x - last[0] >= APART)) marks.push(point);
  }
  return html`<g>${stroked(linePath(points), { stroke: paint.ride, width: 1.4, dash: DASH })}${marks.map(([x, y]) => mark(x, y, ride, paint))}</g>`;
}

/** The ring, square, diamond or triangle of a ride, filled with the ground. */
function mark(x: number, y: number, ride: RideView, paint: Paint): Html {
  return html`<path d="${outline(tenth(x), tenth(y), ride.mark)}" fill="${paint.page}" stroke="${paint.ride}" stroke-width="1.4"/>`;
}

function outline(x: number, y: number, shape: RideView['mark']): string {
  const s = SIZE;
  switch (shape) {
    case 'ring':
      return `M${x - s},${y}a${s},${s} 0 1 0 ${2 * s},0a${s},${s} 0 1 0 ${-2 * s},0Z`;
    case 'square':
      return `M${x - s},${y - s}h${2 * s}v${2 * s}h${-2 * s}Z`;
    case 'diamond':
      return `M${x},${y - s - 1}l${s + 1},${s + 1}l${-s - 1},${s + 1}l${-s - 1},${-s - 1}Z`;
    case 'triangle':
      return `M${x},${y - s - 1}l${s + 1},${2 * s}h${-2 * s - 2}Z`;
  }
}

/** A short piece of a ride's line, from a place to the right. */
export const rideSign = (left: number, middle: number, width: number, ride: RideView, paint: Paint): Html =>
  html`${segment(left, middle, left + width, middle, { stroke: paint.ride, width: 1.8, dash: DASH })}${mark(left + width / 2, middle, ride, paint)}`;

/** The same to put before its name. */
export const rideKey = (ride: RideView, paint: Paint): Html =>
  html`<svg class="key" viewBox="0 0 28 10" width="28" height="10" aria-hidden="true">${rideSign(1, 5, 26, ride, paint)}</svg>`;
