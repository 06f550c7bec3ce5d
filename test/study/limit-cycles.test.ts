import { describe, expect, it } from 'vitest';
import { loopStability } from '../../src/control/loop-stability.ts';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { traceSpeeds } from '../../src/loop/trace-speeds.ts';
import { seededStream } from '../../src/numeric/random.ts';
import { oscillationsIn } from '../../src/study/cycle-shape.ts';
import { demandOf } from '../../src/study/demand.ts';
import { findLimitCycles } from '../../src/study/limit-cycles.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import { expectClose } from '../compare.ts';
import { roadOver, stations } from '../loop/scenes.ts';
import { cyclesOf, engineOf, kicked, withFuelCut } from './cycle-scene.ts';
import { crossover, type Loop, played, quantised, saturated, stepped } from './describing-function.ts';
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

const LEVEL_GROUND = { grade: 0, headwind: 0, crosswind: 0, airDensity: 1.2, airTemperature: 288.15 };
/** The speed under a force that steps to and fro is nearly a triangle, half of whose height is this many first harmonics. */
const TRIANGLE = Math.PI ** 2 / 8;

/** A throttle servo so slow, and a sensor so late, that the gain can be too high. */
const slow = vehicleOf({ actuator: { lag: 1.5 }, drive: { peakForce: 292, closedThrottleForce: 40 } });
const late = { ...slow, sensor: { ...slow.sensor, delay: 0.6 } };
const gainsOf = (kp: number, ki: number) => piOf({ kp, ki, setpointWeight: 1 });
const proportional = (kp: number) => piOf({ kp, ki: 0, setpointWeight: 1, antiWindup: { kind: 'none' } });

