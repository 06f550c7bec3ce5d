import { execFileSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { AxeBuilder } from '@axe-core/playwright';
import { type Browser, type BrowserContext, chromium, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

const dist = resolve(import.meta.dirname, '../../dist');

const CASE = `# kept: a comment, and this   spacing
title: One hill, twice
track: {file: hill.csv}
road: {elevation_source: exact}
wind: {speed_m_s: 3, from_deg: 180}
vehicle: parts/light.yaml   # kept too
hold: {set_speed_kmh: 60}
candidates:
  - {name: locked, kind: locked, throttle: level}
  - {name: typed, kind: pi, kp_pct_per_kmh: 3, ti_s: 8}
requirements:
  - {id: W-1, figure: within_band_pct, band_kmh: 2, at_least: 95}
`;
const VEHICLE = `mass: {kerb_kg: 125, rider_kg: 75, payload_kg: 15}
road_load: {cda_m2: 0.58, crr: 0.014}
drive: {kind: force, peak_force_n: 320, peak_power_kw: 8.5, closed_throttle_force_n: 40, lag_s: 0.15}
`;
/** A hill of 5 % between level ends, on a meridian. */
const hill = (length: number): string =>
  `lat_deg,lon_deg,elevation_m\n${Array.from({ length: length / 20 + 1 }, (_, i) => {
    const x = i * 20;
    return `${(50 + x / 111240).toFixed(8)},-5,${(0.05 * Math.min(600, Math.max(0, x - 600))).toFixed(2)}`;
  }).join('\n')}\n`;

let browser: Browser;
let folder: string;
beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'workbench-'));
  mkdirSync(join(folder, 'parts'));
  writeFileSync(join(folder, 'study.yaml'), CASE);
  writeFileSync(join(folder, 'parts/light.yaml'), VEHICLE);
  writeFileSync(join(folder, 'hill.csv'), hill(2000));
  ridgehold('workbench', 'study.yaml', '-o', 'study.html');
  browser = await chromium.launch({
    executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage', '--disable-background-networking'],
  });
});
afterAll(async () => {
  await browser?.close();
  rmSync(folder, { recursive: true, force: true });
});

/** The command line, in the folder of the study; a requirement that is not met is no failure here. */
function ridgehold(...words: readonly string[]): void {
  try {
    execFileSync(process.execPath, [join(dist, 'cli.js'), ...words], { cwd: folder, stdio: 'pipe' });
  } catch (error) {
    if ((error as { status?: number }).status !== 1) throw error;
  }
}

interface Opened {
  readonly page: Page;
  readonly requests: string[];
  readonly complaints: string[];
  readonly context: BrowserContext;
}

async function open(file: string, width = 1400, colorScheme: 'light' | 'dark' = 'light'): Promise<Opened> {
  const context = await browser.newContext({ viewport: { width, height: 900 }, colorScheme, offline: true });
  const page = await context.newPage();
  const requests: string[] = [];
  const complaints: string[] = [];
  page.on('request', (request) => requests.push(request.url()));
  page.on('console', (message) => complaints.push(message.text()));
  page.on('pageerror', (error) => complaints.push(error.message));
  await page.goto(pathToFileURL(file).href);
  return { page, requests, complaints, context };
}

/** Until the whole answer of what is in the inputs stands there. */
const settled = (page: Page): Promise<unknown> =>
  page.waitForFunction(() => document.getElementById('words')?.textContent?.startsWith('Worked out whole'));

const input = (page: Page, words: string) =>
  page.getByRole('group', { name: 'typed', exact: true }).getByRole('textbox', { name: words });

/** Follows a button that saves a file. */
async function saved(page: Page, button: string): Promise<string> {
  const [download] = await Promise.all([
    page.waitForEvent('download'),
    page.getByRole('button', { name: button, exact: true }).click(),
  ]);
  return readFileSync((await download.path())!, 'utf8');
}

/** Texts of the data files, by name. */
async function dataFiles(page: Page): Promise<Record<string, string>> {
  await page.getByRole('button', { name: 'Data files' }).click();
  await page.locator('#taken a').first().waitFor();
  const texts: Record<string, string> = {};
  for (const link of await page.locator('#taken a').all()) {
    const [download] = await Promise.all([page.waitForEvent('download'), link.click()]);
    texts[(await link.textContent())!] = readFileSync((await download.path())!, 'utf8');
  }
  return texts;
}

const drop = (page: Page, files: readonly { readonly name: string; readonly text: string }[]) =>
  page.evaluate((all) => {
    const dataTransfer = new DataTransfer();
    for (const { name, text } of all) dataTransfer.items.add(new File([text], name));
    document.body.dispatchEvent(new DragEvent('drop', { dataTransfer, bubbles: true, cancelable: true }));
  }, files);

