import { expect, test } from 'vitest';
import { seededStream } from '../../src/numeric/random.ts';
import { InputError } from '../../src/problems/input-error.ts';
import { runCase } from '../../src/run/run-case.ts';
import type { RunResult } from '../../src/run/run-result.ts';
import { expectClose } from '../compare.ts';
import { ENGINE } from './small-engine.ts';

const VEHICLE = {
  mass: { kerb_kg: 125, rider_kg: 75 },
  road_load: { cda_m2: 0.58, crr: 0.014 },
  drive: { kind: 'force', peak_force_n: 320, closed_throttle_force_n: 40, lag_s: 0.15 },
};
const LEVEL = { profile: [{ length_m: 6000, grade_pct: 0 }] };
const PI = { name: 'pi', kind: 'pi', kp_pct_per_kmh: 8, ti_s: 6 };

interface Wish {
  readonly track?: object;
  readonly files?: Readonly<Record<string, string>>;
  readonly [key: string]: unknown;
}

function run({ files = {}, ...wish }: Wish): RunResult {
  const text = JSON.stringify({
    track: LEVEL,
    air: { density_kg_m3: 1.2 },
    vehicle: VEHICLE,
    hold: { set_speed_kmh: 60 },
    candidates: [PI],
    ...wish,
  });
  return runCase({
    file: 'case.json',
    read: (name) => new TextEncoder().encode(name === 'case.json' ? text : files[name]),
  });
}

const V = 60 / 3.6;
const told = ({ warnings }: RunResult, code: string) => warnings.filter((warning) => warning.code === code);
function refusal(wish: Wish) {
  try {
    run(wish);
  } catch (error) {
    if (error instanceof InputError) return error.problems[0];
    throw error;
  }
  return expect.unreachable();
}

/** A road in plan: straight 1.2 km, a circle to the right of 90 degrees, straight 1.5 km; points every 10 m. */
function roadWithBend(radius: number): string {
  const rows = ['lat_deg,lon_deg,elevation_m'];
  const bend = (radius * Math.PI) / 2;
  let [east, north] = [0, 0];
  for (let x = 0; x <= 2700 + bend; x += 10) {
    rows.push(`${(47 + north / 111169.2).toFixed(9)},${(8 + east / 76056.2).toFixed(9)},100`);
    for (let k = 0; k < 10; k++) {
      const heading = Math.min(Math.max(0, (x + k + 0.5 - 1200) / radius), Math.PI / 2);
      east += Math.sin(heading);
      north += Math.cos(heading);
    }
  }
  return rows.join('\n');
}
const BENDING = {
  track: { file: 'bend.csv' },
  road: { elevation_source: 'exact' },
  files: { 'bend.csv': roadWithBend(60) },
};

test('a rider who engages after a kilometre has ridden for a minute by hand', () => {
  const result = run({
    hold: { set_speed_kmh: 60, starts: 'by_hand' },
    rider: { does: [{ at_km: 1, act: 'engage' }] },
  });
  const [pi] = result.candidates;
  expectClose(pi!.figures.hold_off_s as number, 1000 / V, 0.1);
  const [engaged, ...more] = result.transients.shown;
  expect(more).toEqual([]);
  expect(engaged).toMatchObject({ candidate: 'pi', event: { kind: 'engaged', cause: 'rider' } });
  expectClose(engaged!.event.distance, 1000, 1);
  // What the rider holds on the level the unit goes on to hold: nothing moves.
  expectClose(pi!.figures.engage_sag_kmh as number, 0, 0.05);
  expectClose(pi!.figures.command_step_pct as number, 0, 0.2);
  expect(engaged!.words).toContain('pi takes over at km 1.00 at 60.0 km/h');
  expect(result.defaults.some(({ key }) => key === 'supervisor.tap_kmh')).toBe(true);
});

test('a servo at rest with slack before it sags as it takes over, and more than one that follows the hand', () => {
  const sag = (engages_from: string): number => {
    const { candidates } = run({
      vehicle: {
        ...VEHICLE,
        actuator: { lag_s: 0.3, slack_pct: 6, rate_limit_pct_per_s: 15, engages_from },
      },
      hold: { set_speed_kmh: 60, starts: 'by_hand' },
      rider: { does: [{ at_km: 1, act: 'engage' }] },
    });
    return candidates[0]!.figures.engage_sag_kmh as number;
  };
  expect(sag('rest')).toBeGreaterThan(sag('rider') + 0.3);
});

