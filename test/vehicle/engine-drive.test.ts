import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { forceRange, throttleFor, wheelForce, wheelForceSlopes } from '../../src/vehicle/drive-law.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import type { EngineDriveSpec } from '../../src/vehicle/engine-spec.ts';
import { expectClose } from '../compare.ts';
import { singleWithGears as spec, textbookEngine } from './engines.ts';
import { uniform } from './uniform.ts';

const drive = engineDrive(spec);

/** Straight between rows, constant beyond: apart from the code under test. */
function along(x: ArrayLike<number>, y: ArrayLike<number>, at: number): number {
  if (at <= x[0]!) return y[0]!;
  for (let i = 1; i < x.length; i++)
    if (at <= x[i]!) return y[i - 1]! + ((y[i]! - y[i - 1]!) * (at - x[i - 1]!)) / (x[i]! - x[i - 1]!);
  return y[x.length - 1]!;
}

/** The engine as its definition says, at the crankshaft; idle governor, limiter and fuel cut in it, no driveline. */
function crankTorque(w: number, x: number, derate = 1): number {
  const drag = (at: number): number =>
    at <= 140
      ? 0
      : at < 170
        ? (along([150, 450, 900], [5, 7.5, 13], 170) * (at - 140)) / 30
        : along([150, 450, 900], [5, 7.5, 13], at);
  const within = Math.min(w, 800);
  const full = derate * along([150, 300, 500, 650, 850], [35, 52, 62, 60, 44], within);
  const share = (1 - Math.exp(-4 * x)) / (1 - Math.exp(-4));
  const left = Math.min(1, Math.max(0, 1 - (w - 800) / 25));
  const cut = x < 0.03 ? 3 * Math.min(1, Math.max(0, (w - 220) / 30)) : 0;
  return -drag(w) - cut + left * share * (full + drag(within));
}

/** Of a wheel force in gear `gear`, the driveline undone. */
function crankTorqueOf(force: number, gear: number): number {
  const torque = (force * 0.31) / [14.2, 10.1, 8.0, 6.7, 5.9, 5.3][gear]!;
  return torque > 0 ? torque / 0.92 : torque * 0.92;
}

/**
 * Where the driveline turns from giving to taking there is a corner. Nodes of throttle stand close there, which leaves
 * 0.2 % of full torque; in the band of the limiter the law is straight over it: at most (1 / 0.92 - 0.92) a quarter of
 * the 60 N m that fall there.
 */
const bridged = (w: number, torque: number): number =>
  w > 800 && w < 825 ? 0.17 * 15 : Math.abs(torque) < 9 ? 0.0021 * 71 : 0;

const gears = fc.integer({ min: 0, max: 5 });
const shaftSpeeds = uniform(20, 900);
const throttles = uniform(0, 1);
const speedAt = (gear: number, w: number): number => w / drive.gears[gear]!.ratio;

