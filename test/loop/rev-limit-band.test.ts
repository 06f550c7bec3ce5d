// A vehicle held in the band of its rev limiter, however narrow: there the force of the drive and the road's are in
// balance, and the band is much quicker than a sample. The drive is written here: 60 N m up to 800 rad/s at full
// throttle, falling to the 8 N m of drag over the band.

import { describe, expect, it } from 'vitest';
import { replay } from '../../src/loop/replay.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import type { Drive, Gearbox } from '../../src/vehicle/drive.ts';
import { expectClose } from '../compare.ts';
import { forceOf, planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const LIMIT = 800;
const RATIO = 45;
const MASS = 260;

function limited(bandRpm: number): Drive {
  const band = (bandRpm * 2 * Math.PI) / 60;
  const end = LIMIT + band;
  return {
    ...forceOf({ peakForce: 60, closedThrottleForce: 8, lag: 0 }),
    kind: 'engine',
    speedEdges: Float64Array.of(LIMIT, end),
    cells: Float64Array.of(
      ...[-8, 0, 68, 0, 0, 0],
      ...[-8, 0, (68 * end) / band, -68 / band, 0, 0],
      ...[-8, 0, 0, 0, 0, 0],
    ),
    losses: new Float64Array(18),
    gears: [{ ratio: RATIO, inertia: 0 }],
  };
}

/** Speed at which the band's torque and the level road are in balance, by bisection [m/s]. */
function balance(bandRpm: number): number {
  const band = (bandRpm * 2 * Math.PI) / 60;
  const left = (v: number): number => {
    const share = (LIMIT + band - RATIO * v) / band;
    return RATIO * (-8 + 68 * share) - (0.5 * 1.2 * 0.6 * v * v + MASS * 9.80665 * 0.015);
  };
  let [low, high] = [LIMIT / RATIO, (LIMIT + band) / RATIO];
  for (let i = 0; i < 60; i++) {
    const middle = 0.5 * (low + high);
    if (left(middle) > 0) low = middle;
    else high = middle;
  }
  return low;
}

describe.each(['exact', 'fast'] as const)('full throttle against the rev limiter (%s)', (scheme) => {
  it.each([10, 50, 250])('settles in a band of %d rpm where drive and road are in balance', (band) => {
    const plan = planOver(
      roadOver(stations(1000, 100)),
      { ...referenceMotorcycle, drive: limited(band) },
      {
        scheme,
        controller: { kind: 'locked', throttle: 1 },
        hold: { setSpeed: 17, setSpeedIs: 'true_speed', startSpeed: 17, changes: [] },
      },
    );
    const { status, ledger } = runLoop(plan);
    expect(status).toBe('completed');
    expect(ledger.residual).toBeLessThan(1e-6);
    const { speed } = replay(plan, { settledAt: 0 }, 1000).series;
    for (const v of speed.subarray(500)) expectClose(v, balance(band), 1e-7);
  });

  it('takes the steps of the gear in hand: an automatic gearbox that never shifts is that gear, bit for bit', () => {
    const gears = [50, 20].map((ratio) => ({ ratio, inertia: 0 }));
    const across = Float64Array.of(0, 1);
    const run = (gearbox: Gearbox) =>
      runLoop(
        planOver(
          roadOver(stations(1000, 100), { grade: (s) => 0.03 * Math.sin(s / 100) }),
          { ...referenceMotorcycle, drive: { ...limited(50), gears, gear: 1, gearbox } },
          { scheme },
        ),
      );
    const never = { throttle: across, upSpeed: Float64Array.of(1e6, 1e6), downSpeed: Float64Array.of(0, 0) };
    const automatic = run({ kind: 'automatic', ...never, gap: 0.3, dwell: 1 });
    expect(automatic.shifts).toEqual([]);
    expect(automatic.bins).toEqual(run({ kind: 'fixed' }).bins);
  });
});
