import { readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { inflateSync } from 'node:zlib';
import { beforeAll, expect, test } from 'vitest';
import { CASE, ridgehold, temporaryFolder, VEHICLE, writeFiles } from './start-program.ts';

/** A picture by its pixels, read as the PNG standard has it (ISO/IEC 15948): 8 bits a channel, with or without alpha, not interlaced. */
interface Picture {
  readonly width: number;
  readonly height: number;
  /** Darkness of a pixel: 0 for white, 255 for black. */
  readonly ink: (x: number, y: number) => number;
}

function decode(file: string): Picture {
  const bytes = readFileSync(file);
  expect([...bytes.subarray(0, 8)]).toEqual([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]);
  const chunks: Record<string, Buffer[]> = {};
  for (let at = 8; at < bytes.length; ) {
    const length = bytes.readUInt32BE(at);
    const type = bytes.toString('latin1', at + 4, at + 8);
    chunks[type] = [...(chunks[type] ?? []), bytes.subarray(at + 8, at + 8 + length)];
    at += 12 + length;
  }
  const head = chunks.IHDR![0]!;
  const [width, height] = [head.readUInt32BE(0), head.readUInt32BE(4)];
  const [depth, colour, , , interlace] = head.subarray(8);
  expect([depth, interlace]).toEqual([8, 0]);
  expect([2, 6]).toContain(colour);
  const channels = colour === 6 ? 4 : 3;
  const data = inflateSync(Buffer.concat(chunks.IDAT!));
  const stride = width * channels;
  const pixels = new Uint8Array(stride * height);
  for (let y = 0; y < height; y++) {
    const filter = data[y * (stride + 1)]!;
    for (let i = 0; i < stride; i++) {
      const a = i >= channels ? pixels[y * stride + i - channels]! : 0;
      const b = y > 0 ? pixels[(y - 1) * stride + i]! : 0;
      const c = i >= channels && y > 0 ? pixels[(y - 1) * stride + i - channels]! : 0;
      const [pa, pb, pc] = [Math.abs(b - c), Math.abs(a - c), Math.abs(a + b - 2 * c)];
      const paeth = pa <= pb && pa <= pc ? a : pb <= pc ? b : c;
      const before = [0, a, b, (a + b) >> 1, paeth][filter]!;
      pixels[y * stride + i] = data[y * (stride + 1) + 1 + i]! + before;
    }
  }
  const ink = (x: number, y: number): number => {
    const at = (y * width + x) * channels;
    if (channels === 4) expect(pixels[at + 3]).toBe(255);
    return 255 - Math.min(pixels[at]!, pixels[at + 1]!, pixels[at + 2]!);
  };
  return { width, height, ink };
}

const here = temporaryFolder();
const charts = (folder: string): string[] => readdirSync(join(here, folder, 'charts')).sort();
beforeAll(() => {
  writeFiles(here, { 'hill.yaml': CASE, 'vehicle.yaml': VEHICLE });
  expect(ridgehold(here, ['run', 'hill.yaml', '-o', 'pictures', '--png', '--quiet']).status).toBe(0);
});

test('every chart has a picture beside it, which the summary lists', () => {
  const names = charts('pictures');
  const drawn = names.filter((name) => name.endsWith('.svg'));
  expect(drawn.length).toBeGreaterThan(5);
  expect(names.filter((name) => name.endsWith('.png'))).toEqual(
    drawn.map((name) => name.replace('.svg', '.png')),
  );
  const { files } = JSON.parse(readFileSync(join(here, 'pictures/summary.json'), 'utf8'));
  for (const name of names) expect(files).toContain(`charts/${name}`);
});

test('a picture is 1600 pixels wide, white at its edge, as high as its chart asks, with its words', () => {
  const picture = decode(join(here, 'pictures/charts/force-speed.png'));
  const svg = readFileSync(join(here, 'pictures/charts/force-speed.svg'), 'utf8');
  const [left, top, wide, high] = /viewBox="([-\d. ]+)"/.exec(svg)![1]!.split(' ').map(Number);
  const scale = 1600 / wide!;
  expect(picture.width).toBe(1600);
  expect(Math.abs(picture.height - high! * scale)).toBeLessThanOrEqual(1);
  for (const [x, y] of [
    [0, 0],
    [1599, 0],
    [0, picture.height - 1],
    [1599, picture.height - 1],
  ] as const)
    expect(picture.ink(x, y)).toBe(0);
  // Where a word begins, the square of its first letters is not blank: of those that begin at their place.
  const words = [...svg.matchAll(/<text x="([\d.-]+)" y="([\d.-]+)"(?![^>]*text-anchor)[^>]*>([^<]{3,})</g)];
  expect(words.length).toBeGreaterThan(2);
  for (const [, x, y, text] of words) {
    let [dark, most] = [0, 0];
    for (let dx = 0; dx < 14; dx++)
      for (let dy = -9; dy < 0; dy++) {
        const ink = picture.ink(
          Math.round((Number(x) - left! + dx) * scale),
          Math.round((Number(y) - top! + dy) * scale),
        );
        most = Math.max(most, ink);
        if (ink > 100) dark++;
      }
    expect(most, text).toBeGreaterThan(100);
    expect(dark, text).toBeGreaterThan(5);
  }
});

test('the same inputs give the same pictures', () => {
  expect(ridgehold(here, ['run', 'hill.yaml', '-o', 'again', '--png', '--quiet']).status).toBe(0);
  for (const name of charts('pictures'))
    expect(
      readFileSync(join(here, 'again/charts', name)).equals(
        readFileSync(join(here, 'pictures/charts', name)),
      ),
      name,
    ).toBe(true);
});

test('--png-width asks for pictures of that width, and a run without them removes those of an earlier run', () => {
  expect(ridgehold(here, ['run', 'hill.yaml', '-o', 'narrow', '--png-width', '640', '--quiet']).status).toBe(
    0,
  );
  expect(decode(join(here, 'narrow/charts/hill-1.png')).width).toBe(640);
  writeFileSync(join(here, 'narrow/charts/mine.png'), 'mine');
  expect(ridgehold(here, ['run', 'hill.yaml', '-o', 'narrow', '--quiet']).status).toBe(0);
  expect(charts('narrow').filter((name) => name.endsWith('.png'))).toEqual(['mine.png']);
});

test('a road has its picture too', () => {
  expect(ridgehold(here, ['road', 'hill.yaml', '-o', 'road', '--png', '--quiet']).status).toBe(0);
  expect(decode(join(here, 'road/road.png')).width).toBe(1600);
});

test.each(['199', '8001', 'wide'])('--png-width %s is refused before the work', (width) => {
  const { status, stderr } = ridgehold(here, ['run', 'hill.yaml', '-o', 'never', `--png-width=${width}`]);
  expect(stderr).toMatch(
    /^error: --png-width cannot be '[^']+' \(allowed: a whole number of pixels from 200 to 8000\)\n$/,
  );
  expect(status).toBe(2);
});
