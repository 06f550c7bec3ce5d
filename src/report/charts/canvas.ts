import { type Html, type HtmlValue, html } from '../html.ts';
import type { Paint } from '../paint.ts';

/** What a chart is drawn for: its id (prefix of every id inside it), its colours and its width in user units. */
export interface Canvas {
  readonly id: string;
  readonly paint: Paint;
  readonly width: number;
  /** For a narrow screen: fewer ticks, no labels beside the lines. */
  readonly narrow: boolean;
}

/** A plot's rectangle within the drawing. */
export interface Box {
  readonly left: number;
  readonly top: number;
  readonly width: number;
  readonly height: number;
}

export interface Words {
  readonly title: string;
  /** What the chart shows, with its main figures, for those who do not see it. */
  readonly desc: string;
}

/** A whole drawing. Stands alone as a file too: it names its namespace, size and font. */
export function drawing(canvas: Canvas, height: number, words: Words, body: HtmlValue): Html {
  const { id, width } = canvas;
  return html`<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${width} ${height}" width="${width}" height="${height}" role="img" aria-labelledby="${id}-t ${id}-d" font-family="system-ui, 'Segoe UI', 'Helvetica Neue', Arial, 'DejaVu Sans', sans-serif" font-size="12"><title id="${id}-t">${words.title}</title><desc id="${id}-d">${words.desc}</desc>${body}</svg>`;
}

export interface TextLook {
  readonly anchor?: 'start' | 'middle' | 'end';
  readonly size?: number;
  readonly bold?: boolean;
  readonly fill: string;
}

/** Coordinates keep a tenth of a user unit. */
export const tenth = (value: number): number => Math.round(value * 10) / 10 + 0;

export function label(x: number, y: number, text: string, look: TextLook): Html {
  const { anchor = 'start', size = 12, bold = false, fill } = look;
  return html`<text x="${tenth(x)}" y="${tenth(y)}"${anchor !== 'start' && html` text-anchor="${anchor}"`}${size !== 12 && html` font-size="${size}"`}${bold && html` font-weight="600"`} fill="${fill}">${text}</text>`;
}

export interface LineLook {
  readonly stroke: string;
  readonly width?: number;
  readonly dash?: string;
  readonly opacity?: number;
}

const strokeOf = ({ stroke, width = 1, dash = '', opacity = 1 }: LineLook): Html =>
  html` stroke="${stroke}"${width !== 1 && html` stroke-width="${width}"`}${dash !== '' && html` stroke-dasharray="${dash}"`}${opacity !== 1 && html` stroke-opacity="${opacity}"`}`;

export const segment = (x1: number, y1: number, x2: number, y2: number, look: LineLook): Html =>
  html`<path d="M${tenth(x1)},${tenth(y1)}L${tenth(x2)},${tenth(y2)}" fill="none"${strokeOf(look)}/>`;

/** An open path; nothing for an empty one. */
export const stroked = (d: string, look: LineLook): Html | null =>
  d === '' ? null : html`<path d="${d}" fill="none" stroke-linejoin="round"${strokeOf(look)}/>`;

export const filled = (d: string, fill: string, opacity = 1): Html | null =>
  d === '' ? null : html`<path d="${d}" fill="${fill}"${opacity !== 1 && html` fill-opacity="${opacity}"`}/>`;

export function rectangle(box: Box, fill: string, opacity = 1): Html {
  const { left, top, width, height } = box;
  return html`<rect x="${tenth(left)}" y="${tenth(top)}" width="${tenth(Math.max(0, width))}" height="${tenth(Math.max(0, height))}" fill="${fill}"${opacity !== 1 && html` fill-opacity="${opacity}"`}/>`;
}

/** Clip to the plot: lines that leave a scale end at its edge. */
export function clip(id: string, box: Box): Html {
  return html`<clipPath id="${id}">${rectangle(box, 'black')}</clipPath>`;
}
export const clipped = (id: string, body: HtmlValue): Html => html`<g clip-path="url(#${id})">${body}</g>`;

/** Diagonal hatch: `rising` like a slash, `falling` like a backslash. */
export function hatch(id: string, direction: 'rising' | 'falling', stroke: string, gap = 6): Html {
  const turn = direction === 'rising' ? 45 : -45;
  return html`<pattern id="${id}" width="${gap}" height="${gap}" patternUnits="userSpaceOnUse" patternTransform="rotate(${turn})"><path d="M${gap / 2},0V${gap}" stroke="${stroke}" stroke-width="2"/></pattern>`;
}

/** Width of a text, near enough for labels that must not meet: an average of sans-serif faces. */
export const textWidth = (text: string, size = 12): number => text.length * size * 0.56;
