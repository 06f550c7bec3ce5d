import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { AxeBuilder } from '@axe-core/playwright';
import { type Browser, chromium } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { pageOf } from '../report/compare/fixture-comparison.ts';
import { fixtureResult } from '../report/fixture.ts';

let browser: Browser;
let folder: string;
let url: string;

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'compare-'));
  const after = fixtureResult({
    lengthKm: 18,
    requirements: 'missed',
    designs: ['pi-soft', 'pi-firm'],
    ends: { locked: { km: 9, status: 'stalled' } },
  });
  const longer = {
    key: 'drive.torque.full_load',
    value: JSON.stringify(Array(40).fill([1000, 8.5])),
    of: 'vehicle' as const,
  };
  const file = join(folder, 'compare.html');
  writeFileSync(
    file,
    pageOf(fixtureResult({ lengthKm: 18, requirements: 'met' }), {
      ...after,
      given: [...after.given, longer],
    }),
  );
  url = pathToFileURL(file).href;
  browser = await chromium.launch({
    executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage', '--disable-background-networking'],
  });
});
afterAll(async () => {
  await browser?.close();
  rmSync(folder, { recursive: true, force: true });
});

describe.each([
  [1400, 'light'],
  [1400, 'dark'],
  [400, 'light'],
  [400, 'dark'],
] as const)('two results side by side at %i px, %s', (width, colorScheme) => {
  it('are accessible, ask for nothing, do not scroll sideways, and keep their words inside', async () => {
    const context = await browser.newContext({
      viewport: { width, height: 900 },
      colorScheme,
      offline: true,
    });
    const page = await context.newPage();
    const requests: string[] = [];
    const complaints: string[] = [];
    page.on('request', (request) => requests.push(request.url()));
    page.on('console', (message) => complaints.push(message.text()));
    await page.goto(url);
    const { violations } = await new AxeBuilder({ page }).setLegacyMode().analyze();
    expect(violations.map(({ id, nodes }) => `${id}: ${nodes[0]?.html.slice(0, 160)}`)).toEqual([]);
    expect(requests).toEqual([url]);
    expect(complaints).toEqual([]);
    const seen = await page.evaluate(() => ({
      over: document.documentElement.scrollWidth - document.documentElement.clientWidth,
      cells: [...document.querySelectorAll('td, th')]
        .filter((cell) => cell.scrollWidth > cell.clientWidth + 1)
        .map((cell) => cell.textContent),
      words: [...document.querySelectorAll('svg[role=img]')].flatMap((svg) => {
        const frame = svg.getBoundingClientRect();
        if (frame.width === 0) return [];
        return [...svg.querySelectorAll('text')]
          .filter((text) => {
            const box = text.getBoundingClientRect();
            return box.left < frame.left - 2 || box.right > frame.right + 2;
          })
          .map((text) => text.textContent);
      }),
      drawn: [...document.querySelectorAll('figure svg[role=img]')].filter(
        (svg) => svg.getBoundingClientRect().width > 0,
      ).length,
    }));
    expect(seen).toMatchObject({ over: 0, cells: [], words: [] });
    expect(seen.drawn).toBeGreaterThan(0);
    await context.close();
  });
});

it('every table fits onto paper', async () => {
  const page = await browser.newPage();
  await page.goto(url);
  await page.emulateMedia({ media: 'print' });
  // A4 less the margins of the style sheet, at 96 dots an inch.
  await page.setViewportSize({ width: Math.round(((210 - 28) / 25.4) * 96), height: 1000 });
  const wide = await page.evaluate(() =>
    [...document.querySelectorAll('table')]
      .filter((table) => table.getBoundingClientRect().right > document.documentElement.clientWidth + 1)
      .map((table) => table.parentElement?.getAttribute('aria-label')),
  );
  expect(wide).toEqual([]);
  await page.close();
});
