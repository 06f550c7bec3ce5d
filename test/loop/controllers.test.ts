import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { FeedforwardSetup, PidSetup } from '../../src/control/setup.ts';
import { nearestCheckpoint, replay } from '../../src/loop/replay.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { expectClose } from '../compare.ts';
import { plainInteger, plainPid } from '../control/players.ts';
import { readReference } from '../read-reference.ts';
import { raisedCosines, type WrittenHill } from './raised-cosines.ts';
import { forceOf, laggedVehicle, planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const G = 9.80665;
const { route } = readReference<{ route: WrittenHill[] }>('loop/motorcycle_route_a.json');
// Route A of the reference solutions: four hills of up to 5 %, headwind 5 m/s, 260 kg, 900 N, 25 m/s.
const road = roadOver(stations(4000, 2), { grade: raisedCosines(route), headwind: () => 5 });
const AIR = { grade: 0, headwind: 5, crosswind: 0, airDensity: 1.2, airTemperature: 288.15 };
const at50Hz: PidSetup = {
  ...plainPid,
  kp: 0.15,
  ki: 0.03,
  sample: 0.02,
  form: { kind: 'positional', antiWindup: { kind: 'conditional' } },
};
const knowing = (feedforward: FeedforwardSetup): PidSetup => ({
  ...at50Hz,
  model: { mass: 260, surroundings: AIR },
  feedforward,
});
const hold = { setSpeed: 25, setSpeedIs: 'true_speed', startSpeed: 25, changes: [] } as const;

/** Greatest distance from the set speed over route A [km/h]. */
function worst(controller: PidSetup, vehicle = referenceMotorcycle): number {
  const { bins, status } = runLoop(planOver(road, vehicle, { controller, hold }));
  expect(status).toBe('completed');
  return 3.6 * Math.max(...bins.errorMax, ...bins.errorMin.map((e) => -e));
}

describe('feedforward with a perfect model over the reference hills', () => {
  test('holds within 0.1 km/h from the known road, looking ahead by the drive’s lag', () => {
    const preview = knowing({ drag: true, grade: { kind: 'known_road', preview: 0.26 } });
    expect(worst(preview)).toBeLessThan(0.1);
    // Gravity along the slope changes by up to 0.012 m/s2 in the lag of 0.25 s: without preview it costs more.
    expect(worst(knowing({ drag: true, grade: { kind: 'known_road', preview: 0 } }))).toBeGreaterThan(
      2 * worst(preview),
    );
    expect(worst(at50Hz)).toBeGreaterThan(0.5);
  });

  test('holds within 0.1 km/h by P alone, so that it is the feedforward that holds', () => {
    const controller = { ...knowing({ drag: true, grade: { kind: 'known_road', preview: 0.26 } }), ki: 0 };
    expect(worst(controller)).toBeLessThan(0.1);
  });

  test('holds from an accelerometer about as well as its filter is short', () => {
    const sensed = (filter: number, pitchError = 0) =>
      knowing({ drag: true, grade: { kind: 'accelerometer', filter, pitchError } });
    expect(worst(sensed(0.05))).toBeLessThan(0.25);
    expect(worst(sensed(2))).toBeGreaterThan(worst(sensed(0.3)));
    // The integral takes up a constant error of the mounting: it starts settled, and stays where it was.
    expectClose(worst(sensed(0.3, 0.02)), worst(sensed(0.3)), 0.01);
  });

  test('saturates behind the feedforward: a range that it fills does not wind the integral up', () => {
    const steep = roadOver(stations(3000, 5), {
      grade: (s) => (s > 500 && s < 1500 ? 0.3 : 0),
      headwind: () => 5,
    });
    for (const kind of ['conditional', 'clamping'] as const) {
      const controller: PidSetup = {
        ...knowing({ drag: true, grade: { kind: 'known_road', preview: 0.26 } }),
        form: { kind: 'positional', antiWindup: { kind } },
      };
      const plan = planOver(steep, referenceMotorcycle, { controller, hold });
      const { series } = replay(plan, { settledAt: 0 }, 1400);
      const last = series.size - 1;
      expect(series.command[last]!).toBeGreaterThan(1);
      expect(series.integral[last]!).toBeLessThan(0.1);
    }
  });
});

describe('the disturbance observer', () => {
  test('leaves a speed lost of D Tq (1 - exp(-t / Tq)) after a step of D, as in closed form', () => {
    // No road load, F = u 1000 N, 200 kg, no lags. The observer alone (kp = ki = 0) takes a constant push D back by
    // 1 - exp(-t / Tq): dv/dt = -D exp(-t / Tq).
    const bare = {
      ...referenceMotorcycle,
      mass: 200,
      roadLoad: { ...referenceMotorcycle.roadLoad, cda: 0, c0: 0 },
      drive: { ...forceOf({ peakForce: 1000 }), throttleMin: -1 },
    };
    const tq = 0.8;
    const controller: PidSetup = {
      ...plainPid,
      kp: 0,
      ki: 0,
      sample: 0.001,
      model: { mass: 200, surroundings: { ...AIR, headwind: 0 } },
      observerFilter: tq,
    };
    const grade = 0.02;
    const timed = roadOver(Float64Array.of(0, 1, 1, 9), {}, { speed: 20 });
    timed.grade.set([0, 0, grade, grade]);
    const plan = planOver(timed, bare, { controller, hold: { ...hold, setSpeed: 20, startSpeed: 20 } });
    const { series } = replay(plan, { settledAt: 0 }, Number.POSITIVE_INFINITY);
    const push = (G * grade) / Math.sqrt(1 + grade * grade);
    for (const t of [0.5, 1, 2, 5]) {
      const i = series.time.findIndex((time) => time >= 1 + t - 1e-9);
      // A sample of hold and difference: 1.5 ms of D at most.
      expectClose(20 - series.speed[i]!, push * tq * (1 - Math.exp(-t / tq)), 2e-3 * push);
    }
  });

  test('halves what a hill costs, and its closed form says by how much more with a shorter filter', () => {
    const observing = (observerFilter: number): PidSetup => ({
      ...at50Hz,
      model: { mass: 260, surroundings: AIR },
      observerFilter,
    });
    expect(worst(observing(1))).toBeLessThan(0.5 * worst(at50Hz));
    expect(worst(observing(0.8))).toBeLessThan(worst(observing(1.6)));
  });
});

test('a checkpoint holds all that any controller remembers: a replay from it is the run, bit for bit', () => {
  const controllers = [
    { ...at50Hz, form: { kind: 'velocity' }, kd: 0.02, derivativeFilter: 0.1 },
    knowing({ drag: true, grade: { kind: 'accelerometer', filter: 0.3, pitchError: 0.01 } }),
    {
      ...knowing({ drag: false, grade: { kind: 'known_road', preview: 1 } }),
      observerFilter: 1,
      rateLimit: 0.5,
    },
    { ...plainInteger, sample: 0.02, integralOf: 'errors', wordBits: 32 },
  ] as const;
  for (const controller of controllers)
    for (const scheme of ['exact', 'fast'] as const) {
      const lagged = {
        ...referenceMotorcycle,
        sensor: laggedVehicle.sensor,
        actuator: laggedVehicle.actuator,
      };
      const plan = planOver(road, lagged, { controller: controller as PidSetup, hold, scheme });
      const whole = replay(plan, { settledAt: 0 }, 3300).series;
      const part = replay(plan, nearestCheckpoint(runLoop(plan), 2500), 3300).series;
      expect(part.size).toBeGreaterThan(500);
      expect(part.command).toEqual(whole.command.slice(whole.size - part.size));
      expect(part.speed).toEqual(whole.speed.slice(whole.size - part.size));
    }
});

test('both schemes agree about every kind, within what the fast one is good for', () => {
  for (const controller of [
    { ...at50Hz, form: { kind: 'velocity' } } as PidSetup,
    knowing({ drag: true, grade: { kind: 'accelerometer', filter: 0.3, pitchError: 0 } }),
    { ...at50Hz, model: { mass: 260, surroundings: AIR }, observerFilter: 1 } as PidSetup,
  ]) {
    const run = (scheme: 'exact' | 'fast') =>
      runLoop(planOver(road, referenceMotorcycle, { controller, hold, scheme }));
    const exact = run('exact').bins.speedMean;
    expectClose(run('fast').bins.speedMean, exact, 2e-4);
  }
});

test('a run tells the slips of its controller: how often, and where first', () => {
  // Summed errors capped in the wrong unit: 100 of km/h s times ki 0.03 leaves most of the range, 5 does not.
  const cap = (kmhS: number): PidSetup => ({
    ...at50Hz,
    form: { kind: 'positional', antiWindup: { kind: 'cap', cap: kmhS / 3.6, of: 'summed_error' } },
  });
  const run = (controller: PidSetup) => runLoop(planOver(road, referenceMotorcycle, { controller, hold }));
  expect(run(cap(100)).bites).toEqual([]);
  const [bite] = run(cap(50)).bites;
  expect(bite).toMatchObject({ bite: 'integral_cap' });
  // The first hill begins at 400 m; until there the integral stands at 0.4025, and the cap is at 0.417.
  expect(bite!.distance).toBeGreaterThanOrEqual(400);
  expect(bite!.distance).toBeLessThan(700);
  expect(bite!.samples).toBeGreaterThan(10);
});

test('limits hold and nothing fails over random hills, whatever the controller is made of', () => {
  const grades = fc.array(fc.double({ min: -0.12, max: 0.12, noNaN: true }), { minLength: 3, maxLength: 8 });
  const setups = fc.record({
    kd: fc.constantFrom(0, 0.05),
    form: fc.constantFrom<PidSetup['form']>(
      { kind: 'velocity' },
      { kind: 'positional', antiWindup: { kind: 'clamping' } },
    ),
    rateLimit: fc.constantFrom(null, 0.5),
    deadBand: fc.constantFrom(null, { halfWidth: 0.1, integratesInside: false }),
    observerFilter: fc.constantFrom(null, 1),
    feedforward: fc.constantFrom<FeedforwardSetup>(
      { drag: true, grade: { kind: 'accelerometer', filter: 0.3, pitchError: 0.01 } },
      { drag: false, grade: { kind: 'known_road', preview: 0.5 } },
    ),
  });
  fc.assert(
    fc.property(grades, setups, fc.constantFrom('exact', 'fast'), (steps, part, scheme) => {
      const hilly = roadOver(stations(200 * steps.length, 10), {
        grade: (s) => steps[Math.min(Math.floor(s / 200), steps.length - 1)]!,
      });
      const controller: PidSetup = {
        ...at50Hz,
        derivativeFilter: 0.1,
        model: { mass: 240, surroundings: AIR },
        ...part,
      };
      const { status, bins, ledger } = runLoop(planOver(hilly, laggedVehicle, { controller, scheme }));
      expect(['completed', 'stopped']).toContain(status);
      expect(Math.max(...bins.throttleMax)).toBeLessThanOrEqual(1);
      expect(Math.min(...bins.throttleMin)).toBeGreaterThanOrEqual(0);
      expect(Math.abs(ledger.residual)).toBeLessThan(1e-6);
    }),
    { seed: 13, numRuns: 25 },
  );
});
