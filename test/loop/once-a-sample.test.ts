// A belt and a battery move once a sample, while a real one moves all the time: first order in the sample, so that half a
// sample halves the difference, and what is still missing at one is twice what the half has brought.

import { describe, expect, it } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import type { Battery } from '../../src/vehicle/energy-source.ts';
import { expectClose } from '../compare.ts';
import { forceOf, planOver } from './scenes.ts';
import { belt, engine, hills, switching } from './switching-scenes.ts';

/** Speeds at every 0.02 s under a locked throttle, the devices moving so many times in it. */
function speeds(drive: Drive, throttle: number, parts: number): readonly number[] {
  const plan: LoopPlan = planOver(hills, switching(drive), {
    controller: { kind: 'locked', throttle },
    lockedSample: 0.02 / parts,
  });
  const { series } = replay(plan, { settledAt: 0 }, 1200);
  return [...series.speed].filter((_, i) => i % parts === 0);
}

function difference(a: readonly number[], b: readonly number[]): number {
  const both = Math.min(a.length, b.length);
  expect(both).toBeGreaterThan(1000);
  return a.slice(0, both).reduce((most, v, i) => Math.max(most, Math.abs(v - b[i]!)), 0);
}

describe('once a sample, to first order in it', () => {
  const beltOf = (inertia: number): Drive =>
    engine(0, {
      gears: [{ ratio: 34, inertia: inertia * 34 * 34 }],
      gear: 0,
      belt: { ...belt, inertia },
    });
  const battery: Battery = {
    kind: 'battery',
    map: {
      shaftSpeed: Float64Array.of(0, 1),
      torque: Float64Array.of(0, 1),
      power: Float64Array.of(0, 0, 0, 1.2),
      least: Number.NEGATIVE_INFINITY,
    },
    capacity: 1e6,
    charge: 0.9,
    reserve: 0,
    sag: { charge: Float64Array.of(0.2, 0.8), share: Float64Array.of(0.7, 1) },
    acceptance: null,
    heating: { continuousPower: 2500, time: 60, onset: 0.5, least: 0.6 },
  };
  const electric: Drive = { ...forceOf({ peakForce: 500, lag: 0.05 }), kind: 'electric', source: battery };
  const drives: readonly [string, Drive, number, number][] = [
    ['a belt with 0.002 kg m2', beltOf(0.002), 0.35, 1e-4],
    ['a belt with 0.02 kg m2', beltOf(0.02), 0.35, 1e-3],
    ['charge and heat of a battery', electric, 0.6, 3e-3],
  ];
  it.each(drives)('%s', (_, drive, throttle, most) => {
    const [whole, half, fine] = [1, 2, 32].map((parts) => speeds(drive, throttle, parts)) as [
      readonly number[],
      readonly number[],
      readonly number[],
    ];
    const error = difference(whole, fine);
    expect(error).toBeLessThan(most);
    expect(error).toBeGreaterThan(1e-7);
    // To the limit: 1 - 1/32 of a sample against 1/2 - 1/32 of it.
    expectClose(error / difference(half, fine), 31 / 15, 0.1);
  });
});
