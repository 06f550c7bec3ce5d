import fc from 'fast-check';
import { describe, it } from 'vitest';
import { wheelForce } from '../../src/vehicle/drive-law.ts';
import { electricDrive } from '../../src/vehicle/electric-drive.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import { scaledDrive } from '../../src/vehicle/scaled-drive.ts';
import { expectClose } from '../compare.ts';
import { textbookEngine } from './engines.ts';

const electric = electricDrive({
  peakForce: 500,
  peakPower: 9000,
  closedThrottleForce: 25,
  regenerationForce: 180,
  regenerationPower: 3000,
  fadeSpeed: 3,
  throttleMin: -1,
  lag: 0.1,
  efficiency: null,
});

describe('a scaled drive', () => {
  it('has its share of the envelope, and its drag', () => {
    const scaled = scaledDrive(electric, { force: 0.7, regeneration: 0.25 });
    for (const speed of [1, 2, 5, 16, 18, 25, 40]) {
      const fade = Math.min(1, speed / 3);
      const full = Math.min(500, 9000 / speed);
      const back = Math.min(180, 3000 / speed) * fade;
      expectClose(wheelForce(scaled, 0, speed, 1, 1), 0.7 * full, 1e-9);
      expectClose(wheelForce(scaled, 0, speed, 0, 1), -25 * fade, 1e-9);
      expectClose(wheelForce(scaled, 0, speed, -1, 1), -25 * fade - 0.25 * back, 1e-9);
    }
  });

  it('is the same as derating by the factor, and derating goes on from there, at any throttle', () => {
    const drive = engineDrive(textbookEngine);
    fc.assert(
      fc.property(
        fc.double({ min: 0.2, max: 1, noNaN: true }),
        fc.double({ min: 0.5, max: 1, noNaN: true }),
        fc.double({ min: 5, max: 30, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        (factor, air, speed, throttle) => {
          const scaled = scaledDrive(drive, { force: factor, regeneration: 1 });
          expectClose(
            wheelForce(scaled, 3, speed, throttle, air),
            wheelForce(drive, 3, speed, throttle, factor * air),
            1e-6,
          );
        },
      ),
      { seed: 5, numRuns: 200 },
    );
  });
});
