import { describe, expect, it } from 'vitest';
import type { HoldPlan, RiderAct, RiderDeed } from '../../src/loop/plan.ts';
import type { HoldEvent, LoopResult } from '../../src/loop/result.ts';
import { askedHold } from '../../src/study/asked-hold.ts';
import { courseOfRun } from '../../src/study/hold-course.ts';
import { holdOff } from '../../src/study/hold-off.ts';
import { expectClose } from '../compare.ts';
import { recordOf } from './record-of.ts';
import { piOf, vehicleOf } from './vehicle-of.ts';

const HOLD: HoldPlan = { setSpeed: 20, setSpeedIs: 'true_speed', startSpeed: 20, changes: [] };
const VEHICLE = vehicleOf();
const at = (distance: number, does: RiderDeed): RiderAct => ({ at: { distance }, does, reason: 'written' });
const asked = (acts: RiderAct[], hold: Partial<HoldPlan> = {}) =>
  askedHold(
    { ...HOLD, ...hold },
    { brakesAbove: null, shifts: [], acts },
    { tap: 0.5, tapRamp: null },
    VEHICLE,
  ).changes.map((change) => ['distance' in change.at ? change.at.distance : change.at.time, change.setSpeed]);

describe('the hold that a ride asks for', () => {
  it('is that of the plan where the rider changes no set speed', () => {
    const rider = { brakesAbove: null, shifts: [], acts: [at(500, { kind: 'resume' })] };
    expect(askedHold(HOLD, rider, {}, VEHICLE)).toBe(HOLD);
  });

  it('adds taps up, and engages at what the rider has in hand', () => {
    expect(
      asked([
        at(100, { kind: 'tap', taps: 4 }),
        at(200, { kind: 'tap', taps: -1 }),
        at(300, { kind: 'brake', to: 12, deceleration: 2 }),
        at(350, { kind: 'tap', taps: 9 }),
        at(400, { kind: 'engage' }),
        at(500, { kind: 'brake', to: 8, deceleration: 2 }),
        at(600, { kind: 'resume' }),
        at(700, { kind: 'ride', to: 15, acceleration: 1 }),
        at(800, { kind: 'engage' }),
      ]),
    ).toEqual([
      [100, 22],
      [200, 21.5],
      [400, 12],
      [800, 15],
    ]);
  });

  it('engages a start by hand at the start speed, and lets a planned change overrule taps', () => {
    const changes = [{ at: { distance: 150 }, setSpeed: 18, ramp: null }];
    expect(asked([at(100, { kind: 'engage' })], { starts: 'by_hand', startSpeed: 14 })).toEqual([[100, 14]]);
    expect(
      asked([at(100, { kind: 'tap', taps: 2 }), at(200, { kind: 'tap', taps: 2 })], { changes }),
    ).toEqual([
      [100, 21],
      [150, 18],
      [200, 19],
    ]);
  });
});

const event = (kind: HoldEvent['kind'], distance: number, some: Partial<HoldEvent> = {}): HoldEvent => ({
  time: distance / 20,
  distance,
  kind,
  cause: 'rider',
  setSpeed: 20,
  measured: 20,
  command: 0.3,
  ...some,
});
/** A run of 100 s at 20 m/s. */
function ridden(holdEvents: HoldEvent[], hold: Partial<HoldPlan> = {}) {
  const bins = recordOf(
    20,
    Array.from({ length: 100 }, (_, i) => ({ time: 1, timeAt: i, setSpeed: 20 })),
  );
  const result = { bins, endTime: 100, endDistance: 2000, shifts: [], holdEvents };
  const plan = { hold: { ...HOLD, ...hold }, vehicle: VEHICLE, controller: piOf({ kp: 1, ki: 0.1 }) };
  return { plan, result: result as unknown as LoopResult };
}

describe('the course of a run', () => {
  it('has the set speeds that its events made, and grants the way there', () => {
    const { changes, settling, setSpeed } = courseOfRun(ridden([event('tapped', 400, { setSpeed: 22 })]));
    expect(setSpeed).toBe(20);
    expect(changes).toEqual([{ at: 400, setSpeed: 22 }]);
    // 2 m/s at 0.5 m/s2 and 10 s, at 22 m/s.
    expectClose(settling[0]!.to, 400 + 14 * 22, 1e-9);
  });

  it('judges nothing where hold is off, nor until it is back', () => {
    const run = ridden([event('ended', 500), event('resumed', 900, { measured: 15 })]);
    expect(holdOff(run.plan, run.result)).toMatchObject([
      { from: 500, to: 900, since: 25, until: 45, back: true },
    ]);
    const { settling, changes } = courseOfRun(run);
    expect(changes).toEqual([]);
    expect(settling[0]).toEqual({ from: 500, to: 900 });
    // 5 m/s at 0.5 m/s2 and 10 s at 20 m/s.
    expectClose([settling[1]!.from, settling[1]!.to], [900, 900 + 20 * 20], 1e-9);
  });

  it('judges nothing under an override, and to the end where hold is not resumed', () => {
    const over = courseOfRun(
      ridden([event('override_began', 200), event('override_ended', 300), event('reentered', 400)]),
    );
    expect(over.settling).toEqual([{ from: 200, to: 600 }]);
    const off = ridden([event('ended', 1500, { cause: 'too_slow' })]);
    expect(courseOfRun(off).settling).toEqual([{ from: 1500, to: 2000 }]);
    expect(courseOfRun(off).gaveUp).toEqual([1500]);
    const byHand = ridden([event('engaged', 300)], { starts: 'by_hand' });
    expect(courseOfRun(byHand).settling[0]).toEqual({ from: 0, to: 300 });
  });
});
