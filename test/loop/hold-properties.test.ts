// Whatever the rider does, and whatever the sensor and the rules: what must hold of every run.

import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { ControllerSetup } from '../../src/control/setup.ts';
import type { SupervisorSetup } from '../../src/control/supervisor-setup.ts';
import type { LoopPlan, RiderAct, RiderDeed, RoutePlace, SensorFault } from '../../src/loop/plan.ts';
import { LIMIT_OFF, LIMIT_OVERRIDE } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { traceSpeeds } from '../../src/loop/trace-speeds.ts';
import { IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { plainPid } from '../control/players.ts';
import { patientUnit, ride, SAMPLE } from './hold-scenes.ts';
import { forceOf, laggedVehicle, planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const LENGTH = 2200;
const number = (min: number, max: number): fc.Arbitrary<number> => fc.double({ min, max, noNaN: true });

const geared: Vehicle = {
  ...referenceMotorcycle,
  drive: {
    ...forceOf({ peakForce: 60, closedThrottleForce: 8 }),
    kind: 'engine',
    gears: [20, 14, 10].map((ratio) => ({ ratio, inertia: 0.1 * ratio * ratio })),
    gear: 2,
    gearbox: { kind: 'clutch', open: 0.3, resume: 0.5 },
  },
};
const automatic: Vehicle = {
  ...geared,
  drive: {
    ...geared.drive,
    gear: 1,
    gearbox: {
      kind: 'automatic',
      throttle: Float64Array.of(0, 1),
      upSpeed: Float64Array.of(230, 320),
      downSpeed: Float64Array.of(140, 190),
      gap: 0.3,
      dwell: 1.5,
    },
  },
};
/** Regenerates below throttle 0 with up to 200 N. */
const electric: Vehicle = {
  ...laggedVehicle,
  drive: {
    ...forceOf({ peakForce: 500, lag: 0.1 }),
    kind: 'electric',
    throttleEdges: Float64Array.of(0),
    cells: Float64Array.of(0, 0, 200, 0, 0, 0, 0, 0, 500, 0, 0, 0),
    losses: new Float64Array(12),
    throttleMin: -1,
    regenerationForce: 200,
  },
};
const vehicles: readonly Vehicle[] = [
  automatic,
  electric,
  referenceMotorcycle,
  laggedVehicle,
  geared,
  { ...laggedVehicle, actuator: { ...laggedVehicle.actuator, slack: 0.04, engagesFrom: 'rest' } },
];
const sensed: Vehicle = {
  ...laggedVehicle,
  sensor: {
    ...IDEAL_SENSOR,
    pulses: { spacing: 0.6, reading: { kind: 'timed', clock: 1e-5 } },
    noise: { sd: 0.03, seed: 2 },
  },
};
const controllers: readonly ControllerSetup[] = [
  planOver(roadOver(stations(100, 50)), referenceMotorcycle).controller,
  {
    ...plainPid,
    kp: 0.12,
    ki: 0.02,
    kd: 0.02,
    derivativeFilter: 0.2,
    sample: SAMPLE,
    form: { kind: 'velocity' },
    ramp: 1,
  },
  { kind: 'locked', throttle: 'level' },
];

const deed: fc.Arbitrary<RiderDeed> = fc.oneof(
  fc.constant<RiderDeed>({ kind: 'engage' }),
  fc.constant<RiderDeed>({ kind: 'resume' }),
  fc.constant<RiderDeed>({ kind: 'resume' }),
  fc.integer({ min: -4, max: 4 }).map((taps): RiderDeed => ({ kind: 'tap', taps })),
  fc
    .record({ throttle: number(0, 1), for: number(0.1, 8) })
    .map((grip): RiderDeed => ({ kind: 'override', ...grip })),
  fc
    .constantFrom('holds_speed' as const, 'coasts' as const)
    .map((then): RiderDeed => ({ kind: 'cancel', then })),
  fc
    .record({ to: number(8, 20), deceleration: number(0.3, 3) })
    .map((to): RiderDeed => ({ kind: 'brake', ...to })),
  fc
    .record({ to: number(12, 20), acceleration: number(0.3, 2) })
    .map((to): RiderDeed => ({ kind: 'ride', ...to })),
  fc.record({ for: number(0.02, 3) }).map((pulled): RiderDeed => ({ kind: 'clutch', ...pulled })),
);
/** Places in order; by time where `timed`. */
const placed = <T>(
  what: fc.Arbitrary<T>,
  most: number,
  timed: boolean,
): fc.Arbitrary<(T & { at: RoutePlace })[]> =>
  fc.array(fc.record({ share: number(0, 0.95), one: what }), { maxLength: most }).map((list) =>
    [...list]
      .sort((a, b) => a.share - b.share)
      .map(({ share, one }) => ({
        ...one,
        at: timed ? { time: 150 * share } : { distance: LENGTH * share },
      })),
  );
const acts = (most: number): fc.Arbitrary<RiderAct[]> =>
  fc
    .boolean()
    .chain((timed) =>
      placed(
        fc.record({ does: deed, reason: fc.constantFrom('written' as const, 'bend' as const) }),
        most,
        timed,
      ),
    );
const faults: fc.Arbitrary<SensorFault[]> = placed(
  fc.record({
    shows: fc.constantFrom('nothing' as const, 'last_value' as const, 'double' as const),
    for: number(0.1, 4),
  }),
  2,
  false,
);
const unit: fc.Arbitrary<SupervisorSetup> = fc.record({
  lowestSpeed: fc.constantFrom(0, 9),
  tooSlow: fc.option(fc.record({ by: number(0.5, 4), for: number(0, 2) })),
  tooFast: fc.option(fc.record({ by: number(0.5, 4), for: number(0, 2) })),
  believable: fc.option(number(20, 200)),
  resumeRamp: fc.option(number(0.2, 2)),
  tap: number(0.1, 0.5),
  tapRamp: fc.option(number(0.2, 2)),
  override: fc.record({
    integral: fc.constantFrom('held' as const, 'runs' as const),
    reentry: number(0.1, 1),
  }),
});
const road = fc
  .record({ grade: number(0, 0.05), wave: number(60, 300), timed: fc.boolean() })
  .map(({ grade, wave, timed }) =>
    timed
      ? roadOver(stations(LENGTH / 15, 2), { grade: (t) => grade * Math.sin((15 * t) / wave) }, { speed: 15 })
      : roadOver(stations(LENGTH, 20), { grade: (s) => grade * Math.sin(s / wave) }),
  );
const plan = (of: readonly Vehicle[], most: number): fc.Arbitrary<LoopPlan> =>
  fc
    .record({
      road,
      vehicle: fc.constantFrom(...of),
      controller: fc.constantFrom(...controllers),
      scheme: fc.constantFrom('exact' as const, 'fast' as const),
      supervisor: unit,
      faults,
      acts: acts(most),
      shifts: fc.boolean(),
      changes: fc.boolean(),
      starts: fc.constantFrom('engaged' as const, 'by_hand' as const),
      resumesAfter: fc.option(number(1, 8)),
    })
    .map(({ road: over, vehicle, acts: does, shifts, changes, starts, resumesAfter, ...more }) =>
      planOver(over, vehicle, {
        ...more,
        hold: {
          setSpeed: 15,
          setSpeedIs: 'true_speed',
          startSpeed: 14,
          starts,
          changes: changes
            ? [
                { at: { distance: 700 }, setSpeed: 17, ramp: 0.5 },
                { at: { distance: 1500 }, setSpeed: 14, ramp: null },
              ]
            : [],
        },
        rider: {
          brakesAbove: changes ? 1 : null,
          shifts: shifts
            ? [
                { distance: 400, gear: 1 },
                { distance: 1400, gear: 2 },
              ]
            : [],
          acts: vehicle === automatic ? does.filter(({ does: deed }) => deed.kind !== 'clutch') : does,
          resumesAfter,
        },
        timeLimit: 400,
        bin: 40,
      }),
    );

test('the account closes, time is on or off, events are in order, and any checkpoint goes on bit for bit', () => {
  fc.assert(
    fc.property(plan([...vehicles, sensed], 10), (asked) => {
      const { result, series, events } = ride(asked);
      expect(result.ledger.residual).toBeLessThan(asked.scheme === 'exact' ? 1e-6 : 1e-12);

      const off = Array.from(series.limit).filter((limit) => (limit & LIMIT_OFF) !== 0).length;
      const overridden = Array.from(series.limit).filter((limit) => (limit & LIMIT_OVERRIDE) !== 0).length;
      const timeOff = result.bins.timeOff.reduce((sum, time) => sum + time, 0);
      expectClose(timeOff, off * SAMPLE, SAMPLE);
      expectClose(
        result.bins.time.reduce((sum, time) => sum + time, 0),
        result.endTime,
        1e-6,
      );
      if (off === 0) expect(timeOff).toBe(0);
      if (overridden > 0) expect(events.some(({ kind }) => kind === 'override_began')).toBe(true);

      let on = asked.hold.starts !== 'by_hand';
      for (const [i, { kind, time }] of events.entries()) {
        expect(time).toBeGreaterThanOrEqual(events[i - 1]?.time ?? 0);
        if (kind === 'ended') expect(on).toBe(true);
        if (kind === 'resumed') expect(on).toBe(false);
        if (kind === 'override_began' || kind === 'tapped' || kind === 'reentered') expect(on).toBe(true);
        if (kind === 'ended') on = false;
        if (kind === 'resumed' || kind === 'engaged') on = true;
      }

      const traced = traceSpeeds(asked, result.checkpoints[0]!, Number.POSITIVE_INFINITY, 0);
      expect(traced.size).toBe(series.size);
      expect(series.speed.findIndex((v, k) => v !== traced.speed[k])).toBe(-1);
      expect(series.setSpeed.findIndex((v, k) => v !== traced.setSpeed[k])).toBe(-1);

      const names = ['speed', 'command', 'measured', 'reference', 'setSpeed', 'brakeForce', 'limit'] as const;
      for (const checkpoint of result.checkpoints.slice(1)) {
        const later = replay(asked, checkpoint, Number.POSITIVE_INFINITY).series;
        const from = series.size - later.size;
        for (const name of names)
          expect(
            later[name].findIndex((value, k) => value !== series[name][from + k]),
            name,
          ).toBe(-1);
      }
    }),
    { numRuns: 20, seed: 20 },
  );
});

test('a run leaves nothing behind for the next', () => {
  fc.assert(
    fc.property(plan(vehicles, 6), plan(vehicles, 6), (one, other) => {
      const alone = runLoop(one);
      runLoop(other);
      expect(runLoop(one)).toEqual(alone);
    }),
    { numRuns: 5, seed: 21 },
  );
});

test('both schemes see the same events and speeds', () => {
  const smooth = plan(vehicles, 8).map(
    (asked): LoopPlan => ({
      ...asked,
      faults: [],
      supervisor: { ...patientUnit, override: asked.supervisor!.override },
    }),
  );
  fc.assert(
    fc.property(smooth, (asked) => {
      const [exact, fast] = (['exact', 'fast'] as const).map((scheme) => runLoop({ ...asked, scheme }));
      expect(fast!.status).toBe(exact!.status);
      const kinds = ({ holdEvents }: typeof exact & object) =>
        holdEvents!.map(({ kind, cause }) => `${kind} ${cause}`);
      expect(kinds(fast!)).toEqual(kinds(exact!));
      expectClose(fast!.bins.speedMean, exact!.bins.speedMean, 0.1);
    }),
    { numRuns: 20, seed: 22 },
  );
});
