import { resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { type Browser, chromium } from 'playwright-core';
import { build } from 'vite';
import { afterAll, beforeAll, expect, test } from 'vitest';

const library = resolve(import.meta.dirname, '../../dist/index.js');

const FILES: Readonly<Record<string, string>> = {
  'case.yaml': `track: {file: track.csv}
road: {elevation_source: barometric}
wind: {speed_m_s: 6, from_deg: 200}
vehicle:
  mass: {kerb_kg: 125, rider_kg: 75, payload_kg: 15}
  road_load: {cda_m2: 0.58, cda_yaw_per_rad2: 1, crr: 0.014}
  drive: {kind: force, peak_force_n: 320, peak_power_kw: 8.5, closed_throttle_force_n: 40, lag_s: 0.15, altitude_derate: naturally_aspirated}
  actuator: {lag_s: 0.06, rate_limit_pct_per_s: 400}
  speed_sensor: {filter_s: 0.05, delay_s: 0.02}
hold: {set_speed_kmh: 60, changes: [{at_km: 2, set_speed_kmh: 50, ramp_m_s2: 0.6}]}
rider: {brakes_above_kmh: 8}
candidates:
  - {name: locked, kind: locked, throttle: level}
  - {name: droop, kind: pi, design: {droop_kmh: 2, grade_step_pct: 6, damping: 0.8}, anti_windup: {kind: back_calculation, tracking_s: 4}}
  - {name: settling, kind: pi, design: {settling_s: 30, overshoot_pct: 2}}
logged_rides: [{name: ridden, file: ride.csv}]
requirements: [{id: T-1, figure: within_band_pct, band_kmh: 2, at_least: 95}]
`,
  'track.csv': track(),
  'ride.csv': ride(),
};

/** Four kilometres of positions over a hill, with some noise that repeats. */
function track(): string {
  const rows = Array.from({ length: 201 }, (_, i) => {
    const x = i * 20;
    const elevation = 100 + 60 * Math.exp(-(((x - 1500) / 500) ** 2)) + ((i * 7919) % 13) / 20;
    return `${(50 + x / 111200).toFixed(7)},${(-5 + 0.001 * Math.sin(x / 300)).toFixed(7)},${elevation.toFixed(2)}`;
  });
  return `lat_deg,lon_deg,elevation_m\n${rows.join('\n')}\n`;
}

/** A ride over them at some 15 m/s, a fix a second, with some scatter that repeats. */
function ride(): string {
  const rows = Array.from({ length: 265 }, (_, t) => {
    const x = 15 * t + 20 * Math.sin(t / 15);
    const off = (((t * 7919) % 13) - 6) / 4;
    return `${t},${(50 + (x + off) / 111200).toFixed(7)},${(-5 + 0.001 * Math.sin(x / 300) + off / 71500).toFixed(7)},${20 + (t % 9)}`;
  });
  return `time_s,lat_deg,lon_deg,throttle_pct\n${rows.join('\n')}\n`;
}

interface Library {
  runCase(request: { file: string; read: (name: string) => Uint8Array }): never;
  summaryJson(run: never, files: readonly string[]): string;
  dataFiles(run: never): readonly { name: string; text: string }[];
  renderReport(run: never, options: { units: 'kmh' }): string;
}

/** Bits of every number of every run, and the texts of the data files. Runs in Node and in the page: no names from outside. */
function figures(ridgehold: Library, files: Readonly<Record<string, string>>): Record<string, string> {
  const run = ridgehold.runCase({
    file: 'case.yaml',
    read: (name) => new TextEncoder().encode(files[name] ?? ''),
  });
  const { candidates, loggedRides } = run as { candidates: unknown; loggedRides: unknown };
  const bits = JSON.stringify({ candidates, loggedRides }, (_, value) => {
    if (ArrayBuffer.isView(value))
      return new Uint8Array(value.buffer, value.byteOffset, value.byteLength).join(' ');
    return typeof value === 'number' ? new Uint32Array(new Float64Array([value]).buffer).join(' ') : value;
  });
  const texts: Record<string, string> = { bits, summary: ridgehold.summaryJson(run, []) };
  texts.report = ridgehold.renderReport(run, { units: 'kmh' });
  for (const { name, text } of ridgehold.dataFiles(run)) texts[name] = text;
  return texts;
}

let browser: Browser;
beforeAll(async () => {
  browser = await chromium.launch({
    executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage', '--no-first-run'],
  });
});
afterAll(async () => {
  await browser?.close();
});

test('a run gives the same numbers bit for bit, and the same files, in Node and in Chromium', async () => {
  const inNode = figures((await import(pathToFileURL(library).href)) as Library, FILES);
  const page = await browser.newPage();
  const faults: string[] = [];
  page.on('pageerror', (error) => faults.push(String(error)));
  await page.addScriptTag({ content: await asOneScript() });
  expect(faults).toEqual([]);
  const inPage = await page.evaluate(
    ([source, files]) => {
      const host = globalThis as unknown as { Ridgehold: unknown };
      return new Function('ridgehold', 'files', `return (${source})(ridgehold, files)`)(
        host.Ridgehold,
        files,
      );
    },
    [figures.toString(), FILES] as const,
  );
  expect(faults).toEqual([]);
  expect(Object.keys(inPage).length).toBeGreaterThan(7);
  expect(inNode.bits!.length).toBeGreaterThan(100_000);
  expect(inPage).toEqual(inNode);
});

/** The built library as one script that a page without a server can run. */
async function asOneScript(): Promise<string> {
  const built = await build({
    configFile: false,
    logLevel: 'error',
    root: resolve(import.meta.dirname, '../..'),
    build: {
      write: false,
      minify: false,
      target: 'es2022',
      lib: { entry: library, formats: ['iife'], name: 'Ridgehold' },
    },
  });
  const [output] = Array.isArray(built) ? built : [built];
  if (output === undefined || !('output' in output)) throw new Error('nothing was built');
  return output.output[0].code;
}
