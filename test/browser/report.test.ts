import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { AxeBuilder } from '@axe-core/playwright';
import { type Browser, chromium, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { renderReport } from '../../src/report/render-report.ts';
import { fixtureResult } from '../report/fixture.ts';
import { withRider } from '../report/fixture-rider.ts';

let browser: Browser;
let folder: string;
/** Of a plain drive with a rider, and of an engine with gears, shifts and limit cycles. */
const urls = { plain: '', engine: '' };
type Drive = keyof typeof urls;

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'report-'));
  for (const drive of ['plain', 'engine'] as const) {
    const file = join(folder, `${drive}.html`);
    const result =
      drive === 'engine' ? fixtureResult({ engine: true }) : withRider(fixtureResult({ lengthKm: 18 }));
    const none = { none: 'it was not back within 1 km/h for 3 s in two minutes' };
    const unmeasured = { ...result.requirements[0]!, measured: none, margin: none };
    const requirements = [...result.requirements, unmeasured];
    writeFileSync(file, renderReport({ ...result, requirements }, { units: 'kmh' }));
    urls[drive] = pathToFileURL(file).href;
  }
  browser = await chromium.launch({
    executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage', '--disable-background-networking'],
  });
});
afterAll(async () => {
  await browser?.close();
  rmSync(folder, { recursive: true, force: true });
});

interface Opened {
  readonly page: Page;
  readonly requests: readonly string[];
  readonly complaints: readonly string[];
  readonly close: () => Promise<void>;
}

async function open(drive: Drive, width: number, colorScheme: 'light' | 'dark'): Promise<Opened> {
  const context = await browser.newContext({ viewport: { width, height: 900 }, colorScheme, offline: true });
  const page = await context.newPage();
  const requests: string[] = [];
  const complaints: string[] = [];
  page.on('request', (request) => requests.push(request.url()));
  page.on('console', (message) => complaints.push(message.text()));
  await page.goto(urls[drive]);
  return { page, requests, complaints, close: () => context.close() };
}

describe.each([
  ['plain', 1400, 'light'],
  ['plain', 400, 'dark'],
  ['engine', 1400, 'light'],
  ['engine', 1400, 'dark'],
  ['engine', 400, 'light'],
  ['engine', 400, 'dark'],
] as const)('the report of a drive that is %s at %i px, %s', (drive, width, scheme) => {
  it('breaks no rule of accessibility that a machine can check', async () => {
    const { page, close } = await open(drive, width, scheme);
    // The page has no frames: the mode that looks into none is twice as fast.
    const { violations } = await new AxeBuilder({ page }).setLegacyMode().analyze();
    expect(
      violations.map(
        (one) =>
          `${one.id}: ${one.nodes
            .slice(0, 3)
            .map((node) => node.html.slice(0, 160))
            .join(' | ')}`,
      ),
    ).toEqual([]);
    await close();
  });

  it('requests only itself, is styled, and does not scroll sideways', async () => {
    const { page, requests, complaints, close } = await open(drive, width, scheme);
    expect(requests).toEqual([urls[drive]]);
    expect(complaints).toEqual([]);
    const seen = await page.evaluate(() => ({
      over: document.documentElement.scrollWidth - document.documentElement.clientWidth,
      ground: getComputedStyle(document.body).backgroundColor,
      wide: getComputedStyle(document.querySelector('figure .wide')!).display,
      narrow: getComputedStyle(document.querySelector('figure .narrow')!).display,
    }));
    expect(seen).toEqual({
      over: 0,
      ground: scheme === 'light' ? 'rgb(255, 255, 255)' : 'rgb(20, 23, 26)',
      wide: width > 640 ? 'block' : 'none',
      narrow: width > 640 ? 'none' : 'block',
    });
    await close();
  });

  it('keeps the words of every cell inside the cell', async () => {
    const { page, close } = await open(drive, width, scheme);
    const outside = await page.evaluate(() =>
      [...document.querySelectorAll('td, th')]
        .filter((cell) => cell.scrollWidth > cell.clientWidth + 1)
        .map((cell) => cell.textContent),
    );
    expect(outside).toEqual([]);
    await close();
  });

  it('keeps every word of a chart inside its drawing', async () => {
    const { page, close } = await open(drive, width, scheme);
    const outside = await page.evaluate(() =>
      [...document.querySelectorAll('svg[role=img]')].flatMap((svg) => {
        const frame = svg.getBoundingClientRect();
        if (frame.width === 0) return [];
        return [...svg.querySelectorAll('text')]
          .filter((text) => {
            const box = text.getBoundingClientRect();
            return box.left < frame.left - 2 || box.right > frame.right + 2;
          })
          .map((text) => `${svg.querySelector('title')?.textContent}: ${text.textContent}`);
      }),
    );
    expect(outside).toEqual([]);
    await close();
  });

  it('sets no two words of the force chart, the lanes or a hill picture over each other', async () => {
    const { page, close } = await open(drive, width, scheme);
    const meeting = await page.evaluate(() =>
      [
        ...document.querySelectorAll('#force svg[role=img], #lanes svg[role=img], .card svg[role=img]'),
      ].flatMap((svg) => {
        const boxes = [...svg.querySelectorAll('text')]
          .map((text) => ({ words: text.textContent, box: text.getBoundingClientRect() }))
          .filter(({ box }) => box.width > 0);
        // Boxes of letters have air above and below: a quarter of their height may meet.
        const meet = (a: DOMRect, b: DOMRect) =>
          Math.min(a.right, b.right) - Math.max(a.left, b.left) > 1 &&
          Math.min(a.bottom, b.bottom) - Math.max(a.top, b.top) > a.height / 4;
        return boxes.flatMap((one, i) =>
          boxes
            .slice(i + 1)
            .flatMap((other) => (meet(one.box, other.box) ? [`${one.words} | ${other.words}`] : [])),
        );
      }),
    );
    expect(meeting).toEqual([]);
    await close();
  });

  it('shades the edge behind which a table goes on', async () => {
    const { page, close } = await open(drive, width, scheme);
    const unshaded = await page.evaluate(() =>
      [...document.querySelectorAll('.scroll')]
        .filter((frame) => frame.scrollWidth > frame.clientWidth + 1)
        .filter((frame) => !getComputedStyle(frame).backgroundImage.includes('gradient'))
        .map((frame) => frame.getAttribute('aria-label')),
    );
    expect(unshaded).toEqual([]);
    await close();
  });
});

it('prints white, without the contents, with the wide charts and no card wider than the sheet', async () => {
  const { page, close } = await open('engine', 1400, 'dark');
  await page.emulateMedia({ media: 'print' });
  await page.setViewportSize({ width: 690, height: 1000 });
  const seen = await page.evaluate(() => ({
    ground: getComputedStyle(document.body).backgroundColor,
    contents: getComputedStyle(document.querySelector('nav')!).display,
    wide: getComputedStyle(document.querySelector('figure .wide')!).display,
    whole: getComputedStyle(document.querySelector('.card')!).breakInside,
    over: document.documentElement.scrollWidth - document.documentElement.clientWidth,
  }));
  expect(seen).toEqual({
    ground: 'rgb(255, 255, 255)',
    contents: 'none',
    wide: 'block',
    whole: 'avoid',
    over: 0,
  });
  await close();
});