test('every sample of a picture is one of the run', () => {
  const result = run({
    track: {
      profile: [
        { length_m: 1500, grade_pct: 0 },
        { length_m: 1500, grade_pct: 3 },
      ],
    },
    rider: {
      does: [
        { at_km: 0.6, act: 'tap', taps: 3 },
        { at_km: 1, act: 'override', throttle_pct: 90, for_s: 4 },
        { at_km: 1.6, act: 'brake', to_kmh: 40 },
        { at_km: 1.9, act: 'resume' },
      ],
    },
    output: { series: 'full' },
  });
  const full = result.candidates[0]!.full!;
  expect(result.transients.shown.map(({ event }) => event.kind)).toEqual([
    'tapped',
    'override_ended',
    'ended',
    'resumed',
  ]);
  for (const { picture, event } of result.transients.shown) {
    expect(picture.size).toBeGreaterThan(100);
    expect(picture.size).toBeLessThanOrEqual(400);
    expect(picture.time[0]).toBeLessThan(event.time - 4);
    for (let i = 0; i < picture.size; i++) {
      const k = full.time.indexOf(picture.time[i]!);
      expect(k).toBeGreaterThanOrEqual(0);
      for (const column of ['speed', 'command', 'actuator', 'reference', 'acceleration'] as const)
        expect(picture[column][i]).toBe(full[column][k]);
    }
  }
});

test('a climb on which a rule ends hold says so, and a hold that nobody resumes is told to the end', () => {
  const result = run({
    track: {
      profile: [
        { length_m: 1500, grade_pct: 0 },
        { length_m: 900, grade_pct: 13 },
        { length_m: 1600, grade_pct: 0 },
      ],
    },
    supervisor: { too_slow: { below_set_kmh: 12, for_s: 1 } },
  });
  const [pi] = result.candidates;
  const [ended] = pi!.result.holdEvents!;
  expect(ended).toMatchObject({ kind: 'ended', cause: 'too_slow' });
  expect(pi!.figures.hold_off_events).toBe(1);
  const [hill] = result.hills;
  const [outcome] = hill!.outcomes;
  expect(outcome!.cause).toBe('torque');
  expect(outcome!.why).toContain('Hold ended by itself at km 1.7');
  expect(outcome!.why).toContain('nobody resumes it');
  // Only what was held is the candidate's: 12 km/h and what a second more took.
  expectClose(outcome!.speedChange, -13.5 / 3.6, 2 / 3.6);
  expect(told(result, 'hold-ended')).toHaveLength(1);
  expect(told(result, 'hold-not-resumed')[0]!.message).toMatch(
    /^Hold of pi is off from km 1\.7\d to the end/,
  );
  // Nothing is judged where the rider rides.
  expect(result.hills).toHaveLength(1);
});

test('the rider comes to a bend at the speed that it allows, and resumes behind it', () => {
  const result = run({ ...BENDING, rider: { bends: { max_lateral_m_s2: 2 } } });
  const { bends, candidates } = result;
  const allowed = Math.sqrt(2 * 60);
  const [bend, ...others] = bends!.bends;
  expect(others).toEqual([]);
  expect(bend!.side).toBe('right');
  expectClose(bend!.speed, allowed, 0.02 * allowed);
  const { bins, holdEvents } = candidates[0]!.result;
  expect(holdEvents!.map(({ kind, cause }) => [kind, cause])).toEqual([
    ['ended', 'bend'],
    ['resumed', 'bend'],
  ]);
  let fastest = 0;
  for (let i = 0; i < bins.size; i++)
    if (bins.edge[i]! > bend!.from && bins.edge[i + 1]! < bend!.to)
      fastest = Math.max(fastest, bins.speedMax[i]!);
  expectClose(fastest, bend!.speed, 0.1);
  // Braking at 2 m/s2 and a quarter of a turn by hand are no fault of the candidate.
  expect(candidates[0]!.figures.within_band_pct).toBeGreaterThan(80);
  expect(result.hills).toEqual([]);
});

test('a bend slower than the unit holds is a place where hold does not belong, and hold comes back behind it', () => {
  const result = run({
    ...BENDING,
    rider: { bends: { max_lateral_m_s2: 2 } },
    supervisor: { lowest_speed_kmh: 45 },
  });
  const [warning] = told(result, 'hold-does-not-belong');
  expect(warning!.message).toContain('slower than the unit holds');
  expect(warning!.from).toBeLessThan(1200);
  const { holdEvents } = result.candidates[0]!.result;
  expect(holdEvents!.map(({ kind }) => kind)).toEqual(['ended', 'resumed']);
  expectClose(holdEvents![1]!.measured, V, 1);
});