describe('the page with a case in it', () => {
  let opened: Opened;
  let page: Page;
  beforeAll(async () => {
    opened = await open(join(folder, 'study.html'));
    page = opened.page;
    await settled(page);
  });
  afterAll(() => opened?.context.close());

  it('asks for nothing but itself and its own threads, and complains of nothing', () => {
    expect(opened.requests[0]).toBe(pathToFileURL(join(folder, 'study.html')).href);
    expect(opened.requests.slice(1).filter((url) => !url.startsWith('blob:'))).toEqual([]);
    expect(opened.complaints).toEqual([]);
  });

  it('a gain changed by the keyboard changes the figures to those of the command line, byte for byte', async () => {
    const before = await page.locator('#candidates table').first().textContent();
    await input(page, 'Integral time').focus();
    await page.keyboard.press('Control+A');
    await page.keyboard.type('3.5');
    await page.keyboard.press('Tab');
    await settled(page);
    expect(await page.locator('#candidates table').first().textContent()).not.toBe(before);
    const text = await saved(page, 'Save case');
    expect(text).toBe(CASE.replace('ti_s: 8', 'ti_s: 3.5'));
    writeFileSync(join(folder, 'study.yaml'), text);
    ridgehold('run', 'study.yaml', '-o', 'by-command');
    const written = (name: string): string => readFileSync(join(folder, 'by-command', name), 'utf8');
    expect(await saved(page, 'Report')).toBe(written('report.html'));
    await settled(page);
    const files = await dataFiles(page);
    expect(Object.keys(files).length).toBeGreaterThan(6);
    for (const [name, content] of Object.entries(files)) expect(content, name).toBe(written(name));
  });

  it('a value dragged by its keys answers at once, and one step back takes all of the movement back', async () => {
    const slider = page
      .getByRole('group', { name: 'typed', exact: true })
      .getByRole('slider', { name: /Proportional gain/ });
    const before = await page.locator('#lanes figure svg').first().innerHTML();
    await slider.focus();
    for (let i = 0; i < 8; i++) await page.keyboard.press('ArrowRight');
    expect(Number(await input(page, 'Proportional gain').inputValue())).toBeGreaterThan(3);
    await page.waitForFunction(
      (old) => document.querySelector('#lanes figure svg')?.innerHTML !== old,
      before,
    );
    expect(await page.evaluate(() => document.activeElement?.getAttribute('type'))).toBe('range');
    await settled(page);
    await page.keyboard.press('Control+Z');
    expect(await input(page, 'Proportional gain').inputValue()).toBe('3');
    await settled(page);
    expect(await page.locator('#lanes figure svg').first().innerHTML()).toBe(before);
    await page.keyboard.press('Control+Z');
    await settled(page);
    expect(await saved(page, 'Save case')).toBe(CASE);
    await page.keyboard.press('Control+Y');
    await settled(page);
    expect(await input(page, 'Integral time').inputValue()).toBe('3.5');
  });

  it('what a file refuses is told at its input in the words of the core, and the picture stays', async () => {
    const before = await page.locator('#sections').innerHTML();
    const gain = input(page, 'Proportional gain');
    await gain.fill('-4');
    expect(await gain.getAttribute('aria-invalid')).toBe('true');
    const fault = page.locator(`#${await gain.getAttribute('id')}-fault`);
    expect(await fault.textContent()).toContain('allowed: a number from 0.000001 to 10000 % per km/h');
    expect(await page.locator('#sections').innerHTML()).toBe(before);
    await page.getByRole('button', { name: /Integral time: back to/ }).click();
    expect(await input(page, 'Integral time').inputValue()).toBe('8');
    await gain.fill('3');
    expect(await gain.getAttribute('aria-invalid')).toBeNull();
    await settled(page);
  });

  it('a track that is dropped takes the place of the one before', async () => {
    await drop(page, [{ name: 'longer.csv', text: hill(2600) }]);
    await page
      .getByText(/longer, 2\.6\skm/)
      .first()
      .waitFor();
    await settled(page);
    expect(await saved(page, 'Save case')).toContain('track: {file: longer.csv}');
    await page.getByRole('button', { name: 'Undo' }).click();
    await settled(page);
    expect(await page.locator('#memo').textContent()).toMatch(/hill, 2\.0\skm/);
  });

  it('a case that is dropped says which of its files are missing, and takes them when they come', async () => {
    await drop(page, [
      { name: 'other.yaml', text: CASE.replaceAll('light', 'heavy').replace('One hill, twice', 'Other') },
    ]);
    await page.locator('#faults', { hasText: 'heavy.yaml' }).waitFor();
    await drop(page, [{ name: 'heavy.yaml', text: VEHICLE.replace('kerb_kg: 125', 'kerb_kg: 180') }]);
    await settled(page);
    expect(await page.locator('h1').textContent()).toBe('Other');
    expect(opened.complaints).toEqual([]);
  });
});

describe.each([
  [1400, 'light'],
  [400, 'dark'],
] as const)('the page at %i px, %s', (width, scheme) => {
  it('breaks no rule of accessibility that a machine can check, and does not scroll sideways', async () => {
    const { page, context } = await open(join(dist, 'workbench.html'), width, scheme);
    const violations = async () => {
      const found = await new AxeBuilder({ page }).setLegacyMode().analyze();
      return found.violations.map(({ id, nodes }) => `${id}: ${nodes[0]?.html.slice(0, 200)}`);
    };
    const over = () =>
      page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
    if (width < 1000) expect(await violations()).toEqual([]);
    expect(await over()).toBe(0);
    await page.getByRole('button', { name: /^One hill/ }).click();
    await settled(page);
    await page.locator('summary', { hasText: 'Drive' }).click();
    await page.locator('#fields input[type=text]').first().fill('-1');
    expect(await over()).toBe(0);
    // What is in the sections is the report's, which has this test of its own.
    await page.evaluate(() => {
      for (const one of document.querySelectorAll('#sections section > div')) one.replaceChildren();
    });
    expect(await violations()).toEqual([]);
    await context.close();
  });
});

it('long work shows how far it is, and can be stopped and taken up again', async () => {
  const { page, context } = await open(join(dist, 'workbench.html'));
  await page.getByRole('button', { name: /Harrow Gap/ }).click();
  await page.getByRole('button', { name: 'Stop' }).click();
  expect(await page.getByRole('progressbar').count()).toBe(0);
  expect(await page.locator('#words').textContent()).toBe('Stopped.');
  await page.getByRole('button', { name: 'Work it out' }).click();
  await page.getByRole('progressbar').waitFor();
  await context.close();
});
