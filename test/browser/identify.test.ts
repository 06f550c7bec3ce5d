import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { AxeBuilder } from '@axe-core/playwright';
import { type Browser, chromium } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { renderIdentification } from '../../src/report/identify/render-identification.ts';
import { identifyLogs } from '../../src/run/identify-logs.ts';
import type { IdentifyRequest } from '../../src/run/identify-request.ts';

const routes = new URL('../../routes/', import.meta.url);
const read = (name: string) => readFileSync(new URL(name, routes));
const vehicle = 'vehicles/proving-125.yaml';
const REQUESTS: Readonly<Record<string, Partial<IdentifyRequest>>> = {
  'coast-down': { vehicle },
  steps: {},
  ride: { vehicle, fit: ['cda_m2', 'crr', 'mass_kg'] },
};

let browser: Browser;
let folder: string;
const urlOf = (name: string): string => pathToFileURL(join(folder, `${name}.html`)).href;

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'identify-'));
  for (const [name, more] of Object.entries(REQUESTS)) {
    const result = identifyLogs({ logs: [`logs/gallop-field-${name}.csv`], read, ...more });
    writeFileSync(
      join(folder, `${name}.html`),
      renderIdentification(result, { units: 'kmh', output: 'vehicle.yaml' }),
    );
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

describe.each(Object.keys(REQUESTS))('the page of a %s', (name) => {
  it.each([
    [1400, 'light'],
    [400, 'dark'],
  ] as const)(
    'is accessible, asks for nothing and does not scroll sideways at %i px, %s',
    async (width, colorScheme) => {
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
      await page.goto(urlOf(name));
      const { violations } = await new AxeBuilder({ page }).setLegacyMode().analyze();
      expect(violations.map(({ id, nodes }) => `${id}: ${nodes[0]?.html.slice(0, 160)}`)).toEqual([]);
      expect(requests).toEqual([urlOf(name)]);
      expect(complaints).toEqual([]);
      const seen = await page.evaluate(() => ({
        over: document.documentElement.scrollWidth - document.documentElement.clientWidth,
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
      expect(seen).toMatchObject({ over: 0, words: [] });
      expect(seen.drawn).toBeGreaterThan(1);
      await context.close();
    },
  );

  it('fits onto paper', async () => {
    const page = await browser.newPage();
    await page.goto(urlOf(name));
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
});