describe('an engine with gears', () => {
  test('gives the torque of its definition within 0.2 % of full torque, with the driveline in it', () => {
    fc.assert(
      fc.property(gears, shaftSpeeds, throttles, (gear, w, x) => {
        const torque = crankTorqueOf(wheelForce(drive, gear, speedAt(gear, w), x, 1), gear);
        expectClose(torque, crankTorque(w, x), 0.002 * 71 + bridged(w, crankTorque(w, x)));
      }),
      { seed: 1, numRuns: 2000 },
    );
  });

  test('keeps the driveline within 0.21 % of full torque also in proportion to the throttle', () => {
    const linear = { ...spec, fuelCut: null, torque: { ...spec.torque, shape: 0 } as typeof spec.torque };
    const geared = engineDrive(linear);
    const lossless = engineDrive({ ...linear, efficiency: 1 });
    fc.assert(
      fc.property(uniform(60, 800), uniform(0, 1), (w, x) => {
        const torque = wheelForce(lossless, 5, speedAt(5, w), x, 1);
        const expected = torque > 0 ? 0.92 * torque : torque / 0.92;
        const allowed = (0.0021 * 71 * 5.3) / 0.31;
        expectClose(wheelForce(geared, 5, speedAt(5, w), x, 1), expected, allowed);
      }),
      { seed: 7, numRuns: 3000 },
    );
  });

  test('derates full throttle to exactly d times itself and leaves closed throttle alone', () => {
    fc.assert(
      fc.property(gears, uniform(20, 800), uniform(0.5, 1), (gear, w, d) => {
        const full = forceRange(drive, gear, speedAt(gear, w), 1);
        const thin = forceRange(drive, gear, speedAt(gear, w), d);
        expectClose(thin.greatest, d * full.greatest, 1e-9);
        expectClose(thin.least, full.least, 1e-9);
      }),
      { seed: 2, numRuns: 500 },
    );
  });

  test('derates part throttle like an engine whose full-load curve is lower', () => {
    fc.assert(
      fc.property(shaftSpeeds, throttles, uniform(0.7, 1), (w, x, d) => {
        const torque = crankTorqueOf(wheelForce(drive, 5, speedAt(5, w), x, d), 5);
        expectClose(torque, crankTorque(w, x, d), 0.002 * 71 + bridged(w, crankTorque(w, x, d)));
      }),
      { seed: 3, numRuns: 1000 },
    );
  });

  test('is continuous over shaft speed at every throttle and derating', () => {
    for (const edge of drive.speedEdges)
      for (const x of [0, 0.02, 0.03, 0.3, 0.77, 1])
        for (const d of [1, 0.8]) {
          const v = speedAt(2, edge);
          expectClose(
            wheelForce(drive, 2, v * (1 - 1e-12), x, d),
            wheelForce(drive, 2, v * (1 + 1e-12), x, d),
            1e-6,
          );
        }
  });

  test('steps at the throttle of its fuel cut by the extra drag, and without it nowhere', () => {
    const ratio = 5.3 / 0.31;
    const step = (of: typeof drive, w: number): number =>
      wheelForce(of, 5, w / ratio, 0.03, 1) - wheelForce(of, 5, w / ratio, 0.03 - 1e-12, 1);
    expectClose(step(drive, 400), (ratio * 3) / 0.92, 1e-6);
    expectClose(step(drive, 235), (ratio * 1.5) / 0.92, 1e-6);
    expectClose(step(drive, 200), 0, 1e-6);
    const smooth = drive.withoutFuelCut!;
    for (const w of [200, 235, 400]) expectClose(step(smooth, w), 0, 1e-6);
    expect(drive.fuelCutBelow).toBe(0.03);
    expect(smooth.fuelCutBelow).toBe(0);
    expectClose(wheelForce(smooth, 3, 12, 0.4, 0.9), wheelForce(drive, 3, 12, 0.4, 0.9), 1e-12);
  });

  test('idles without drag and gives no more than closed throttle beyond the limiter', () => {
    expectClose(wheelForce(drive, 0, speedAt(0, 140), 0, 1), 0, 1e-10);
    expectClose(wheelForce(drive, 0, speedAt(0, 90), 0, 1), 0, 1e-10);
    expectClose(
      wheelForce(drive, 0, speedAt(0, 830), 1, 1),
      wheelForce(drive, 0, speedAt(0, 830), 0.04, 1),
      1e-9,
    );
    expect(throttleFor(drive, 0, speedAt(0, 830), 500, 1)).toBeNull();
  });

  test('has the force of its peak torque, its power and the equivalent mass of its inertia', () => {
    const ratio = 5.3 / 0.31;
    expectClose(drive.peakForce, ratio * 0.92 * 62, 1e-9);
    // Power of the last stretch below the limiter, 60 - 0.08 (w - 650): greatest at its lower or inside, w = 700.
    expectClose(drive.peakPower!, 0.92 * 700 * (60 - 0.08 * 50), 1e-6);
    expectClose(drive.gears[0]!.inertia, 0.02 * (14.2 / 0.31) ** 2, 1e-9);
    // Closed throttle at the limiter, drag and fuel cut.
    expectClose(drive.closedThrottleForce, (ratio * (7.5 + (5.5 * 350) / 450 + 3)) / 0.92, 1e-9);
  });
});

