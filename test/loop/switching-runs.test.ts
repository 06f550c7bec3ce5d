import fc from 'fast-check';
import { beforeEach, describe, expect, test, vi } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import type { LoopResult } from '../../src/loop/result.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import type { Battery } from '../../src/vehicle/energy-source.ts';
import { IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { forceOf, planOver, roadOver, stations } from './scenes.ts';
import { belt, CUT, clutch, engine, switching } from './switching-scenes.ts';

const battery: Battery = {
  kind: 'battery',
  map: {
    shaftSpeed: Float64Array.of(0, 1),
    torque: Float64Array.of(-1, 0, 1),
    power: Float64Array.of(40, 40, 40, 40 - 0.7, 40, 40 + 1.2),
    least: Number.NEGATIVE_INFINITY,
  },
  capacity: 6e5,
  charge: 0.9,
  reserve: 0.1,
  sag: { charge: Float64Array.of(0.2, 0.8), share: Float64Array.of(0.7, 1) },
  acceptance: { charge: Float64Array.of(0.8, 0.95), share: Float64Array.of(1, 0.1) },
  heating: { continuousPower: 2500, time: 40, onset: 0.5, least: 0.6 },
};

/** F = -10 + x 600 N and x 200 N below 0; all of it but the drag is lost where the factor falls. */
const electric: Drive = {
  ...forceOf({ peakForce: 590, lag: 0.05 }),
  kind: 'electric',
  throttleEdges: Float64Array.of(0),
  cells: Float64Array.of(-10, 0, 200, 0, 0, 0, -10, 0, 600, 0, 0, 0),
  losses: Float64Array.of(0, 0, 200, 0, 0, 0, 0, 0, 600, 0, 0, 0),
  throttleMin: -1,
  source: battery,
  regenerationForce: 210,
};

const automatic = {
  kind: 'automatic',
  throttle: Float64Array.of(0.1, 0.9),
  upSpeed: Float64Array.of(320, 430),
  downSpeed: Float64Array.of(225, 300),
  gap: 0.25,
  dwell: 1.5,
} as const;

const pulses = { spacing: 0.04, reading: { kind: 'counted', window: 0.1 } } as const;
const belted = engine(0, { gears: [{ ratio: 34, inertia: 0.02 * 34 * 34 }], gear: 0, belt });
const rough = { slack: 0.02, resolution: 0.005, rateLimit: 1, deadTime: 0.03 };
const vehicles: readonly [string, Vehicle][] = [
  ['slack, steps, rate limit and dead time', switching(engine(0), rough)],
  ['fuel cut and a clutch', switching(engine(CUT, { gearbox: clutch }), { slack: 0.02 })],
  ['an automatic gearbox', switching(engine(CUT, { gearbox: automatic }), rough)],
  ['a belt', switching(belted, { slack: 0.01 })],
  [
    'a belt behind a sensor with pulses',
    { ...switching(belted), sensor: { ...IDEAL_SENSOR, pulses, filter: 0.05 } },
  ],
  ['a battery', switching(electric, { resolution: 0.01 })],
];

const mountain = roadOver(stations(2500, 25), {
  grade: (s) => 0.07 * Math.sin(s / 160) - 0.01,
  headwind: (s) => 2 + Math.sin(s / 300),
});
const shifts = [300, 700, 1100, 1600, 2100].map((distance, k) => ({ distance, gear: [0, 1, 2, 1, 2][k]! }));
const over = (vehicle: Vehicle, scheme: LoopPlan['scheme']): LoopPlan =>
  planOver(mountain, vehicle, { scheme, rider: { brakesAbove: 1.5, shifts } });

describe.each(['exact', 'fast'] as const)('a run (%s)', (scheme) => {
  test.each(vehicles)('goes on from any checkpoint bit for bit: %s', (_, vehicle) => {
    const plan = over(vehicle, scheme);
    const result = runLoop(plan);
    expect(result.status).toBe('completed');
    const all = replay(plan, result.checkpoints[0]!, 1e9).series;
    expect(all.size).toBe(Math.ceil(result.endTime / 0.02 - 1e-9));
    for (const point of result.checkpoints.slice(1)) {
      const rest = replay(plan, point, 1e9).series;
      const from = all.size - rest.size;
      for (const key of ['speed', 'measured', 'actuator', 'command', 'shaftSpeed', 'gear', 'limit'] as const)
        expect(rest[key]).toEqual(all[key].slice(from));
    }
  });

  test.each(vehicles)('closes its account of energy: %s', (_, vehicle) => {
    const { ledger, bins } = runLoop(over(vehicle, scheme));
    expect(ledger.residual).toBeLessThan(1e-9);
    const sum = (column: Float64Array): number => column.reduce((all, one) => all + one, 0);
    const most = ledger.drive - ledger.regeneration;
    expect(Math.abs(sum(bins.driveWork) - ledger.drive)).toBeLessThan(1e-10 * most);
    if (ledger.drawn !== null) expect(Math.abs(sum(bins.drawn) - ledger.drawn)).toBeLessThan(1e-10 * most);
    for (let k = 0; k < bins.size; k++) {
      expect(bins.driveForceMin[k]!).toBeLessThanOrEqual(bins.driveForceMax[k]!);
      expect(bins.timeShift[k]!).toBeLessThanOrEqual(bins.time[k]! + 1e-9);
    }
  });
});

test('shifts take from the kinetic energy what is left over in the account without them', () => {
  const { ledger } = runLoop(over(vehicles[1]![1], 'exact'));
  const { drive, regeneration, aero, rolling, climb, brake, kinetic } = ledger;
  expect(Math.abs(ledger.shifts)).toBeGreaterThan(10);
  const others = drive + regeneration - aero - rolling - climb - brake - kinetic;
  expect(Math.abs(others - ledger.shifts)).toBeLessThan(1e-9 * drive);
});

test('a belt that lets the engine turn faster takes it from the speed', () => {
  // Level road, no drag, no force: the throttle locked wide open asks for 420 rad/s, the start at rest of the belt for
  // less. With the drive's own force at zero only kinetic energy is exchanged.
  const still: Drive = { ...belted, cells: new Float64Array(belted.cells.length) };
  const smooth = {
    ...switching(still),
    roadLoad: { ...switching(still).roadLoad, cda: 0, c0: 0, c1: 0, c2: 0 },
  };
  const plan = planOver(roadOver(stations(100, 100)), smooth, {
    controller: { kind: 'locked', throttle: 0.8 },
    hold: { setSpeed: 17, setSpeedIs: 'true_speed', startSpeed: 17, changes: [] },
  });
  const start = runLoop(plan).checkpoints[0]!;
  const lower = { ...plan, controller: { kind: 'locked', throttle: 0.1 } as const };
  const { series } = replay(lower, start, 90);
  const energy = (v: number, w: number): number => (smooth.mass + smooth.rotatingMass) * v * v + 0.02 * w * w;
  const first = energy(series.speed[0]!, series.shaftSpeed[0]!);
  expect(series.shaftSpeed[0]!).toBeGreaterThan(400);
  expect(series.shaftSpeed[series.size - 1]!).toBeLessThan(260);
  for (let k = 0; k < series.size; k++)
    expect(Math.abs(energy(series.speed[k]!, series.shaftSpeed[k]!) / first - 1)).toBeLessThan(1e-12);
});

test.each([-1, 1.5, 3])('a plan that shifts to gear %s of three is refused', (gear) => {
  const plan = over(vehicles[1]![1], 'exact');
  const rider = { brakesAbove: null, shifts: [{ distance: 100, gear }] };
  expect(() => runLoop({ ...plan, rider })).toThrow(expect.objectContaining({ code: 'out-of-range' }));
});

test.each([[[Number.NaN]], [[Number.POSITIVE_INFINITY]], [[100, 400, 300]]])(
  'a plan whose shifts have no places in order along the way is refused: %s',
  (places) => {
    const rider = { brakesAbove: null, shifts: places.map((distance) => ({ distance, gear: 0 })) };
    const key = `rider.shifts[${places.length - 1}].distance`;
    expect(() => runLoop({ ...over(vehicles[1]![1], 'exact'), rider })).toThrow(
      expect.objectContaining({
        problems: [expect.objectContaining({ code: 'out-of-range', place: { key } })],
      }),
    );
  },
);

test('over random vehicles that switch: energy closes, every number is finite', () => {
  const number = (min: number, max: number) => fc.double({ min, max, noNaN: true });
  const anyDrive = fc.constantFrom(
    engine(0),
    engine(CUT, { gearbox: clutch }),
    engine(CUT, { gearbox: automatic }),
    engine(0, { stallSpeed: 120, gear: 2 }),
    belted,
    electric,
  );
  fc.assert(
    fc.property(
      anyDrive,
      number(0, 0.1),
      fc.constantFrom(0, 0.004, 0.05),
      number(0, 0.2),
      fc.constantFrom(null, 0.2, 3),
      number(-0.12, 0.12),
      fc.constantFrom('exact' as const, 'fast' as const),
      (drive, slack, resolution, lag, rateLimit, grade, scheme) => {
        const vehicle = switching(drive, { slack, resolution, lag, rateLimit });
        const road = roadOver(stations(900, 30), { grade: (s) => grade * Math.sin(s / 60) });
        const rider = { brakesAbove: null, shifts };
        const { ledger, bins, status } = runLoop(planOver(road, vehicle, { scheme, rider }));
        expect(['completed', 'stopped', 'stalled']).toContain(status);
        expect(ledger.residual).toBeLessThan(1e-9);
        for (const column of Object.values(bins))
          if (column instanceof Float64Array) expect(column.every(Number.isFinite)).toBe(true);
      },
    ),
    { numRuns: 60, seed: 11 },
  );
});

describe('no state is left behind by a run', () => {
  beforeEach(() => vi.resetModules());
  test('two runs one after the other are two runs of fresh modules, bit for bit', async () => {
    const plans = vehicles.map(([, vehicle], k) => over(vehicle, k % 2 === 0 ? 'exact' : 'fast'));
    const fresh: LoopResult[] = [];
    for (const plan of plans) {
      vi.resetModules();
      const { runLoop: once } = await import('../../src/loop/run-loop.ts');
      fresh.push(once(plan));
    }
    plans.forEach((plan, k) => {
      expect(runLoop(plan)).toEqual(fresh[k]);
    });
    plans.toReversed().forEach((plan, k) => {
      expect(runLoop(plan)).toEqual(fresh[plans.length - 1 - k]);
    });
  });
});
