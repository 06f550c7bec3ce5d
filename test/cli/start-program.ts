// Starts the built program as a user's shell would, in a folder of its own.
import { spawnSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join, resolve } from 'node:path';
import { afterAll } from 'vitest';

export const PROGRAM = resolve(import.meta.dirname, '../../dist/cli.js');
const MANY_RUNS = resolve(import.meta.dirname, 'many-runs.mjs');

export interface Ended {
  readonly status: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

/** Runs `ridgehold ...args`; `shell` goes before it in a shell, such as `ulimit -f 8`. */
export function ridgehold(folder: string, args: readonly string[], shell?: string): Ended {
  const env = { ...process.env, NO_COLOR: '1' };
  const options = {
    cwd: folder,
    encoding: 'utf8',
    env,
    maxBuffer: 256 * 1024 * 1024,
    timeout: 90_000,
  } as const;
  const done =
    shell === undefined
      ? spawnSync(process.execPath, [PROGRAM, ...args], options)
      : spawnSync('bash', ['-c', `${shell}; exec "$0" "$@"`, process.execPath, PROGRAM, ...args], options);
  return { status: done.status, stdout: done.stdout, stderr: done.stderr };
}

/** Runs `ridgehold ...args` for each of many, one after the other in one process. */
export function ridgeholdMany(folder: string, calls: readonly (readonly string[])[]): readonly Ended[] {
  const { status, stdout, stderr } = spawnSync(process.execPath, [MANY_RUNS, PROGRAM], {
    cwd: folder,
    encoding: 'utf8',
    env: { ...process.env, NO_COLOR: '1' },
    input: JSON.stringify(calls),
    maxBuffer: 256 * 1024 * 1024,
    timeout: 110_000,
  });
  if (status !== 0) throw new Error(`the runs ended with status ${status}: ${stderr}`);
  return JSON.parse(stdout);
}

/** A folder that goes away after the tests of the file. */
export function temporaryFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'ridgehold-test-'));
  afterAll(() => rmSync(folder, { recursive: true, force: true }));
  return folder;
}

/** Writes texts below a folder. */
export function writeFiles(folder: string, files: Readonly<Record<string, string>>): void {
  for (const [name, text] of Object.entries(files)) {
    mkdirSync(dirname(join(folder, name)), { recursive: true });
    writeFileSync(join(folder, name), text);
  }
}

/** All files below a folder, by name with `/`, as text. */
export function filesBelow(folder: string): Record<string, string> {
  const files: Record<string, string> = {};
  for (const entry of readdirSync(folder, { recursive: true, withFileTypes: true })) {
    if (!entry.isFile()) continue;
    const path = join(entry.parentPath, entry.name);
    files[
      path
        .slice(folder.length + 1)
        .split('\\')
        .join('/')
    ] = readFileSync(path, 'utf8');
  }
  return files;
}

export const VEHICLE = `name: Test 125
mass: {kerb_kg: 125, rider_kg: 75, payload_kg: 15, rotating_kg: 9}
road_load: {cda_m2: 0.58, crr: 0.014}
drive: {kind: force, peak_force_n: 320, peak_power_kw: 8.5, closed_throttle_force_n: 40, lag_s: 0.15}
actuator: {lag_s: 0.06, rate_limit_pct_per_s: 400}
speed_sensor: {filter_s: 0.05, delay_s: 0.02}
`;

/** A short hill that the drive cannot hold, and a long level before and after it. */
export const CASE = `title: One hill
track: {profile: [{length_m: 600, grade_pct: 0}, {length_m: 80, grade_pct: 12}, {length_m: 920, grade_pct: 0}], vertical_curve_m: 40}
vehicle: vehicle.yaml
hold: {set_speed_kmh: 60}
candidates:
  - {name: locked, kind: locked, throttle: level}
  - {name: pi-20s, kind: pi, sample_s: 0.02, design: {settling_s: 20, overshoot_pct: 2}, anti_windup: {kind: conditional}}
`;
