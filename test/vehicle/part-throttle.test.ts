// A throttle plate: at small opening the air that it lets in hardly depends on the engine speed.

import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { combustionTable } from '../../src/vehicle/combustion-table.ts';
import { wheelForce } from '../../src/vehicle/drive-law.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import type { EngineDriveSpec } from '../../src/vehicle/engine-spec.ts';
import { expectClose } from '../compare.ts';
import { single, singleWithGears } from './engines.ts';
import { uniform } from './uniform.ts';

const row = (...values: number[]): Float64Array => Float64Array.from(values);

/** An engine whose full load is the same at every speed, without drag and losses: the bare formula. */
const plain = (shape: number, shapeSpeed: number): EngineDriveSpec => ({
  ...singleWithGears,
  torque: { kind: 'full_load', shaftSpeed: row(100, 1000), torque: row(50, 50), shape, shapeSpeed },
  drag: null,
  fuelCut: null,
  revLimit: null,
  efficiency: 1,
  ratios: [1],
  gear: 0,
  wheelRadius: 1,
});

/** The formula of a plate with `shape` at `at`, apart from the code under test. */
function share(shape: number, at: number, idle: number, w: number, x: number): number {
  const k = (shape * at) / Math.max(w, idle);
  return -Math.expm1(-k * x) / -Math.expm1(-k);
}

function along(x: readonly number[], y: readonly number[], at: number): number {
  if (at <= x[0]!) return y[0]!;
  for (let i = 1; i < x.length; i++)
    if (at <= x[i]!) return y[i - 1]! + ((y[i]! - y[i - 1]!) * (at - x[i - 1]!)) / (x[i]! - x[i - 1]!);
  return y.at(-1)!;
}

describe('a throttle plate', () => {
  test('lets in the same air at small opening, whatever the engine speed: torque times speed stays', () => {
    // k large: 1 - e^-k is 1, and for x -> 0 the share is k x = shape at x / w, so that T w = 50 shape at x.
    const drive = engineDrive(plain(20, 500));
    for (const w of [200, 400, 600, 800])
      for (const x of [1e-5, 1e-4])
        expectClose((wheelForce(drive, 0, w, x, 1) * w) / x, 50 * 20 * 500, 50 * 20 * 500 * 0.06);
  });

  test('gives less torque the faster the engine turns at every part throttle, and no less power', () => {
    // Torques between which the engine is straight are those of the formula within 0.3 % of 50 N m.
    fc.assert(
      fc.property(
        uniform(0.5, 8),
        uniform(0.02, 0.6),
        uniform(150, 600),
        uniform(1.2, 1.6),
        (k, x, w, more) => {
          const drive = engineDrive(plain(k, 500));
          const [slow, fast] = [wheelForce(drive, 0, w, x, 1), wheelForce(drive, 0, w * more, x, 1)];
          expectClose(slow, 50 * share(k, 500, 140, w, x), 0.15);
          expectClose(fast, 50 * share(k, 500, 140, w * more, x), 0.15);
          expect(fast).toBeLessThan(slow);
          expect(fast * w * more).toBeGreaterThan((slow - 0.3) * w);
        },
      ),
      { seed: 11, numRuns: 100 },
    );
  });

  test('is at full throttle and closed throttle what the same engine is without it', () => {
    const at = (shapeSpeed: number | null) =>
      engineDrive({
        ...singleWithGears,
        torque: { ...single.torque, shapeSpeed } as EngineDriveSpec['torque'],
      });
    const [plate, wire] = [at(500), at(null)];
    fc.assert(
      fc.property(uniform(5, 50), fc.constantFrom(0, 1), uniform(0.7, 1), (v, x, d) => {
        expectClose(wheelForce(plate, 5, v, x, d), wheelForce(wire, 5, v, x, d), 1e-9);
      }),
      { seed: 12, numRuns: 400 },
    );
    // At its own speed it has the shape that is told.
    expectClose(
      wheelForce(plate, 5, 500 / (5.3 / 0.31), 0.3, 1),
      wheelForce(wire, 5, 500 / (5.3 / 0.31), 0.3, 1),
      5,
    );
  });
});

describe('the compiled engine with a plate', () => {
  test.each([
    [1, 300],
    [3, 500],
    [4, 600],
    [6, 800],
    [20, 500],
  ])('of shape %d at %d rad/s is within 0.3 percent of full torque of the formula', (k, at) => {
    const spec = {
      ...singleWithGears,
      torque: { ...single.torque, shape: k, shapeSpeed: at } as EngineDriveSpec['torque'],
      fuelCut: null,
    };
    const drive = engineDrive(spec);
    const table = combustionTable(spec);
    const ratio = 5.3 / 0.31;
    const drag = (w: number): number => along([150, 450, 900], [5, 7.5, 13], w);
    const governed = (w: number): number => (w <= 140 ? 0 : w < 170 ? (drag(170) * (w - 140)) / 30 : drag(w));
    let worst = 0;
    for (let i = 0; i <= 600; i++) {
      const w = 70 + ((800 - 70) * i) / 600;
      const full = along([150, 300, 500, 650, 850], [35, 52, 62, 60, 44], w);
      for (let j = 0; j <= 400; j++) {
        const x = (j / 400) ** 2;
        const torque = share(k, at, 140, w, x) * (full + governed(w)) - governed(w);
        const wheel = torque > 0 ? 0.92 * torque : torque / 0.92;
        const gap = Math.abs(wheelForce(drive, 5, w / ratio, x, 1) / ratio - wheel) / full;
        worst = Math.max(worst, gap);
      }
    }
    expect(worst).toBeLessThan(0.003);
    expect(table.shaftSpeed.length).toBeLessThanOrEqual(25);
    expect(table.throttle.length).toBeLessThanOrEqual(36);
  });
});
