import { expect, test } from 'vitest';
import { LIMIT_BRAKE, LIMIT_OFF, LIMIT_OVERRIDE, LIMIT_SHIFT } from '../../../src/loop/plan.ts';
import { chartFiles } from '../../../src/report/chart-files.ts';
import { modeWord } from '../../../src/report/data/bin-series.ts';
import { dataFiles } from '../../../src/report/data/data-files.ts';
import { summaryJson } from '../../../src/report/data/summary.ts';
import { fixtureResult } from '../fixture.ts';
import { withRider } from '../fixture-rider.ts';

const plain = fixtureResult({ lengthKm: 12, locked: false });
const result = withRider(plain);
const files = new Map(dataFiles(result).map(({ name, text }) => [name, text]));
const rows = (name: string): string[][] =>
  files
    .get(name)!
    .trimEnd()
    .split('\r\n')
    .map((line) => line.split(','));

test('every event of the hold is a row, with what followed it where anything did', () => {
  const [head, ...events] = rows('hold-events.csv');
  expect(events).toHaveLength(9);
  const row = (i: number) => Object.fromEntries(head!.map((name, k) => [name, events[i]![k]]));
  // 5 m/s are 18 km/h, and 10 m/s 36 km/h.
  expect(row(1)).toEqual({
    candidate: 'pi-firm',
    time_s: '250.000',
    distance_m: '5000.00',
    event: 'resumed',
    cause: 'bend',
    set_speed_kmh: '60.000',
    measured_kmh: '36.0000',
    command_pct: '25.000',
    command_step_pct: '2.000',
    lowest_kmh: '-18.0000',
    highest_kmh: '1.8000',
    settling_s: '31.400',
    jerk_m_s3: '1.500',
  });
  expect(row(2)).toMatchObject({ event: 'override_began', lowest_kmh: '', jerk_m_s3: '' });
  expect(row(6)).toMatchObject({ event: 'resumed', settling_s: '' });
});

test('each bend has its radius, and how it is ridden', () => {
  const [head, first, second] = rows('bends.csv');
  const of = (row: string[]) => Object.fromEntries(head!.map((name, k) => [name, row[k]]));
  // sqrt(2.5 m/s2 x 50 m) = 11.180 m/s = 40.249 km/h.
  expect(of(first!)).toMatchObject({
    bend: '1',
    side: 'left',
    radius_m: '50.0',
    allowed_kmh: '40.249',
    ridden_kmh: '39.600',
    brakes_km: '4.0000',
    resumes_km: '5.0000',
    no_hold: 'bends_follow',
  });
  expect(of(second!)).toMatchObject({ side: 'right', radius_m: '40.0', ridden_kmh: '36.000' });
});

test('the summary and the map have events and places, and only of a case that asks', () => {
  const summary = JSON.parse(summaryJson(result, []));
  expect(summary.hold_events).toHaveLength(9);
  expect(summary.hold_events[6]).toMatchObject({
    settling_s: null,
    settling_s_reason: 'what came next on the way came first',
  });
  expect(summary.bends).toMatchObject({
    max_lateral_m_s2: 2.5,
    no_hold: [{ from_km: 4, to_km: 5, reason: 'bends_follow', bends: 2, lowest_kmh: 36 }],
  });
  const features = JSON.parse(files.get('route.geojson')!).features as { properties: { kind: string } }[];
  const place = features.at(-1)!.properties;
  expect(place).toMatchObject({ kind: 'no_hold', reason: 'bends_follow', from_km: 4, to_km: 5 });
  const names = dataFiles(plain).map(({ name }) => name);
  expect(names).not.toContain('hold-events.csv');
  expect(names).not.toContain('bends.csv');
  expect(Object.keys(JSON.parse(summaryJson(plain, [])))).not.toContain('hold_events');
});

test('the pictures of the section are files too', () => {
  const names = chartFiles(result, { units: 'kmh' }).map(({ name }) => name);
  expect(names.filter((name) => name.startsWith('hold'))).toEqual([
    'hold.svg',
    'hold-resumed-1.svg',
    'hold-resumed-2.svg',
    'hold-override-ended-1.svg',
    'hold-ended-1.svg',
    'hold-ended-2.svg',
  ]);
  expect(new Set(names).size).toBe(names.length);
});

test('the mode says who has the throttle', () => {
  expect(modeWord(LIMIT_OFF | LIMIT_BRAKE, false)).toBe('off');
  expect(modeWord(LIMIT_OVERRIDE, false)).toBe('override');
  expect(modeWord(LIMIT_SHIFT | LIMIT_OFF, true)).toBe('shift');
  const [head, ...bins] = rows('series-pi-firm.csv');
  const [at, mode] = [head!.indexOf('distance_m'), head!.indexOf('mode')];
  const gripped = bins.filter((row) => row[mode] === 'override').map((row) => Number(row[at]));
  // From 6000 to 6200 m in bins of 10 m.
  expect(gripped).toHaveLength(20);
  expect([gripped[0], gripped.at(-1)]).toEqual([6000, 6190]);
});
