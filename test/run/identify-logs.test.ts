import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { seededStream } from '../../src/numeric/random.ts';
import { identificationJson } from '../../src/report/identify/identification-json.ts';
import { renderIdentification } from '../../src/report/identify/render-identification.ts';
import { identifyLogs } from '../../src/run/identify-logs.ts';
import type { IdentifyRequest } from '../../src/run/identify-request.ts';
import { expectClose } from '../compare.ts';

const routes = new URL('../../routes/', import.meta.url);
const read = (name: string) => readFileSync(new URL(name, routes));
const WEATHER = { airTemperatureC: 12, airPressureHpa: 1004 };
const identified = (log: string, more: Partial<IdentifyRequest> = {}) =>
  identifyLogs({ logs: [`logs/gallop-field-${log}.csv`], read, ...more });
const vehicle = 'vehicles/proving-125.yaml';
// What the demo logs were made with: see MACHINE in scripts/make-logs.mjs.
const TRUTH = { cda: 0.61, crr: 0.0152, mass: 215 };
const holds = ({ low, high }: { low: number; high: number }, truth: number) => low <= truth && truth <= high;

describe('the demo coast-down', () => {
  const result = identified('coast-down', { vehicle, ...WEATHER });
  if (result.kind !== 'coast-down') throw new Error(result.kind);

  test('is told by its columns, and gives back what it was made with', () => {
    expect(holds(result.fit.cda, TRUTH.cda)).toBe(true);
    expect(holds(result.fit.crr, TRUTH.crr)).toBe(true);
    expect(result.fit.runs.map(({ direction }) => direction).slice(0, 2)).toEqual(['there', 'back']);
    expect(result.warnings).toEqual([]);
  });

  test('has no third term where the runs do not tell it from zero, and says so', () => {
    // The demo machine has none: see MACHINE in scripts/make-logs.mjs.
    expect(result.withThreeTerms).toBe(null);
    const page = renderIdentification(result, { units: 'kmh', output: 'v.yaml' });
    expect(page).toContain('Three terms are not given: f1 would lie at −');
    expect(JSON.parse(identificationJson(result, 'v.yaml', [])).road_load_three_terms).toBe(null);
  });

  test('has three terms with their errors where a third is in the log', () => {
    // 250 kg, F = 30 N + 0.8 N/(m/s) v + 0.35 N/(m/s)2 v2: solved in small steps here, five runs each way.
    const random = seededStream(3);
    const rows = Array.from({ length: 10 }, (_, run) => {
      const lines: string[] = [];
      for (let t = 0, v = 26; v > 5; t++) {
        const read = 3.6 * (v + 0.02 * random.normal());
        lines.push(`${run},${run % 2 === 0 ? 'there' : 'back'},${t},${read.toFixed(3)}`);
        for (let k = 0; k < 100; k++) v -= ((30 + 0.8 * v + 0.35 * v * v) / 250) * 0.01;
      }
      return lines;
    });
    const log = `run,direction,time_s,speed_kmh\n${rows.flat().join('\n')}\n`;
    const three = identifyLogs({
      logs: ['three.csv'],
      read: () => new TextEncoder().encode(log),
      massKg: 250,
      rotatingKg: 0,
      airTemperatureC: 12,
      airPressureHpa: 1004,
    });
    const { road_load_three_terms: f, road_load_three_terms_at_reference: at } = JSON.parse(
      identificationJson(three, 'v.yaml', []),
    );
    for (const [estimate, truth, near] of [
      [f.f0_n, 30, 0.5],
      [f.f1_n_per_kmh, 0.8 / 3.6, 0.02],
      [f.f2_n_per_kmh2, 0.35 / 3.6 ** 2, 0.0003],
    ] as const) {
      expectClose(estimate.value, truth, near);
      expect(holds(estimate, truth)).toBe(true);
    }
    expectClose(at.f1_n_per_kmh.value / f.f1_n_per_kmh.value, 1 + 0.006 * (285.15 - 293), 1e-5);
    const page = renderIdentification(three, { units: 'kmh', output: 'v.yaml' });
    expect(page).toContain('three terms, as measured');
    expect(page).toMatch(/tell f1 from zero: \+0\.\d+ to \+0\.\d+ N per km\/h/);
  });

  test('puts the numbers and their errors into a copy of the vehicle', () => {
    const load = readVehicleFile(result.text, 'v.yaml').file.road_load;
    expect(load).toMatchObject({ cda_yaw_per_rad2: 1 });
    if (!('cda_m2' in load && 'crr' in load)) throw new Error('another form');
    expectClose(load.cda_m2, result.fit.cda.value, 5e-5);
    expect(result.text).toMatch(
      /# cda_m2 0\.6\d+ m2: standard error 0\.0\d+, 95 % interval 0\.\d+ to 0\.\d+\n/,
    );
    expect(result.text).toContain('10 coast-down runs in gallop-field-coast-down.csv');
  });

  test('needs a mass, and takes it by itself', () => {
    expect(() => identified('coast-down')).toThrow('the mass that rolled is not known');
    const alone = identified('coast-down', { massKg: 215, rotatingKg: 9, ...WEATHER });
    if (alone.kind !== 'coast-down') throw new Error(alone.kind);
    expect(alone.fit.cda).toEqual(result.fit.cda);
    expect(alone.text).toContain('(--mass-kg)');
  });

  test('warns where the air is assumed, and counts a heavier vehicle for more drag', () => {
    const assumed = identified('coast-down', { massKg: 430, rotatingKg: 18 });
    if (assumed.kind !== 'coast-down') throw new Error(assumed.kind);
    expect(assumed.warnings.map(({ code }) => code)).toContain('air-assumed');
    const density = (1013.25 * (273.15 + 12)) / (1004 * (273.15 + 15));
    expectClose(assumed.fit.cda.value / result.fit.cda.value, 2 / density, 1e-9);
  });

  test('says in page and data that a table over yaw gave way to one drag area', () => {
    const own = new TextDecoder()
      .decode(read(vehicle))
      .replace(
        /^road_load:.*\n(?: .*\n)*/m,
        'road_load: {cda_table: [{yaw_deg: 0, cda_m2: 0.5}, {yaw_deg: 18, cda_m2: 0.6}], crr: 0.01}\n',
      );
    const replaced = identifyLogs({
      logs: ['logs/gallop-field-coast-down.csv'],
      vehicle: 'own.yaml',
      read: (name) => (name === 'own.yaml' ? new TextEncoder().encode(own) : read(name)),
      ...WEATHER,
    });
    expect(replaced.text).not.toContain('cda_table');
    const { warnings } = JSON.parse(identificationJson(replaced, 'v.yaml', []));
    expect(warnings).toEqual([expect.objectContaining({ code: 'road-load-replaced' })]);
    expect(renderIdentification(replaced, { units: 'kmh', output: 'v.yaml' })).toContain(
      'a side wind no longer changes it',
    );
  });

  test('refuses the air twice', () => {
    expect(() => identified('coast-down', { vehicle, ...WEATHER, airDensityKgM3: 1.2 })).toThrow(
      'given twice',
    );
  });
});

