// A throttle that creeps over the edges of a part-throttle law behind slack and a lag: an edge is met by Newton's rule
// from the far side, which lands short of it, and must still be met in the piece that begins there.

import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { PiSetup } from '../../src/control/setup.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import { IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import { planOver, roadOver, stations } from './scenes.ts';
import { engine, switching } from './switching-scenes.ts';

const opened = (x: number): number => 1 - (1 - x) * (1 - x);

/** 60 N m at full throttle, -8 N m at closed, in between by chords of a parabola over so many equal parts of travel. */
function chords(parts: number, lag: number): Drive {
  const cells = Array.from({ length: parts }, (_, j) => {
    const [low, high] = [j / parts, (j + 1) / parts];
    const slope = (opened(high) - opened(low)) / (high - low);
    return [-8 + 68 * (opened(low) - slope * low), 0, 68 * slope, 0, 0, 0];
  }).flat();
  return engine(0, {
    speedEdges: new Float64Array(0),
    throttleEdges: Float64Array.from({ length: parts - 1 }, (_, j) => (j + 1) / parts),
    cells: Float64Array.from(cells),
    losses: new Float64Array(cells.length),
    lag,
  });
}

const steep = roadOver(stations(1700, 50), { grade: (s) => (s < 500 ? 0 : s < 1100 ? 0.1 : 0.02) });

test('part-throttle edges behind slack, a lag and pulses: every run ends, and its account closes', () => {
  const between = (min: number, max: number) => fc.double({ min, max, noNaN: true });
  fc.assert(
    fc.property(
      fc.record({
        parts: fc.integer({ min: 3, max: 8 }),
        driveLag: between(0.03, 0.23),
        lag: between(0.02, 0.12),
        rateLimit: fc.constantFrom(null, 4),
        slack: between(0, 0.05),
        spacing: between(0.25, 0.35),
        kp: between(0.3, 3.3),
        ki: between(0.03, 0.33),
      }),
      ({ parts, driveLag, lag, rateLimit, slack, spacing, kp, ki }) => {
        const vehicle = {
          ...switching(chords(parts, driveLag), { lag, rateLimit, slack }),
          sensor: {
            ...IDEAL_SENSOR,
            filter: 0.06,
            pulses: { spacing, reading: { kind: 'counted', window: 0.044 } },
          },
        } as const;
        const plan = planOver(steep, vehicle);
        const pi = plan.controller as PiSetup;
        const { status, ledger } = runLoop({ ...plan, controller: { ...pi, kp, ki, sample: 0.05 } });
        expect(status).toBe('completed');
        expect(ledger.residual).toBeLessThan(1e-7);
      },
    ),
    { seed: 31, numRuns: 60 },
  );
});