test('throttleFor undoes wheelForce in every gear, derated or not', () => {
  fc.assert(
    fc.property(gears, uniform(20, 800), uniform(-0.2, 1.3), fc.constantFrom(1, 0.87), (gear, w, x, d) => {
      const force = wheelForce(drive, gear, speedAt(gear, w), x, d);
      const back = throttleFor(drive, gear, speedAt(gear, w), force, d)!;
      expectClose(back, x, 1e-9);
    }),
    { seed: 4, numRuns: 1000 },
  );
});

test('slopes of the wheel force agree with central differences', () => {
  const h = 1e-5;
  const away = (edges: Float64Array, place: number, by: number): boolean =>
    edges.every((edge) => Math.abs(edge - place) > 2 * by);
  let checked = 0;
  fc.assert(
    fc.property(gears, shaftSpeeds, throttles, fc.constantFrom(1, 0.9), (gear, w, x, d) => {
      const { ratio } = drive.gears[gear]!;
      if (!away(drive.speedEdges, w, h * ratio) || !away(drive.throttleEdges, x, h)) return;
      const v = w / ratio;
      const slopes = wheelForceSlopes(drive, gear, v, x, d);
      const force = (speed: number, throttle: number) => wheelForce(drive, gear, speed, throttle, d);
      expectClose(slopes.bySpeed, (force(v + h, x) - force(v - h, x)) / (2 * h), 1e-4);
      expectClose(slopes.byThrottle, (force(v, x + h) - force(v, x - h)) / (2 * h), 1e-4);
      checked += 1;
    }),
    { seed: 5, numRuns: 500 },
  );
  expect(checked).toBeGreaterThan(400);
});

describe('a map', () => {
  const plain: Partial<EngineDriveSpec> = { fuelCut: null, efficiency: 1, revLimit: null };

  test('sampled from a full-load curve at its own corners is the same engine', () => {
    const formula = engineDrive({ ...spec, ...plain });
    const throttle = Float64Array.of(0, ...formula.throttleEdges, 1);
    const shaftSpeed = formula.speedEdges;
    const torque = [...shaftSpeed].flatMap((w) =>
      [...throttle].map((x) => {
        const drag = w <= 140 ? 0 : along([140, 170, 450, 900], [0, 5 + 20 / 120, 7.5, 13], w);
        const share = (1 - Math.exp(-4 * x)) / (1 - Math.exp(-4));
        return -drag + share * (along([150, 300, 500, 650, 850], [35, 52, 62, 60, 44], w) + drag);
      }),
    );
    const map = engineDrive({
      ...spec,
      ...plain,
      torque: { kind: 'map', shaftSpeed, throttle, torque: Float64Array.from(torque) },
      drag: null,
    });
    fc.assert(
      fc.property(shaftSpeeds, throttles, fc.constantFrom(1, 0.8), (w, x, d) => {
        const v = speedAt(1, w);
        expectClose(wheelForce(map, 1, v, x, d), wheelForce(formula, 1, v, x, d), 1e-8);
      }),
      { seed: 6, numRuns: 500 },
    );
  });

  test('of the parabola, 10 rad/s fine, is the parabola within the error of interpolation', () => {
    const shaftSpeed = Float64Array.from({ length: 100 }, (_, i) => 10 * (i + 1));
    const torque = [...shaftSpeed].flatMap((w) => [0, 190 * (1 - 0.4 * (w / 420 - 1) ** 2)]);
    const map = engineDrive({
      ...textbookEngine,
      torque: { kind: 'map', shaftSpeed, throttle: Float64Array.of(0, 1), torque: Float64Array.from(torque) },
    });
    const parabola = engineDrive(textbookEngine);
    // h^2 |T''| / 8 = 100 / 8 2 0.4 190 / 420^2 N m, times the ratio 12.
    const error = (12 * (100 / 8) * 2 * 0.4 * 190) / 420 ** 2;
    let worst = 0;
    for (let w = 11; w < 1000; w += 0.7) {
      const gap = wheelForce(parabola, 3, w / 12, 1, 1) - wheelForce(map, 3, w / 12, 1, 1);
      expect(gap).toBeGreaterThan(-1e-9);
      worst = Math.max(worst, gap);
    }
    expect(worst).toBeLessThan(error * (1 + 1e-9));
    expect(worst).toBeGreaterThan(0.9 * error);
  });
});
