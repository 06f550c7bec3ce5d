// What the record tells of a battery: the shares of force and regeneration that it took away, by bin.
import { describe, expect, it } from 'vitest';
import { runLoop } from '../../src/loop/run-loop.ts';
import type { Battery } from '../../src/vehicle/energy-source.ts';
import { expectClose } from '../compare.ts';
import { planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

/** P = F v / 0.8. */
const battery = (more: Partial<Battery>): Battery => ({
  kind: 'battery',
  map: {
    shaftSpeed: Float64Array.of(0, 1),
    torque: Float64Array.of(0, 1),
    power: Float64Array.of(0, 0, 0, 1.25),
    least: Number.NEGATIVE_INFINITY,
  },
  capacity: null,
  charge: 1,
  reserve: 0,
  sag: null,
  acceptance: null,
  heating: null,
  ...more,
});

const run = (source: Battery | null, scheme: 'exact' | 'fast' = 'exact') =>
  runLoop(
    planOver(
      roadOver(stations(3000, 100)),
      { ...referenceMotorcycle, drive: { ...referenceMotorcycle.drive, source } },
      { scheme },
    ),
  );

describe('the record of a run with a battery', () => {
  it('has no shares lost without one, nor with one that is cold and full enough', () => {
    for (const source of [null, battery({})]) {
      const { bins } = run(source);
      for (const column of [bins.driveLost, bins.regenerationLost])
        expect([...column]).toEqual(new Array(60).fill(0));
    }
  });

  it('tells what voltage takes of the force and a full battery of the regeneration', () => {
    // The charge stands still where the capacity is not known: 0.7 of the force, 0.2 of the regeneration all the way.
    const { bins } = run(
      battery({
        charge: 0.5,
        sag: { charge: Float64Array.of(0, 1), share: Float64Array.of(0.6, 0.8) },
        acceptance: { charge: Float64Array.of(0, 1), share: Float64Array.of(0.4, 0) },
      }),
    );
    expectClose(bins.driveLost, new Float64Array(60).fill(0.3), 1e-12);
    expectClose(bins.regenerationLost, new Float64Array(60).fill(0.8), 1e-12);
  });

  it.each(['exact', 'fast'] as const)(
    'is all of the force from where the battery is empty on, %s',
    (scheme) => {
      // 260 g 0.015 + 0.6 x 1.2 / 2 x 17^2 = 142.3 N; 1510 m at it over 0.8 is what is in the battery.
      const force = 260 * 9.80665 * 0.015 + 0.36 * 17 * 17;
      const { status, bins } = run(battery({ capacity: 1e6, charge: (force * 1510) / 0.8 / 1e6 }), scheme);
      expect(status).toBe('stopped');
      const first = bins.driveLost.findIndex((lost) => lost > 0);
      expect(bins.edge[first]).toBe(1500);
      expect([...bins.driveLost.subarray(first)].every((lost) => lost === 1)).toBe(true);
      expect(bins.size).toBeGreaterThan(first + 1);
    },
  );
});
