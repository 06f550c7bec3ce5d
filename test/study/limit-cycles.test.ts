import { describe, expect, it } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { traceSpeeds } from '../../src/loop/trace-speeds.ts';
import { oscillationsIn } from '../../src/study/cycle-shape.ts';
import { demandOf } from '../../src/study/demand.ts';
import { findLimitCycles } from '../../src/study/limit-cycles.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import { expectClose } from '../compare.ts';
import { roadOver, stations } from '../loop/scenes.ts';
import { cyclesOf, kicked } from './cycle-scene.ts';
import { type Loop, saturated, stepped } from './describing-function.ts';
import { roadOf } from './road-of.ts';
import { piOf, planOf, vehicleOf } from './vehicle-of.ts';

const SPEED = 60 / 3.6;
const LEAST = 0.5 / 3.6;

/** The loop of `vehicleOf` at 60 km/h: 220 kg, air 1/2 1.2 0.58 v^2, drive lag 0.1, filter 0.05, delay 0.02 s, 50 Hz. */
const loopOf = (loop: Pick<Loop, 'kp' | 'ki' | 'actuatorLag'> & Partial<Loop>): Loop => ({
  forceGain: 300,
  mass: 220,
  drag: 1.2 * 0.58 * SPEED,
  driveLag: 0.1,
  filter: 0.05,
  delay: 0.03,
  ...loop,
});
/** Road load on the level [N], and the grade that leaves a wheel force to do. */
const LEVEL = 0.5 * 1.2 * 0.58 * SPEED * SPEED + 215 * 9.80665 * 0.014;
const gradeFor = (force: number): number => (force - LEVEL) / (215 * 9.80665);

/** A throttle servo so slow, and a sensor so late, that the gain can be too high. */
const slow = vehicleOf({ actuator: { lag: 1.5 }, drive: { peakForce: 292, closedThrottleForce: 40 } });
const late = { ...slow, sensor: { ...slow.sensor, delay: 0.6 } };
const proportional = (kp: number) => piOf({ kp, ki: 0, setpointWeight: 1, antiWindup: { kind: 'none' } });

/** A drive whose force steps down by `force` below a throttle. */
function withFuelCut(drive: Drive, throttle: number, force: number): Drive {
  const [closed, ...rest] = drive.cells;
  return {
    ...drive,
    throttleEdges: Float64Array.of(throttle),
    cells: Float64Array.of(closed! - force, ...rest, closed!, ...rest),
    losses: Float64Array.of(...drive.losses, ...drive.losses),
    withoutFuelCut: drive,
    fuelCutBelow: throttle,
  };
}

describe('a limit cycle', () => {
  it('of gains beyond the stability limit has the period and amplitude of the describing function', () => {
    // The throttle has half of its range on either side of what the level needs.
    const loop = loopOf({ kp: 1.6, ki: 0, actuatorLag: 1.5, delay: 0.61, forceGain: 332 });
    const predicted = saturated(loop, 0.5);
    const [cycle, ...more] = cyclesOf(planOf(kicked(3000), late, proportional(1.6)));
    expect(more).toEqual([]);
    expect(cycle).toMatchObject({ candidate: 'pi', cause: 'gains' });
    expectClose(cycle!.period, predicted.period, 0.05 * predicted.period);
    expectClose(cycle!.speedAmplitude, predicted.speed, 0.1 * predicted.speed);
    expectClose(cycle!.throttleAmplitude, predicted.actuator, 0.1 * predicted.actuator);
    expect(cycle!.turns).toBeGreaterThan(20);
    expect(cycle!.from).toBeGreaterThan(90);
    expect(cycle!.to).toBeGreaterThan(2900);
    expect(cycle!.why).toMatch(/^With half the gains 0\.[0-2] km\/h of the amplitude of [0-9.]+ km\/h/);
  });

  it('on a descent at the step of the fuel cut has the period and amplitude of a relay', () => {
    // Needed is the middle of a step of 150 N at a throttle of 15 %: 300 x 0.15 - 40 - 75 N.
    const vehicle = vehicleOf({ actuator: { lag: 0.6 } });
    const cut = { ...vehicle, drive: withFuelCut(vehicle.drive, 0.15, 150) };
    const predicted = stepped(loopOf({ kp: 0.2, ki: 0.04, actuatorLag: 0.6 }), 150);
    const gains = piOf({ kp: 0.2, ki: 0.04, setpointWeight: 1 });
    const [cycle, ...more] = cyclesOf(planOf(kicked(3000, gradeFor(-70)), cut, gains));
    expect(more).toEqual([]);
    expect(cycle).toMatchObject({ candidate: 'pi', cause: 'fuel_cut' });
    expectClose(cycle!.period, predicted.period, 0.1 * predicted.period);
    // The speed under a force that steps to and fro is nearly a triangle: pi^2 / 8 of its first harmonic.
    const triangle = (Math.PI ** 2 / 8) * predicted.speed;
    expectClose(cycle!.speedAmplitude, triangle, 0.1 * triangle);
    expect(cycle!.why).toMatch(/^Without the step of the fuel cut 0\.[01] km\/h of the amplitude/);
    // On a grade that needs more than the step it holds still.
    expect(cyclesOf(planOf(kicked(3000, gradeFor(60)), cut, gains))).toEqual([]);
  });
});

