import { describe, expect, it } from 'vitest';
import type { HoldPlan, RiderAct, RiderDeed } from '../../src/loop/plan.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { seededStream } from '../../src/numeric/random.ts';
import type { Road } from '../../src/road/road.ts';
import { type BendRiding, planBends } from '../../src/study/bend-plan.ts';
import { expectClose } from '../compare.ts';
import { roadOf } from './road-of.ts';
import { piOf, planOf, vehicleOf } from './vehicle-of.ts';

const RIDING: BendRiding = { maxLateral: 2.5, deceleration: 2, resumesAfter: 2, shortestHold: 20 };
const SET = 25;
const HOLD: HoldPlan = { setSpeed: SET, setSpeedIs: 'true_speed', startSpeed: SET, changes: [] };
/** The vehicle may come 5 km/h faster than what is set. */
const COMES = SET + 5 / 3.6;

interface Circle {
  readonly at: number;
  readonly length: number;
  readonly radius: number;
}

/** A level road that is straight but for circles, every knot of which lies on the circle that it is told to be on. */
function roadWith(circles: readonly Circle[], length = 6000): Road {
  const road = roadOf([{ length, grade: 0 }], { grid: 5 });
  const curvature = road.distance.map(
    (x) =>
      circles.map(({ at, length, radius }) => (x >= at && x <= at + length ? 1 / radius : 0)).find(Boolean) ??
      0,
  );
  return { ...road, curvature };
}

function plan(
  circles: readonly Circle[],
  more: {
    acts?: RiderAct[];
    hold?: HoldPlan;
    lowest?: number;
    riding?: Partial<BendRiding>;
    peakForce?: number;
  } = {},
) {
  const { acts = [], hold = HOLD, lowest = 0, riding = {}, peakForce = 600 } = more;
  return planBends(
    {
      road: roadWith(circles),
      vehicle: vehicleOf({ drive: { peakForce } }),
      hold,
      rider: { brakesAbove: null, shifts: [], ...(acts.length > 0 ? { acts } : {}) },
      unit: { lowestSpeed: lowest, tap: 1, tapRamp: null },
    },
    { ...RIDING, ...riding },
  );
}

const place = ({ at }: RiderAct): number => ('distance' in at ? at.distance : Number.NaN);
const written = (distance: number, does: RiderDeed): RiderAct => ({
  at: { distance },
  does,
  reason: 'written',
});
// biome-ignore lint/suspicious/noThenProperty: what the rider does then, never a promise
const CANCEL: RiderDeed = { kind: 'cancel', then: 'holds_speed' };
/** v = sqrt(a R). */
const allowed = (radius: number): number => Math.sqrt(2.5 * radius);