test('bends of a road that has none to be known are refused at their key', () => {
  expect(refusal({ rider: { bends: {} } })).toMatchObject({
    code: 'bends-need-track',
    place: { key: 'rider.bends' },
    found: 'a written profile',
  });
  expect(
    refusal({
      track: { file: 'a.csv' },
      files: { 'a.csv': 'distance_m,elevation_m\n0,0\n500,3\n1000,9\n1500,4\n' },
      rider: { bends: {} },
    }),
  ).toMatchObject({ code: 'bends-need-track', found: 'a track without positions or heading' });
});

test('acts and faults beyond the road are refused, and those that no run lived to see are told', () => {
  expect(refusal({ rider: { does: [{ at_km: 6, act: 'cancel' }] } })).toMatchObject({
    code: 'beyond-the-road',
    place: { key: 'rider.does.0.at_km' },
  });
  expect(refusal({ faults: [{ at_km: 7, speed_sensor: 'double', for_s: 1 }] })).toMatchObject({
    code: 'beyond-the-road',
    place: { key: 'faults.0.at_km' },
  });
  const late = run({
    rider: { does: [{ at_s: 3000, act: 'cancel' }] },
    faults: [{ at_s: 4000, speed_sensor: 'nothing', for_s: 1 }],
  });
  expect(told(late, 'act-not-reached')).toHaveLength(1);
  expect(told(late, 'fault-not-reached')).toHaveLength(1);
});

test('a sensor that shows twice the speed ends hold where it is not believed', () => {
  const result = run({
    faults: [{ at_km: 1.5, speed_sensor: 'double', for_s: 3 }],
    supervisor: { believable_m_s2: 20 },
    rider: { resumes_after_s: 8 },
  });
  const { holdEvents } = result.candidates[0]!.result;
  expect(holdEvents!.map(({ kind, cause }) => `${kind} ${cause}`)).toEqual([
    'ended sensor_not_believed',
    'resumed rider',
  ]);
  expectClose(holdEvents![0]!.distance, 1500, 1);
  expectClose(holdEvents![1]!.time - holdEvents![0]!.time, 8, 0.1);
  expect(told(result, 'hold-ended')[0]!.message).toContain('changed faster than a vehicle can');
});

test('a sensor that stands still leaves its trace, with what came of it, whether a rule ended hold or not', () => {
  const climb = [
    { length_m: 1500, grade_pct: 0 },
    { length_m: 1500, grade_pct: 4 },
  ];
  const faults = [{ at_km: 1.49, speed_sensor: 'last_value', for_s: 3 }];
  const quiet = run({ track: { profile: climb }, faults });
  const [warning, ...more] = told(quiet, 'sensor-fault');
  expect(more).toEqual([]);
  expect(warning!.place).toMatchObject({ key: 'faults.0' });
  expect(warning!.message).toMatch(
    /^The speed sensor went on showing its last speed for 3\.0 s from km 1\.49 on: pi, no rule ended hold, error from [−-]\d+\.\d km\/h to .* up to 10 s behind its end\.$/,
  );
  // Held up to here, a 4 % climb takes 0.39 m/s2 for 3 s.
  const lowest = Number(/from [−-](\d+\.\d)/.exec(warning!.message)![1]);
  expectClose(lowest, 3.6 * 0.39 * 2.4, 1.5);
  const loud = run({
    faults: [{ at_km: 1.5, speed_sensor: 'double', for_s: 3 }],
    supervisor: { believable_m_s2: 20 },
  });
  expect(told(loud, 'sensor-fault')[0]!.message).toMatch(
    /: pi, a rule ended hold 0\.\d s later, the measured/,
  );
  expect(told(run({}), 'sensor-fault')).toEqual([]);
});

test('engaging a hold that is on is told with its act and the speed that it takes', () => {
  const does = [
    { at_km: 0.5, act: 'tap', taps: 2 },
    { at_km: 0.51, act: 'engage' },
  ];
  const [warning, ...more] = told(run({ rider: { does } }), 'engage-while-on');
  expect(more).toEqual([]);
  expect(warning!.message).toMatch(
    /^Hold was on already at km 0\.51: pi takes the speed of the moment, 60\.\d km\/h, as its set speed\.$/,
  );
  expect(warning!.place).toMatchObject({ key: 'rider.does.1' });
  const silent = [
    { hold: { set_speed_kmh: 60, starts: 'by_hand' }, rider: { does: [{ at_km: 1, act: 'engage' }] } },
    {
      rider: {
        does: [
          { at_km: 0.5, act: 'cancel' },
          { at_km: 1, act: 'engage' },
        ],
      },
    },
    {
      rider: {
        does: [
          { at_km: 0.5, act: 'override', throttle_pct: 90, for_s: 60 },
          { at_km: 0.6, act: 'engage' },
        ],
      },
    },
  ];
  for (const wish of silent) expect(told(run(wish), 'engage-while-on')).toEqual([]);
});

