import { readFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { parse } from 'csv-parse/sync';
import { beforeAll, expect, test } from 'vitest';
import { expectClose } from '../compare.ts';
import { type Ended, ridgeholdMany, temporaryFolder, writeFiles } from './start-program.ts';

interface Row {
  readonly inertia_kg: number;
  readonly f0_n: number;
  readonly f2_n_per_kmh2: number;
  readonly time_70_60_s: number;
  readonly longest_s: number;
  readonly shortest_s: number;
}
const TABLE: readonly Row[] = JSON.parse(
  readFileSync(resolve(import.meta.dirname, '../reference/coast-down-table/table.json'), 'utf8'),
);
/** Row whose published time contradicts its own coefficients: see SOURCE.md. */
const MISPRINT = 160;

const here = temporaryFolder();
const points = Array.from({ length: 81 }, (_, i) => `${i * 10},12.0`);
writeFiles(here, { 'level.csv': `distance_m,elevation_m\n${points.join('\n')}\n` });

function caseOf(row: Row): string {
  return `track: {file: level.csv}
road: {elevation_source: exact}
air: {density_kg_m3: 1.189}
vehicle:
  mass: {kerb_kg: ${row.inertia_kg}, rotating_kg: 0}
  road_load: {f0_n: ${row.f0_n}, f2_n_per_kmh2: ${row.f2_n_per_kmh2}, air_density_kg_m3: 1.189}
hold: {set_speed_kmh: 75, start_speed_kmh: 75}
candidates: [{name: coast, kind: locked, throttle_pct: 0}]
output: {series: full}
`;
}

/** Time at which a falling speed passes a value, between two rows of the series. */
function timeAt(records: readonly Record<string, string>[], speedKmh: number): number {
  const after = records.findIndex((record) => Number(record.speed_kmh) <= speedKmh);
  const [a, b] = [records[after - 1]!, records[after]!];
  const share = (Number(a.speed_kmh) - speedKmh) / (Number(a.speed_kmh) - Number(b.speed_kmh));
  return Number(a.time_s) + share * (Number(b.time_s) - Number(a.time_s));
}

const nameOf = (row: Row): string => `coast-${row.inertia_kg}`;
let runs: readonly Ended[];
beforeAll(() => {
  for (const row of TABLE) writeFiles(here, { [`${nameOf(row)}.yaml`]: caseOf(row) });
  runs = ridgeholdMany(
    here,
    TABLE.map((row) => ['run', `${nameOf(row)}.yaml`]),
  );
});

test.each(TABLE)(
  'coasting at $inertia_kg kg takes the published time from 70 to 60 km/h, through the command line',
  (row) => {
    const run = runs[TABLE.indexOf(row)]!;
    expect(run.stderr).not.toContain('error:');
    expect(run.status).toBe(0);
    const text = readFileSync(join(here, 'out', nameOf(row), 'series-coast.csv'), 'utf8');
    const records = parse(text, { columns: true }) as Record<string, string>[];
    const time = timeAt(records, 60) - timeAt(records, 70);
    if (row.inertia_kg === MISPRINT) {
      expect(time).toBeGreaterThan(row.shortest_s);
      expect(time).toBeLessThan(row.longest_s);
    } else expectClose(time, row.time_70_60_s, 0.015, 'time from 70 to 60 km/h [s]');
  },
);
