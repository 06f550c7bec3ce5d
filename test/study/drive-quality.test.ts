import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type DriveStep, driveQuality, driveSums } from '../../src/study/drive-quality.ts';
import { expectClose } from '../compare.ts';

const MASS = 250 * 1.015;
const DT = 0.1;
const load = (speed: number): number => 10 + 0.33 * speed * speed;

/** Steps between samples of a speed, on the level. */
function stepsOf(speeds: readonly number[]): DriveStep[] {
  return speeds.slice(1).map((to, i) => {
    const from = speeds[i]!;
    return { from, to, time: DT, load: load((from + to) / 2), mass: MASS };
  });
}
const samples = (of: (t: number) => number): number[] => Array.from({ length: 601 }, (_, i) => of(i * DT));

describe('drive quality', () => {
  // Worked out by a separate script from the formulas of SAE J2951 as remembered: 60 s at 10 Hz.
  const target = driveSums(stepsOf(samples(() => 25)));
  const driven = driveSums(stepsOf(samples((t) => 25 + 0.5 * Math.sin((2 * Math.PI * t) / 10))));
  const rated = driveQuality(driven, target);

  it('gives the figures of the worked example', () => {
    expectClose(driven.energy, 324_560.4, 0.05);
    expectClose(target.energy, 324_375.0, 0.05);
    expectClose(driven.speedChange, 12.0, 0.005);
    expectClose(driven.inertialWork, 38_062, 0.5);
    expectClose(rated.energy as number, 0.057, 0.0005);
    expectClose(rated.distance as number, 0.0, 0.0005);
    expectClose(rated.energyEconomy as number, 0.057, 0.0005);
  });

  it('has no rating against what a constant speed does not do', () => {
    expect(rated.speedChange).toHaveProperty('none');
    expect(rated.inertialWork).toHaveProperty('none');
    const nothing = driveSums([]);
    for (const figure of Object.values(driveQuality(driven, nothing))) expect(figure).toHaveProperty('none');
  });

  it('is zero of a target driven as it is, and adds up over pieces', () => {
    const speed = fc.double({ min: 1, max: 40, noNaN: true });
    fc.assert(
      fc.property(fc.array(speed, { minLength: 4, maxLength: 60 }), fc.nat(50), (speeds, at) => {
        const steps = stepsOf(speeds);
        const sums = driveSums(steps);
        const same = driveQuality(sums, sums);
        for (const figure of Object.values(same)) if (typeof figure === 'number') expect(figure).toBe(0);
        const cut = at % steps.length;
        const [first, second] = [driveSums(steps.slice(0, cut)), driveSums(steps.slice(cut))];
        expectClose(first.energy + second.energy, sums.energy, 1e-9 * sums.energy);
        expectClose(first.distance + second.distance, sums.distance, 1e-9 * sums.distance);
        expectClose(first.speedChange + second.speedChange, sums.speedChange, 1e-9 * (1 + sums.speedChange));
        expectClose(
          first.inertialWork + second.inertialWork,
          sums.inertialWork,
          1e-9 * (1 + sums.inertialWork),
        );
      }),
      { numRuns: 100, seed: 2951 },
    );
  });

  it('takes a jump of speed for the kinetic energy that it needs, and nothing back where it falls', () => {
    const jump = (from: number, to: number) => driveSums([{ from, to, time: 0, load: 100, mass: 200 }]);
    expectClose(jump(10, 12).energy, 100 * (144 - 100), 1e-9);
    expectClose(jump(10, 12).inertialWork, 100 * (144 - 100), 1e-9);
    expect(jump(12, 10).energy).toBe(0);
    expect(jump(12, 10).speedChange).toBe(2);
  });
});