describe('a limit cycle', () => {
  it('is laid to the gains where the linear loop is unstable, whatever else is in it', () => {
    const pulses = { spacing: 0.04, reading: { kind: 'counted', window: 0.1 } } as const;
    const counted = { ...late, sensor: { ...late.sensor, pulses } };
    const plan = planOf(kicked(3000), counted, proportional(1.6));
    const level = { grade: 0, headwind: 0, crosswind: 0, airDensity: 1.2, airTemperature: 288.15 };
    expect(
      loopStability(counted, plan.controller as ReturnType<typeof proportional>, [SPEED], level)!.stable,
    ).toBe(false);
    const cycles = cyclesOf(plan);
    expect(cycles.length).toBeGreaterThan(0);
    for (const { cause, why } of cycles) {
      expect(cause).toBe('gains');
      expect(why).toContain('The linear loop is unstable');
    }
  });

  it('of gains beyond the stability limit has the period and amplitude of the describing function', () => {
    // The throttle has half of its range on either side of what the level needs.
    const loop = loopOf({ kp: 1.6, ki: 0, actuatorLag: 1.5, delay: 0.61, forceGain: 332 });
    const predicted = saturated(loop, 0.5);
    const [cycle, ...more] = cyclesOf(planOf(kicked(3000), late, proportional(1.6)));
    expect(more).toEqual([]);
    expect(cycle).toMatchObject({ candidate: 'pi', cause: 'gains' });
    expectClose(cycle!.period, predicted.period, 0.05 * predicted.period);
    expectClose(cycle!.speedAmplitude, predicted.speed, 0.1 * predicted.speed);
    expect(cycle!.turns).toBeGreaterThan(20);
    expect(cycle!.from).toBeGreaterThan(90);
    expect(cycle!.to).toBeGreaterThan(2900);
    expect(cycle!.why).toMatch(/at [0-9.]+ km\/h; with half the gains 0\.[0-2] km\/h of that is left\.$/);
  });

  it('of gains too high for a late actuator tells what else would end it', () => {
    const dead = vehicleOf({ actuator: { lag: 0.3, deadTime: 0.8, rateLimit: 2 } });
    const [cycle] = cyclesOf(planOf(kicked(3000), dead, gainsOf(1.2, 0.05)));
    expect(cycle?.cause).toBe('gains');
    expect(cycle?.why).toMatch(/ So it is without the actuator's dead time: 0\.[01] km\/h\.$/);
  });

  it('of an integral that fights slack has the period and amplitude of the describing function of play', () => {
    const predicted = played(loopOf({ kp: 0.2, ki: 0.2, actuatorLag: 0.06 }), 0.1);
    const vehicle = vehicleOf({ actuator: { lag: 0.06, slack: 0.1 } });
    const [cycle, ...more] = cyclesOf(planOf(kicked(4000), vehicle, gainsOf(0.2, 0.2)));
    expect(more).toEqual([]);
    expect(cycle).toMatchObject({ candidate: 'pi', cause: 'slack' });
    expectClose(cycle!.period, predicted.period, 0.05 * predicted.period);
    expectClose(cycle!.speedAmplitude, predicted.speed, 0.05 * predicted.speed);
    // Behind the play the throttle moves by half of it less on either side.
    expectClose(cycle!.throttleAmplitude, predicted.fed - 0.05, 0.1 * predicted.fed);
    expect(cycle!.why).toMatch(
      /by itself at 1\.0 km\/h; without the slack of the actuator 0\.0 km\/h of that is left\.$/,
    );
  });

  it('on a descent at the step of the fuel cut has the period and amplitude of a relay', () => {
    // Needed is the middle of a step of 150 N at a throttle of 15 %: 300 x 0.15 - 40 - 75 N.
    const vehicle = vehicleOf({ actuator: { lag: 0.6 } });
    const cut = { ...vehicle, drive: withFuelCut(vehicle.drive, 0.15, 150) };
    const predicted = stepped(loopOf({ kp: 0.2, ki: 0.04, actuatorLag: 0.6 }), 150);
    const [cycle, ...more] = cyclesOf(planOf(kicked(3000, gradeFor(-70)), cut, gainsOf(0.2, 0.04)));
    expect(more).toEqual([]);
    expect(cycle).toMatchObject({ candidate: 'pi', cause: 'fuel_cut' });
    expectClose(cycle!.period, predicted.period, 0.1 * predicted.period);
    const triangle = TRIANGLE * predicted.speed;
    expectClose(cycle!.speedAmplitude, triangle, 0.1 * triangle);
    expect(cycle!.why).toMatch(/; without the step of the fuel cut 0\.[01] km\/h of that is left\.$/);
    // On a grade that needs more than the step it holds still.
    expect(cyclesOf(planOf(kicked(3000, gradeFor(60)), cut, gainsOf(0.2, 0.04)))).toEqual([]);
  });

  it('of an engine whose fuel is cut at closed throttle is found on the descent that needs the step', () => {
    const vehicle = {
      ...vehicleOf({ actuator: { lag: 0.8 } }),
      drive: engineDrive(engineOf({ fuelCut: 4 })),
    };
    const plan = (grade: number) => planOf(kicked(3000, grade), vehicle, gainsOf(0.1, 0.02));
    const [cycle] = cyclesOf(plan(-0.1));
    expect(cycle?.cause).toBe('fuel_cut');
    expect(cyclesOf(plan(-0.03))).toEqual([]);
  });

  it('of a throttle that moves in steps has the period and amplitude of a relay', () => {
    // Needed is the middle between two steps of a tenth of 1040 N.
    const vehicle = vehicleOf({ actuator: { lag: 0.8, resolution: 0.1 }, drive: { peakForce: 1000 } });
    const stepper = { ...vehicle, sensor: { ...vehicle.sensor, delay: 0.3 } };
    const loop = loopOf({ kp: 0.1, ki: 0.02, actuatorLag: 0.8, delay: 0.31, forceGain: 1040 });
    const predicted = quantised(loop, 104);
    const road = kicked(3000, gradeFor(1040 * 0.35 - 40));
    const [cycle, ...more] = cyclesOf(planOf(road, stepper, gainsOf(0.1, 0.02)));
    expect(more).toEqual([]);
    expect(cycle).toMatchObject({ candidate: 'pi', cause: 'resolution' });
    expectClose(cycle!.period, predicted.period, 0.1 * predicted.period);
    expectClose(cycle!.speedAmplitude, predicted.speed, 0.15 * predicted.speed);
  });

  it('of a high gain on counted pulses has the period of the loop that is late by half of the window', () => {
    const vehicle = vehicleOf({ actuator: { lag: 0.5 }, drive: { peakForce: 600 } });
    const loop = { kp: 1, ki: 0.1, actuatorLag: 0.5, forceGain: 640 };
    const window = 0.5;
    const counting = {
      ...vehicle.sensor,
      pulses: { spacing: 0.24, reading: { kind: 'counted', window } },
    } as const;
    const [cycle, ...more] = cyclesOf(
      planOf(kicked(3000), { ...vehicle, sensor: counting }, gainsOf(1, 0.1)),
    );
    expect(more).toEqual([]);
    expect(cycle).toMatchObject({ candidate: 'pi', cause: 'pulse_counting' });
    const predicted = (2 * Math.PI) / crossover(loopOf({ ...loop, delay: 0.03 + window / 2 }));
    expectClose(cycle!.period, predicted, 0.1 * predicted);
    // The quantum is 0.48 m/s: half of it on either side at the least.
    expect(cycle!.speedAmplitude).toBeGreaterThan(0.24);
    expect(cyclesOf(planOf(kicked(3000), vehicle, gainsOf(1, 0.1)))).toEqual([]);
  });

  it('of one pulse a turn, far coarser than the error, is found though the margins are there', () => {
    // 1.9 m in 0.25 s: a quantum of 7.6 m/s. The window makes the loop late by an eighth of a second.
    const vehicle = vehicleOf({ actuator: { lag: 0.5 }, drive: { peakForce: 600 } });
    const pulses = { spacing: 1.9, reading: { kind: 'counted', window: 0.25 } } as const;
    const one = { ...vehicle, sensor: { ...vehicle.sensor, pulses } };
    const found = cyclesOf(planOf(kicked(4000), one, gainsOf(0.5, 0.3)));
    expect(new Set(found.map(({ cause }) => cause))).toEqual(new Set(['pulse_counting']));
    const margins = loopStability(one, gainsOf(0.5, 0.3), [SPEED], LEVEL_GROUND);
    expect(margins?.gainMargin).toBeGreaterThan(1.5);
  });

  it('of an automatic gearbox that hunts has the period of its shifts', () => {
    const vehicle = {
      ...vehicleOf({ actuator: { lag: 0.2 } }),
      drive: engineDrive(engineOf({ automatic: true })),
    };
    const plan = (grade: number) => planOf(kicked(3000, grade), vehicle, gainsOf(0.3, 0.1));
    const hunting = plan(0.08);
    const [cycle, ...more] = cyclesOf(hunting);
    expect(more).toEqual([]);
    expect(cycle?.cause).toBe('shifting');
    const up = runLoop(hunting).shifts.filter(({ from, to }) => to > from && from > 0);
    const first = up[up.length - 21]!;
    expectClose(cycle!.period, (up.at(-1)!.time - first.time) / 20, 0.1);
    // On a gentler climb it stays in its gear.
    expect(runLoop(plan(0.03)).shifts).toEqual([]);
    expect(cyclesOf(plan(0.03))).toEqual([]);
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

  it('is a gusty wind, under gains that ring', () => {
    // Gusts of 3 m/s, correlated over 30 m; gains at four fifths of the limit swing with them all the way.
    const stream = seededStream(4);
    let gust = 0;
    const windy = roadOver(stations(4000, 10), {
      headwind: () => {
        gust = 0.717 * gust + 0.697 * 3 * stream.normal();
        return 4 + gust;
      },
    });
    const plan = planOf(windy, late, proportional(0.82));
    const trace = traceSpeeds(plan, { settledAt: 0 }, 4000, 0);
    const errors = trace.speed.subarray(0, trace.size).map((v) => Math.abs(v - SPEED));
    expect(errors.filter((error) => error > LEAST).length).toBeGreaterThan(0.2 * trace.size);
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
  const slack = vehicleOf({ actuator: { lag: 0.06, slack: 0.1 } });

  it('finds the same under the fast scheme and over a road along time', () => {
    const over = (road: LoopPlan['road'], scheme: LoopPlan['scheme']) =>
      cyclesOf(planOf(road, slack, gainsOf(0.2, 0.2), { scheme }));
    const timed = roadOver(
      stations(240, 0.5),
      { grade: (t) => (t > 6 && t < 7.2 ? 0.03 : 0) },
      { speed: SPEED },
    );
    const [exact] = over(kicked(4000), 'exact');
    for (const found of [over(kicked(4000), 'fast'), over(timed, 'exact')]) {
      expect(found.map(({ cause }) => cause)).toEqual(['slack']);
      expectClose(found[0]!.period, exact!.period, 0.1);
      expectClose(found[0]!.speedAmplitude, exact!.speedAmplitude, 0.01);
    }
  });

  it('passes over what a change of set speed sets swinging, and tells the speed that is held', () => {
    // The sensor shows 5 % too much, so that the true speed is 60 km/h; then 50.
    const hold = {
      setSpeed: 63 / 3.6,
      setSpeedIs: 'indicated',
      startSpeed: 63 / 3.6,
      changes: [{ at: { distance: 2500 }, setSpeed: 52.5 / 3.6, ramp: null }],
    } as const;
    const shown = { ...slack, sensor: { ...slack.sensor, scaleError: 0.05 } };
    const found = cyclesOf(planOf(kicked(5000), shown, gainsOf(0.2, 0.2), { hold }));
    expect(new Set(found.map(({ cause }) => cause))).toEqual(new Set(['slack']));
    for (const { speedAmplitude } of found) expectClose(speedAmplitude * 3.6, 1, 0.15);
  });

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
