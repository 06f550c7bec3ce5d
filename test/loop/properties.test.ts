import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { ControllerSetup } from '../../src/control/setup.ts';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import { constantEfficiencyMap } from '../../src/vehicle/power-map.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { forceOf, planOver, roadOver } from './scenes.ts';

const number = (min: number, max: number): fc.Arbitrary<number> => fc.double({ min, max, noNaN: true });

/** Steps, kinks and knots in one place; grades to 20 %, wind to 12 m/s. */
const road = fc
  .array(
    fc.record({
      length: fc.oneof(fc.constant(0), number(0.2, 80)),
      grade: number(-0.2, 0.2),
      wind: number(-12, 12),
      side: number(-6, 6),
    }),
    {
      minLength: 5,
      maxLength: 40,
    },
  )
  .chain((knots) => fc.boolean().map((calm) => ({ knots, calm })))
  .map(({ knots, calm }) => {
    const station = new Float64Array(knots.length + 1);
    knots.forEach((knot, i) => {
      station[i + 1] = station[i]! + knot.length;
    });
    station[knots.length] = station[knots.length]! + 100;
    const made = roadOver(station);
    knots.forEach((knot, i) => {
      made.grade[i] = knot.grade;
      made.headwind[i] = knot.wind;
      made.crosswind[i] = calm ? 0 : knot.side;
    });
    return made;
  });

/** An electric drive with regeneration below throttle 0: two throttle cells, three speed cells. */
function electric(peak: number, power: number, regeneration: number, lag: number): Drive {
  const corner = power / peak;
  const cells = [
    [0, -5, 0, regeneration / 3, 0, 0],
    [0, -5, peak, 5, 0, 0],
    [-15, 0, regeneration, 0, 0, 0],
    [-15, 0, peak + 15, 0, 0, 0],
    [-15, 0, regeneration, 0, 0, 0],
    [-15, 0, 15, 0, 0, power],
  ];
  return {
    ...forceOf({ peakForce: peak, lag }),
    kind: 'electric',
    speedEdges: Float64Array.of(3, corner),
    throttleEdges: Float64Array.of(0),
    cells: Float64Array.from(cells.flat()),
    throttleMin: -1,
    source: {
      kind: 'battery' as const,
      map: constantEfficiencyMap(0.85, 0.6),
      capacity: null,
      charge: 1,
      reserve: 0,
      sag: null,
      acceptance: null,
      heating: null,
    },
  };
}

const lag = fc.oneof(fc.constant(0), number(0.01, 0.5));
const vehicle: fc.Arbitrary<Vehicle> = fc
  .record({
    mass: number(90, 400),
    rotating: number(0, 20),
    cda: number(0.2, 0.9),
    yawGain: number(0, 2),
    c0: number(0.005, 0.03),
    c2: number(0, 1e-5),
    peak: number(150, 900),
    power: number(4000, 30_000),
    hold: number(0, 150),
    lag,
    actuatorLag: lag,
    rateLimit: fc.option(number(0.1, 5)),
    filter: lag,
    delay: fc.oneof(fc.constant(0), number(0.001, 0.3)),
    battery: fc.boolean(),
  })
  .map((v) => ({
    name: 'random',
    mass: v.mass,
    payload: 0,
    rotatingMass: v.rotating,
    roadLoad: { cda: v.cda, yawGain: v.yawGain, yawTable: null, c0: v.c0, c1: 0, c2: v.c2 },
    drive: v.battery
      ? electric(v.peak, v.power, v.hold, v.lag)
      : forceOf({ peakForce: v.peak, peakPower: v.power, closedThrottleForce: v.hold, lag: v.lag }),
    actuator: { ...IDEAL_ACTUATOR, lag: v.actuatorLag, rateLimit: v.rateLimit },
    sensor: { ...IDEAL_SENSOR, filter: v.filter, delay: v.delay, scaleError: 0 },
    traction: null,
  }));