describe('the plan of bends', () => {
  it('brakes so early that a vehicle 5 km/h too fast is slow enough where the bend begins', () => {
    const { plan: bends, acts } = plan([{ at: 2000, length: 200, radius: 100 }]);
    const [bend] = bends.bends;
    expect(acts.map(({ does }) => does.kind)).toEqual(['brake', 'resume']);
    expect(acts.every(({ reason }) => reason === 'bend')).toBe(true);
    const v = allowed(100);
    // v^2 - u^2 = 2 a s
    expectClose(place(acts[0]!), bend!.from - (COMES * COMES - v * v) / (2 * 2), 1e-9);
    expect(acts[0]?.does).toMatchObject({ kind: 'brake', deceleration: 2 });
    expectClose((acts[0]!.does as { to: number }).to, v, 1e-9);
    expectClose(place(acts[1]!), bend!.to + 2 * v, 1e-9);
    expect(bends.unfit).toEqual([]);
  });

  it('asks nothing of a road whose bends allow the set speed', () => {
    const { plan: bends, acts } = plan([{ at: 2000, length: 200, radius: 260 }]);
    expect(bends.bends).toEqual([]);
    expect(acts).toEqual([]);
  });

  it('makes one stop of bends that follow, brakes again for the sharper one, and lists the place', () => {
    const { plan: bends, acts } = plan([
      { at: 2000, length: 100, radius: 150 },
      { at: 2300, length: 100, radius: 80 },
      { at: 2600, length: 100, radius: 120 },
    ]);
    expect(bends.stops).toHaveLength(1);
    expect(acts.map(({ does }) => does.kind)).toEqual(['brake', 'brake', 'resume']);
    const second = bends.bends[1]!;
    expectClose(place(acts[1]!), second.from - (allowed(150) ** 2 - allowed(80) ** 2) / 4, 1e-9);
    expectClose(place(acts[2]!), bends.bends[2]!.to + 2 * allowed(80), 1e-9);
    expect(bends.unfit).toMatchObject([{ reason: 'bends_follow', bends: 3, from: bends.stops[0]!.from }]);
    expectClose(bends.unfit[0]!.lowestSpeed, allowed(80), 1e-9);
  });

  it('rides a bend more slowly where the next could not be reached at its speed otherwise', () => {
    const { plan: bends } = plan([
      { at: 2000, length: 100, radius: 200 },
      { at: 2140, length: 100, radius: 40 },
    ]);
    const [first, second] = bends.bends;
    const way = second!.from - first!.to;
    expectClose(bends.stops[0]!.speeds[0]!, Math.sqrt(allowed(40) ** 2 + 2 * 2 * way), 1e-9);
    expect(bends.stops[0]!.speeds[0]).toBeLessThan(allowed(200));
  });

  it('gains the set speed by hand behind a bend that is slower than the unit holds', () => {
    const bend = [{ at: 2000, length: 100, radius: 40 }];
    const { plan: bends, acts } = plan(bend, { lowest: 12 });
    expect(acts.map(({ does }) => does.kind)).toEqual(['brake', 'ride', 'resume']);
    expect(acts[1]?.does).toEqual({ kind: 'ride', to: SET, acceleration: 1 });
    expectClose(place(acts[2]!) - place(acts[1]!), (SET ** 2 - allowed(40) ** 2) / 2, 1e-8);
    expect(bends.unfit).toMatchObject([{ reason: 'below_lowest', bends: 1 }]);
    expect(plan(bend, { lowest: 9 }).acts.map(({ does }) => does.kind)).toEqual(['brake', 'resume']);
  });

  it('grants the way that full throttle takes where the drive gains less than the rider asks for', () => {
    const bend = [{ at: 2000, length: 100, radius: 40 }];
    // d(v^2)/dx = 2 (F - r - k v^2) / m: with w^2 = (F - r) / k the way is m / (2 k) ln((w^2 - u^2) / (w^2 - v^2)).
    const [mass, k, roll] = [220, 0.5 * 1.2 * 0.58, 215 * 9.80665 * 0.014];
    const square = (300 - roll) / k;
    const way = (mass / (2 * k)) * Math.log((square - allowed(40) ** 2) / (square - SET ** 2));
    const { acts } = plan(bend, { lowest: 12, peakForce: 300 });
    expectClose(place(acts[2]!) - place(acts[1]!), way, 0.002 * way);
    // 1 m/s2 would take 262 m.
    expect(way).toBeGreaterThan(450);
    // Ridden, the speed is there where the rider resumes.
    const { holdEvents } = runLoop(
      planOf(roadWith(bend), vehicleOf({ drive: { peakForce: 300 } }), piOf(), {
        hold: HOLD,
        rider: { brakesAbove: null, shifts: [], acts },
      }),
    );
    const resumed = holdEvents!.find(({ kind }) => kind === 'resumed')!;
    expectClose(resumed.measured, SET, 0.5);
  });

  it('resumes where full throttle gains no more, if the unit holds that speed', () => {
    const bend = [{ at: 2000, length: 100, radius: 40 }];
    // In the long run 240 N give sqrt((240 - 29.5) / 0.348) = 24.6 m/s; at 0.05 m/s2, 11 N less, 23.9 m/s.
    const { acts } = plan(bend, { lowest: 12, peakForce: 240 });
    const [mass, k, roll] = [220, 0.5 * 1.2 * 0.58, 215 * 9.80665 * 0.014];
    const square = (240 - roll) / k;
    const way = (mass / (2 * k)) * Math.log((square - allowed(40) ** 2) / (square - (240 - roll - 11) / k));
    expect(acts.at(-1)?.does.kind).toBe('resume');
    // Steps of 5 m.
    expectClose(place(acts[2]!) - place(acts[1]!), way, 6);
    // Never fast enough for the unit: the rider rides by hand to the end.
    expect(plan(bend, { lowest: 24.5, peakForce: 240 }).acts.map(({ does }) => does.kind)).toEqual(['brake']);
  });

  it('resumes between bends that are far enough apart, at the set speed', () => {
    const gap = (metres: number) =>
      plan([
        { at: 2000, length: 100, radius: 100 },
        { at: 2100 + metres, length: 100, radius: 100 },
      ]).plan.stops.length;
    // From resume to braking: the gap less 2 s at 15.8 m/s and 115 m of braking must be 20 s at 25 m/s.
    expect(gap(600)).toBe(1);
    expect(gap(700)).toBe(2);
  });

  it('leaves what is written where it is, and resumes nothing that is off by it', () => {
    const bend = [{ at: 2000, length: 200, radius: 100 }];
    const off = plan(bend, { acts: [written(1000, CANCEL)] });
    expect(off.acts.map(({ does }) => does.kind)).toEqual(['cancel', 'brake']);
    expect(off.plan.stops[0]?.resumes).toBe(false);
    const inside = plan(bend, { acts: [written(2100, CANCEL)] });
    expect(inside.acts.map(({ does }) => does.kind)).toEqual(['brake', 'cancel']);
    expect(inside.plan.written).toEqual([0]);
    const back = plan(bend, {
      acts: [
        written(1000, CANCEL),
        written(1500, { kind: 'resume' }),
        written(3000, { kind: 'tap', taps: 1 }),
      ],
    });
    expect(back.acts.map(({ does }) => does.kind)).toEqual(['cancel', 'resume', 'brake', 'resume', 'tap']);
    const byHand = plan(bend, { hold: { ...HOLD, starts: 'by_hand' } });
    expect(byHand.acts.map(({ does }) => does.kind)).toEqual(['brake']);
  });

  it('takes the set speed that is in force where the bend is', () => {
    const hold = { ...HOLD, changes: [{ at: { distance: 1500 }, setSpeed: 15, ramp: null }] };
    expect(plan([{ at: 2000, length: 200, radius: 100 }], { hold }).acts).toEqual([]);
    expect(plan([{ at: 1000, length: 200, radius: 100 }], { hold }).acts).toHaveLength(2);
  });

  it('begins no earlier than the road, and resumes no later', () => {
    const early = plan([{ at: 50, length: 100, radius: 60 }]);
    expect(place(early.acts[0]!)).toBe(0);
    const late = plan([{ at: 5900, length: 100, radius: 60 }]);
    expect(late.acts.map(({ does }) => does.kind)).toEqual(['brake']);
    expect(late.plan.stops[0]?.to).toBe(6000);
  });

  it('never has the rider in a bend faster than it allows, whatever the bends', () => {
    const random = seededStream(11);
    for (let k = 0; k < 200; k++) {
      const circles: Circle[] = [];
      for (let x = 400 + 500 * random.uniform(); x < 5500; x += 60 + 900 * random.uniform()) {
        const length = 40 + 200 * random.uniform();
        circles.push({ at: x, length, radius: 30 + 250 * random.uniform() });
        x += length;
      }
      const { plan: bends, acts } = plan(circles);
      const places = acts.map(place);
      expect(places).toEqual([...places].sort((a, b) => a - b));
      for (const { from, to, speed } of bends.bends) {
        // The speed at the beginning, by the brakings before it: each falls at 2 m/s2 from where it begins.
        let [v, low] = [COMES, Number.POSITIVE_INFINITY];
        for (const act of acts) {
          if (place(act) > to) break;
          if (act.does.kind === 'resume') [v, low] = [COMES, Number.POSITIVE_INFINITY];
          if (act.does.kind !== 'brake') continue;
          const way = Math.max(0, from - place(act));
          v = Math.max(act.does.to, Math.sqrt(Math.max(0, v * v - 4 * way)));
          low = Math.min(low, act.does.to);
        }
        expect(low).toBeLessThanOrEqual(speed + 0.5 / 3.6);
        expect(v).toBeLessThanOrEqual(speed + 0.5 / 3.6 + 1e-9);
      }
    }
  });
});
