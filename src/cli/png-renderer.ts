import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { InputError } from '../problems/input-error.ts';

/** Width of a picture where none is asked for, and the least and greatest that may be [pixels]. */
const USUAL_WIDTH = 1600;
const LEAST_WIDTH = 200;
const MOST_WIDTH = 8000;

const FAMILY = 'DejaVu Sans';
const FACES = ['DejaVuSans.ttf', 'DejaVuSans-Bold.ttf'];
const WASM = '@resvg/resvg-wasm/index_bg.wasm';

/** Draws a complete SVG file as PNG. */
export type PngRenderer = (svg: string) => Uint8Array;

/** What the options about PNG ask for: the width [pixels]; null: no pictures. */
export function pngWidthOf(values: {
  readonly png: boolean;
  readonly 'png-width': string | undefined;
}): number | null {
  const text = values['png-width'];
  if (text === undefined) return values.png ? USUAL_WIDTH : null;
  const width = /^\d{1,5}$/.test(text) ? Number(text) : 0;
  if (width >= LEAST_WIDTH && width <= MOST_WIDTH) return width;
  throw new InputError({
    code: 'option-value',
    place: {},
    message: `--png-width cannot be '${text}'`,
    allowed: `a whole number of pixels from ${LEAST_WIDTH} to ${MOST_WIDTH}`,
  });
}

/**
 * Loads what draws SVG, and the font that all text is set in: the same everywhere, whatever fonts the machine has. Both are
 * packages that are loaded for this alone.
 *
 * @param width of each picture [pixels]
 * @throws InputError `missing-package` where they are not installed beside the program
 */
export async function pngRenderer(width: number): Promise<PngRenderer> {
  const { Resvg, faces } = await loaded();
  return (svg) => {
    const drawing = new Resvg(svg, {
      fitTo: { mode: 'width', value: width },
      background: '#ffffff',
      font: { fontBuffers: faces, defaultFontFamily: FAMILY, sansSerifFamily: FAMILY },
    });
    try {
      const image = drawing.render();
      try {
        return image.asPng();
      } finally {
        image.free();
      }
    } finally {
      drawing.free();
    }
  };
}

async function loaded() {
  const { resolve } = createRequire(import.meta.url);
  try {
    const { initWasm, Resvg } = await import('@resvg/resvg-wasm');
    await initWasm(readFileSync(resolve(WASM)));
    const faces = FACES.map((face) => new Uint8Array(readFileSync(resolve(`dejavu-fonts-ttf/ttf/${face}`))));
    return { Resvg, faces };
  } catch (error) {
    throw new InputError({
      code: 'missing-package',
      place: {},
      message: `--png needs the packages @resvg/resvg-wasm and dejavu-fonts-ttf beside the program: ${error instanceof Error ? error.message.split(/ imported from|\n/)[0] : String(error)}`,
      allowed: 'an installation with its dependencies, as npm ci makes it',
    });
  }
}