const controller: fc.Arbitrary<ControllerSetup> = fc.oneof(
  fc.record({
    kind: fc.constant('locked' as const),
    throttle: fc.oneof(fc.constant('level' as const), number(0, 1)),
  }),
  fc.record({
    kind: fc.constant('pi' as const),
    kp: number(0, 1),
    ki: number(0, 0.3),
    setpointWeight: number(0, 1),
    sample: fc.constantFrom(0.01, 0.02, 0.05, 0.1, 0.5),
    computingDelay: fc.constantFrom(0, 0.01),
    integration: fc.constantFrom('forward' as const, 'backward' as const),
    antiWindup: fc.constantFrom(
      { kind: 'none' as const },
      { kind: 'conditional' as const },
      { kind: 'back_calculation' as const, trackingTime: 2 },
    ),
    ramp: fc.option(number(0.1, 2)),
    design: fc.constant(null),
  }),
);

const plan: fc.Arbitrary<LoopPlan> = fc
  .record({
    road,
    vehicle,
    controller,
    speed: number(4, 35),
    brakes: fc.option(number(0.5, 4)),
    scheme: fc.constantFrom('exact' as const, 'fast' as const),
  })
  .map((r) =>
    planOver(r.road, r.vehicle, {
      controller: r.controller,
      hold: {
        setSpeed: r.speed,
        setSpeedIs: 'true_speed',
        startSpeed: r.speed,
        changes: [{ at: { distance: 80 }, setSpeed: r.speed + 1, ramp: null }],
      },
      rider: { brakesAbove: r.brakes, shifts: [] },
      scheme: r.scheme,
      bin: 25,
      timeLimit: 900,
    }),
  );

test('over random roads, vehicles and controllers: energy closes, every number is finite, a run ends in one of its ways', () => {
  fc.assert(
    fc.property(plan, (p) => {
      const result = runLoop(p);
      expect(['completed', 'stopped', 'time_limit']).toContain(result.status);
      // The exact scheme's works are quadratures of fourth order, here over walls, gusts and seconds between samples,
      // and over the kink where the rider's brake comes on.
      const bound = p.scheme === 'fast' ? 1e-12 : result.ledger.brake > 0 ? 1e-6 : 1e-8;
      expect(result.ledger.residual).toBeLessThan(bound);
      for (const value of Object.values(result.bins))
        if (value instanceof Float64Array) expect(value.every(Number.isFinite)).toBe(true);
      for (const point of result.checkpoints) expect(point.state.every((v) => !Number.isNaN(v))).toBe(true);
      const time = result.bins.time.reduce((a, b) => a + b, 0);
      expect(Math.abs(time - result.endTime)).toBeLessThan(1e-6);
      for (let i = 0; i < result.bins.size; i++) {
        expect(result.bins.throttleMin[i]).toBeGreaterThanOrEqual(p.vehicle.drive.throttleMin - 1e-12);
        expect(result.bins.throttleMax[i]).toBeLessThanOrEqual(p.vehicle.drive.throttleMax + 1e-12);
        expect(result.bins.speedMin[i]).toBeLessThanOrEqual(result.bins.speedMax[i]!);
        expect(result.bins.timeInBand[i]).toBeLessThanOrEqual(result.bins.time[i]! + 1e-12);
      }
      if (result.status === 'completed') expect(result.endDistance).toBe(p.road.distance[p.road.size - 1]);
    }),
    { seed: 20_240_611, numRuns: 100, endOnFailure: true },
  );
});

test('the two schemes tell the same story', () => {
  fc.assert(
    fc.property(plan, (p) => {
      const exact = replay({ ...p, scheme: 'exact' }, { settledAt: 0 }, 1e9);
      const fast = replay({ ...p, scheme: 'fast' }, { settledAt: 0 }, 1e9);
      const rows = Math.min(exact.series.size, fast.series.size, 300);
      // Steps of grade up to 40 % and knots centimetres apart: far beyond the roads for which 2e-5 m/s is promised.
      for (let i = 0; i < rows; i += 10)
        expect(Math.abs(exact.series.speed[i]! - fast.series.speed[i]!)).toBeLessThan(0.05);
    }),
    { seed: 7, numRuns: 40, endOnFailure: true },
  );
});