test('a requirement of the transients is judged, also in the combinations of a matrix', () => {
  const result = run({
    hold: { set_speed_kmh: 60, starts: 'by_hand' },
    rider: {
      does: [
        { at_km: 0.5, act: 'engage' },
        { at_km: 2, act: 'brake', to_kmh: 40 },
        { at_km: 2.4, act: 'resume' },
      ],
    },
    requirements: [
      { id: 'A', figure: 'engage_sag_kmh', at_most: 1 },
      { id: 'B', figure: 'resume_settling_s', at_most: 1 },
      { id: 'C', figure: 'resume_settling_s', at_most: 1, where: { from_km: 3, to_km: 4 } },
    ],
    matrix: { loads: ['own', 'two_up'] },
  });
  expect(result.requirements.map(({ verdict }) => verdict)).toEqual(['met', 'not met', 'not judged']);
  const own = result.matrix!.cells.find((cell) => cell.own)!;
  expect(own.findings).toEqual(result.requirements);
  for (const { findings } of result.matrix!.cells)
    expect(findings.map(({ verdict }) => verdict)).toEqual(['met', 'not met', 'not judged']);
});

test('whatever is written of rider, unit and sensor runs to an end that has its reason', () => {
  const random = seededStream(20_261_201);
  const pick = <T>(list: readonly T[]): T => list[Math.floor(random.uniform() * list.length)]!;
  const between = (low: number, high: number): number => low + (high - low) * random.uniform();
  const maybe = <T extends object>(some: T): T | object => (random.uniform() < 0.5 ? some : {});
  const act = (at_km: number) => ({
    at_km,
    ...pick([
      () => ({ act: 'engage' }),
      () => ({ act: 'resume' }),
      () => ({ act: 'tap', taps: pick([-30, -3, 1, 12]) }),
      () => ({ act: 'override', throttle_pct: between(0, 100), for_s: between(0.1, 20) }),
      // biome-ignore lint/suspicious/noThenProperty: a key of the file, never a promise
      () => ({ act: 'cancel', ...maybe({ then: pick(['holds_speed', 'coasts']) }) }),
      () => ({ act: 'brake', to_kmh: between(20, 80), brake_m_s2: between(0.5, 8) }),
      () => ({ act: 'ride', to_kmh: between(30, 80) }),
      () => ({ act: 'clutch', for_s: between(0.2, 4) }),
    ])(),
  });
  for (let k = 0; k < 12; k++) {
    const places = Array.from({ length: 1 + Math.floor(between(0, 8)) }, () => between(0, 2.9)).sort(
      (a, b) => a - b,
    );
    const result = run({
      track: {
        profile: [
          { length_m: 1000, grade_pct: between(-6, 6) },
          { length_m: 1000, grade_pct: between(-10, 10) },
          { length_m: 1000, grade_pct: between(-6, 6) },
        ],
      },
      vehicle: {
        ...VEHICLE,
        ...maybe({ drive: ENGINE }),
        ...maybe({ actuator: { lag_s: 0.1, slack_pct: 3, engages_from: pick(['rest', 'rider']) } }),
      },
      hold: { set_speed_kmh: 60, starts: pick(['engaged', 'engaged', 'by_hand']) },
      supervisor: {
        ...maybe({ lowest_speed_kmh: 35 }),
        ...maybe({ too_slow: { below_set_kmh: between(3, 25) } }),
        ...maybe({ too_fast: { above_set_kmh: between(3, 25), for_s: 0 } }),
        believable_m_s2: between(10, 200),
        ...maybe({ override: { integral: 'runs', reentry_kmh: between(0.1, 5) } }),
      },
      rider: {
        does: [...places.map(act), { at_km: 2.95, act: 'engage' }],
        ...maybe({ resumes_after_s: between(0, 20) }),
        ...maybe({ brakes_above_kmh: 8 }),
      },
      faults: pick([[], [{ at_km: 0.7, speed_sensor: pick(['nothing', 'last_value', 'double']), for_s: 2 }]]),
      candidates: [{ kind: 'locked' }, PI],
      requirements: [{ id: 'A', figure: 'recovery_s', at_most: 10 }],
    });
    for (const { result: ridden, figures } of result.candidates) {
      expect(['completed', 'stalled', 'stopped']).toContain(ridden.status);
      expect(ridden.ledger.residual).toBeLessThan(1e-6);
      for (const figure of Object.values(figures))
        if (typeof figure === 'number') expect(figure).not.toBeNaN();
    }
    for (const { words, picture } of result.transients.shown) {
      expect(words).not.toMatch(/NaN|undefined|Infinity/);
      expect(picture.size).toBeGreaterThan(0);
    }
  }
});