describe('no limit cycle', () => {
  it('is a road that is itself a wave of that period', () => {
    // 6 s at 60 km/h are 100 m; half of peak to peak of the speed would be well above the threshold.
    const wave = roadOver(stations(4000, 2), { grade: (x) => 0.08 * Math.sin((2 * Math.PI * x) / 100) });
    const vehicle = vehicleOf({ drive: { peakForce: 600, closedThrottleForce: 250 } });
    const plan = planOf(wave, vehicle, piOf({ kp: 0.1, ki: 0.01 }));
    expectClose(periodsIn(plan), [6], 0.1);
    expect(cyclesOf(plan)).toEqual([]);
  });

  it('is the wind that comes in waves of that period', () => {
    const wave = roadOver(stations(4000, 2), { headwind: (x) => 12 * Math.sin((2 * Math.PI * x) / 150) });
    const plan = planOf(wave, vehicleOf({ drive: { peakForce: 600 } }), piOf({ kp: 0.05, ki: 0.005 }));
    expectClose(periodsIn(plan), [9], 0.2);
    expect(cyclesOf(plan)).toEqual([]);
  });

  it('is a ring that decays, behind a hill or from the start', () => {
    // Gains at 0.95 of the limit: the ring behind the hill is seen for more than four turns.
    const plan = planOf(kicked(3000, 0, 60), late, proportional(0.98));
    expect(periodsIn(plan).length).toBe(1);
    expect(cyclesOf(plan)).toEqual([]);
    const started = { ...plan, hold: { ...plan.hold, startSpeed: SPEED - 2 } };
    expect(cyclesOf(started)).toEqual([]);
  });

  it('is a loop with margins on hills, nor a locked throttle', () => {
    const hills = roadOf([
      { length: 800, grade: 0 },
      { length: 300, grade: 0.04 },
      { length: 300, grade: -0.03 },
      { length: 300, grade: 0.05 },
      { length: 1500, grade: 0 },
    ]);
    expect(cyclesOf(planOf(hills, vehicleOf(), piOf()))).toEqual([]);
    expect(cyclesOf(planOf(hills, vehicleOf(), { kind: 'locked', throttle: 'level' }))).toEqual([]);
  });

  it('is told below the least amplitude, and is above a lower one', () => {
    const vehicle = vehicleOf({ actuator: { lag: 0.6 } });
    const cut = { ...vehicle, drive: withFuelCut(vehicle.drive, 0.15, 50) };
    const plan = planOf(kicked(2000, gradeFor(-20)), cut, piOf({ kp: 0.2, ki: 0.04 }));
    expect(cyclesOf(plan)).toEqual([]);
    expect(cyclesOf(plan, 0.1 / 3.6)[0]).toMatchObject({ cause: 'fuel_cut' });
  });
});

/** Periods of what swings in a run, whatever makes it. */
function periodsIn(plan: LoopPlan): number[] {
  const end = plan.road.distance[plan.road.size - 1]!;
  const trace = traceSpeeds(plan, runLoop(plan).checkpoints[0]!, end, 0);
  return oscillationsIn(trace, LEAST).map(({ period }) => period);
}

describe('the search', () => {
  it('names each candidate, tells its progress, and gives the same from a cold start', () => {
    const plan = planOf(kicked(2000), late, proportional(2));
    const { road, vehicle, hold, rider } = plan;
    const steady = { ...plan, controller: proportional(0.3) };
    const told: number[][] = [];
    const found = findLimitCycles({
      road,
      demand: demandOf(road, vehicle, hold, rider),
      replayed: [
        { name: 'soft', plan: steady, result: runLoop(steady) },
        { name: 'hard', plan, result: runLoop(plan) },
      ],
      onCandidate: (done, of) => told.push([done, of]),
    });
    expect(found.map(({ candidate }) => candidate)).toEqual(['hard']);
    expect(told).toEqual([
      [0, 2],
      [1, 2],
    ]);
    expect(cyclesOf(plan)).toEqual(found.map((cycle) => ({ ...cycle, candidate: 'pi' })));
  });
});
