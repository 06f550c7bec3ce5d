import { chartOnWhite } from './chart-on-white.ts';
import type { Canvas } from './charts/canvas.ts';
import type { Html } from './html.ts';
import { FILE_PAINT } from './paint.ts';

/** A chart as a file of its own: complete SVG with concrete colours on white, for slides and documents. */
export interface ChartFile {
  /** File name, with its ending. */
  readonly name: string;
  readonly svg: string;
}

const WIDTH = 980;

/** Draws a chart for a file of this name, as wide as it is in a page where no width is given. */
export function chartFile(
  name: string,
  draw: (canvas: Canvas) => Html,
  { width = WIDTH, narrow = false }: { readonly width?: number; readonly narrow?: boolean } = {},
): ChartFile {
  const drawn = draw({ id: name, paint: FILE_PAINT, width, narrow });
  return { name: `${name}.svg`, svg: chartOnWhite(drawn) };
}
