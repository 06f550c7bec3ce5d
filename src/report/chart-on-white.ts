import { rectangle } from './charts/canvas.ts';
import type { Html } from './html.ts';

/** White around the drawing [user units]. */
const MARGIN = 12;

/**
 * A drawing as a complete SVG file. In the page it has no ground and no margin of its own; a file gets white behind
 * everything and around it.
 */
export function chartOnWhite(drawn: Html): string {
  const text = drawn.toString();
  const [head, width, height] = /viewBox="0 0 ([\d.]+) ([\d.]+)" width="[\d.]+" height="[\d.]+"/.exec(
    text,
  ) ?? ['', '0', '0'];
  const whole = {
    left: -MARGIN,
    top: -MARGIN,
    width: Number(width) + 2 * MARGIN,
    height: Number(height) + 2 * MARGIN,
  };
  const frame = `viewBox="${whole.left} ${whole.top} ${whole.width} ${whole.height}" width="${whole.width}" height="${whole.height}"`;
  const ground = rectangle(whole, '#ffffff');
  return `<?xml version="1.0" encoding="UTF-8"?>\n${text.replace(head, frame).replace('</desc>', () => `</desc>${ground}`)}\n`;
}