describe('the demo steps', () => {
  const result = identified('steps');
  if (result.kind !== 'step') throw new Error(result.kind);

  test('give back gain, time constant and delay', () => {
    // 1.35 km/h per % is 37.5 m/s for the whole throttle
    expect(holds(result.fit.all.gain, 37.5)).toBe(true);
    expect(holds(result.fit.all.timeConstant, 8)).toBe(true);
    expect(holds(result.fit.all.delay, 0.4)).toBe(true);
    expect(result.fit.steps.map(({ record }) => record.to > record.from)).toEqual([
      true,
      false,
      false,
      true,
      true,
      false,
    ]);
  });

  test('become PI gains by the rule of Skogestad', () => {
    const { gain, timeConstant, delay } = result.fit.all;
    const [tight, calm] = result.designs;
    // Kc = T / (K (tc + L)), Ti = min(T, 4 (tc + L)), tc = L and 4 L
    expectClose(tight!.kp, timeConstant.value / (gain.value * 2 * delay.value), 1e-9);
    expectClose(tight!.integralTime, 8 * delay.value, 1e-9);
    expectClose(calm!.kp, timeConstant.value / (gain.value * 5 * delay.value), 1e-9);
    expect(result.text).toMatch(
      /^candidates:\n {2}- \{name: simc-tight, kind: pi, kp_pct_per_kmh: [\d.]+, ti_s:/m,
    );
  });
});

describe('the demo ride', () => {
  const result = identified('ride', { vehicle, ...WEATHER });
  if (result.kind !== 'ride') throw new Error(result.kind);

  test('gives back what it was made with, better than the vehicle that it is held against', () => {
    const [cda, crr] = result.fit.unknowns;
    expect(holds(cda!.estimate, TRUTH.cda)).toBe(true);
    expect(holds(crr!.estimate, TRUTH.crr)).toBe(true);
    expect(cda!.was).toBe(0.58);
    expect(result.fit.rmsForce).toBeLessThan(result.fit.rmsForceBefore / 1.5);
    expect(result.fit.segments).toHaveLength(28);
  });

  test('tells the mass where it is asked for', () => {
    const three = identified('ride', { vehicle, ...WEATHER, fit: ['mass_kg', 'cda_m2', 'crr'] });
    if (three.kind !== 'ride') throw new Error(three.kind);
    expect(holds(three.fit.unknowns[0]!.estimate, TRUTH.mass)).toBe(true);
    const { mass } = readVehicleFile(three.text, 'v.yaml').file;
    expectClose(mass.kerb_kg + mass.rider_kg + mass.payload_kg, three.fit.unknowns[0]!.estimate.value, 0.01);
  });
});

describe('a ride along the road of a case', () => {
  test('is held against its vehicle, and a number that it does not tell stays as it was', () => {
    const result = identifyLogs({
      logs: ['harrow-gap-ridden.csv'],
      read,
      case: { file: 'harrow-gap-ridden.yaml', read },
    });
    if (result.kind !== 'ride') throw new Error(result.kind);
    expect(result.fit.segments.length).toBeGreaterThan(50);
    expect(result.roadWords).toContain('harrow-gap-ridden.yaml');
    for (const { name, estimate, was } of result.fit.unknowns) {
      const load = readVehicleFile(result.text, 'v.yaml').file.road_load as unknown as Record<string, number>;
      if (estimate.low <= 0) expect(load[name]).toBe(was);
      else expectClose(load[name]!, estimate.value, 1e-4);
    }
  });

  test('gives back the numbers with which the demo ride was made by another program', () => {
    const result = identifyLogs({
      logs: ['harrow-gap-ridden.csv'],
      read,
      case: { file: 'harrow-gap-ridden.yaml', read },
    });
    if (result.kind !== 'ride') throw new Error(result.kind);
    // scripts/make-routes.mjs has its own engine, plate and law of motion: CdA 0.58 m2, Crr 0.014.
    for (const [name, truth] of [
      ['cda_m2', 0.58],
      ['crr', 0.014],
    ] as const) {
      const { low, high } = result.fit.unknowns.find((one) => one.name === name)!.estimate;
      expect(low).toBeLessThan(truth);
      expect(high).toBeGreaterThan(truth);
      expect(high - low).toBeLessThan(0.6 * truth);
    }
    expect(result.fit.rmsForceBefore).toBeLessThan(6);
    expect(result.warnings.map(({ code }) => code)).not.toContain('drive-apart');
  });
});

describe('page and data of every kind', () => {
  const results = [
    identified('coast-down', { vehicle, ...WEATHER }),
    identified('steps'),
    identified('ride', { vehicle, ...WEATHER }),
  ];

  test.each(results.map((result) => [result.kind, result] as const))('are whole: %s', (kind, result) => {
    const page = renderIdentification(result, { units: 'mph', output: 'v.yaml' });
    expect(page).toMatch(/95 % intervals/);
    expect(page).toContain('mph');
    expect(page).not.toMatch(/undefined|NaN|\[object|Infinity/);
    expect(renderIdentification(result, { units: 'mph', output: 'v.yaml' })).toBe(page);
    const json = JSON.parse(identificationJson(result, 'v.yaml', ['identify.html']));
    expect(json.kind).toBe(kind);
    expect(json.answer).toContain('±');
    expect(json.output).toMatchObject({ name: 'v.yaml', sha256: expect.stringMatching(/^[0-9a-f]{64}$/) });
    expect(json.inputs[0].name).toBe(`logs/gallop-field-${kind === 'step' ? 'steps' : kind}.csv`);
  });
});

describe('what a kind of log has no use for', () => {
  test.each<[string, Partial<IdentifyRequest>, string]>([
    ['steps', { vehicle }, '--vehicle has no use for a step test (found --vehicle; allowed: the logs alone)'],
    ['coast-down', { massKg: 215, fit: ['crr'] }, '--fit has no use for a coast-down'],
    [
      'ride',
      { vehicle, massKg: 230 },
      '--mass-kg has no use for a ride, whose masses are those of the vehicle',
    ],
    [
      'ride',
      { case: { file: 'harrow-gap-ridden.yaml', read }, airTemperatureC: 3 },
      '--air-temperature-c has no use beside a case',
    ],
  ])('is refused: %s', (log, more, words) => {
    expect(() => identified(log, more)).toThrow(words);
  });
});

test('a ride with its power lies on the road of a case by its distances', () => {
  const rows = new TextDecoder().decode(read('logs/gallop-field-ride.csv')).trim().split('\n');
  const points = rows.slice(1).map((row) => row.split(','));
  // The road as surveyed: the logged heights are those of the road but for a drift of 0.2 m.
  const track = `distance_m,elevation_m\n${points.map(([, x, , z]) => `${x},${z}`).join('\n')}\n`;
  const files: Record<string, string> = {
    'case.yaml': `track: {file: track.csv}
road: {elevation_source: barometric}
air: {density_kg_m3: 1.2266}
vehicle: vehicle.yaml
hold: {set_speed_kmh: 60}
candidates: [{name: locked, kind: locked, throttle: level}]
`,
    'track.csv': track,
    'vehicle.yaml':
      'mass: {kerb_kg: 140, rider_kg: 75, rotating_kg: 9}\nroad_load: {cda_m2: 0.5, crr: 0.02}\n',
    'log.csv': `${[
      'time_s,distance_m,speed_kmh,wheel_power_kw',
      ...points.map(([t, x, v, , p]) => [t, x, v, p].join(',')),
    ].join('\n')}\n`,
  };
  const text = (name: string) => new TextEncoder().encode(files[name]);
  const result = identifyLogs({ logs: ['log.csv'], read: text, case: { file: 'case.yaml', read: text } });
  if (result.kind !== 'ride') throw new Error(result.kind);
  const [cda, crr] = result.fit.unknowns;
  expectClose(cda!.estimate.value, TRUTH.cda, 0.03);
  expectClose(crr!.estimate.value, TRUTH.crr, 0.003);
  expect(result.driveWords).toContain('power at the wheel');
});

test('the candidates of a step test are those of a case', () => {
  const { text } = identified('steps');
  const document = readCaseFile(
    `track: {profile: [{length_m: 600, grade_pct: 0}]}\nvehicle: v.yaml\nhold: {set_speed_kmh: 60}\n${text}`,
    'case.yaml',
  );
  expect(document.file.candidates.map(({ name }) => name)).toEqual(['simc-tight', 'simc-calm']);
});

describe('a ride with its power and ten positions a second, on the road of a case', () => {
  // 14 km due north over waves, a step of 1 / 111 229 of a degree a metre (WGS 84 at 50 degrees, to 3e-5), and positions that
  // scatter by 1.5 m about a step of 1.5 m: every third goes back.
  const LENGTH = 14_000;
  const latitude = (x: number) => (50 + x / 111_229).toFixed(7);
  const slope = (x: number) => 0.03 * Math.cos(x / 500);
  const track = Array.from({ length: 701 }, (_, i) => `${latitude(20 * i)},10,${15 * Math.sin(i / 25)}`);
  const files = (back: boolean): Readonly<Record<string, string>> => {
    const random = seededStream(10);
    const rows = ['time_s,lat_deg,lon_deg,speed_kmh,wheel_power_kw'];
    for (let [x, v, tenth] = [100, 15, 0]; x < LENGTH - 100; tenth++) {
      const at = back ? LENGTH - x : x;
      const grade = (back ? -1 : 1) * slope(at);
      const force = 130 + 50 * Math.sin(tenth / 470) + 215 * 9.80665 * grade * 0.8;
      const place = latitude(at + 1.5 * random.normal());
      const east = (10 + (1.5 * random.normal()) / 71_700).toFixed(7);
      rows.push(`${tenth / 10},${place},${east},${(3.6 * v).toFixed(2)},${((force * v) / 1000).toFixed(4)}`);
      for (let k = 0; k < 10; k++) {
        const cosine = 1 / Math.sqrt(1 + grade * grade);
        v += (0.01 * (force - 0.36 * v * v - 215 * 9.80665 * (0.015 + grade) * cosine)) / 231;
        x += 0.01 * v * cosine;
      }
    }
    return {
      'case.yaml': `track: {file: track.csv}
road: {elevation_source: lidar}
air: {density_kg_m3: 1.2}
vehicle: vehicle.yaml
hold: {set_speed_kmh: 60}
candidates: [{name: locked, kind: locked, throttle: level}]
`,
      'track.csv': `lat_deg,lon_deg,elevation_m\n${track.join('\n')}\n`,
      'vehicle.yaml':
        'mass: {kerb_kg: 215, rotating_kg: 16}\nroad_load: {cda_m2: 0.5, crr: 0.02}\ndrive: {kind: force, peak_force_n: 400, peak_power_kw: 9}\n',
      'log.csv': `${rows.join('\n')}\n`,
    };
  };
  const ridden = (back: boolean) => {
    const own = files(back);
    const encoded = (name: string) => new TextEncoder().encode(own[name]!);
    return identifyLogs({
      logs: ['log.csv'],
      read: encoded,
      case: { file: 'case.yaml', read: encoded },
    });
  };

  test('is laid on it whole, though its positions go back as often as forth', () => {
    const result = ridden(false);
    if (result.kind !== 'ride') throw new Error(result.kind);
    expect(result.fit.length).toBeGreaterThan(13_700);
    const [cda, crr] = result.fit.unknowns;
    expectClose(cda!.estimate.value, 0.6, 0.002);
    expectClose(crr!.estimate.value, 0.015, 1e-4);
  });

  test('is refused the other way, and says so', () => {
    expect(() => ridden(true)).toThrow(/goes the other way along the road .*13\.\d\d km/);
  });
});
