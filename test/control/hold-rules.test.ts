// The rules of a unit, sample by sample, against counts by hand.

import fc from 'fast-check';
import { expect, test } from 'vitest';
import { BUS_MEASURED, BUS_REFERENCE } from '../../src/control/bus.ts';
import { holdRules, RULES } from '../../src/control/hold-rules.ts';
import type { SupervisorSetup } from '../../src/control/supervisor-setup.ts';

const MEMORY = 40;
const none: SupervisorSetup = {
  lowestSpeed: 0,
  tooSlow: null,
  tooFast: null,
  believable: null,
  resumeRamp: null,
  tap: 0,
  tapRamp: null,
  override: { integral: 'runs', reentry: 0 },
};

/** Name of the first rule that is broken and the sample in which it is; the reference is 20 m/s, the sample 0.1 s. */
function firstBroken(
  setup: Partial<SupervisorSetup>,
  start: number,
  measured: readonly number[],
  overridden = false,
) {
  const rules = holdRules({ ...none, ...setup }, 0.1, MEMORY);
  const bus = new Float64Array(50);
  bus[BUS_REFERENCE] = 20;
  bus[BUS_MEASURED] = start;
  rules.begin(bus);
  for (const [k, y] of measured.entries()) {
    bus[BUS_MEASURED] = y;
    const broken = rules.broken(bus, overridden);
    if (broken > 0) return [RULES[broken - 1], k];
  }
  return null;
}

test('too slow for so long ends hold at the sample by which the time has passed', () => {
  const tooSlow = { by: 2, for: 0.3 };
  // Below 18 m/s from sample 2 on: 0.3 s after it is sample 5.
  expect(firstBroken({ tooSlow }, 20, [19, 18, 17.9, 17, 16, 17.9, 17])).toEqual(['too_slow', 5]);
  // Back for one sample: the time starts anew.
  expect(firstBroken({ tooSlow }, 20, [17, 17, 17, 18, 17, 17, 17, 17])).toEqual(['too_slow', 7]);
  expect(firstBroken({ tooSlow }, 20, [17, 17, 17, 18, 17, 17, 17, 18])).toBeNull();
  expect(firstBroken({ tooSlow: { by: 2, for: 0 } }, 20, [19, 17.9])).toEqual(['too_slow', 1]);
});

test('too fast likewise, but not while the rider asks for more', () => {
  const tooFast = { by: 2, for: 0.2 };
  const speeds = [21, 22, 22.1, 23, 24, 25];
  expect(firstBroken({ tooFast }, 20, speeds)).toEqual(['too_fast', 4]);
  expect(firstBroken({ tooFast }, 20, speeds, true)).toBeNull();
});

test('a change is believed up to the greatest one, up and down', () => {
  expect(firstBroken({ believable: 10 }, 20, [20.99, 20, 19.01])).toBeNull();
  expect(firstBroken({ believable: 10 }, 20, [20.9, 21.95])).toEqual(['sensor_not_believed', 1]);
  expect(firstBroken({ believable: 10 }, 20, [19.9, 18.85])).toEqual(['sensor_not_believed', 1]);
});

test('what is not believed says nothing of the speed, and a speed that is too low is not called too slow', () => {
  const all = { believable: 10, lowestSpeed: 8, tooSlow: { by: 2, for: 0 } };
  expect(firstBroken(all, 20, [0])).toEqual(['sensor_not_believed', 0]);
  expect(firstBroken({ ...all, believable: null }, 20, [7.9])).toEqual(['below_lowest_speed', 0]);
  expect(firstBroken({ ...all, believable: null }, 20, [8])).toEqual(['too_slow', 0]);
});

test('hold may take over at the lowest speed and not below it', () => {
  const { refuses } = holdRules({ ...none, lowestSpeed: 8 }, 0.1, MEMORY);
  expect([refuses(8), refuses(7.999), refuses(30)]).toEqual([false, true, false]);
});

test('over random speeds it is the first sample at which all of the last ones were too slow', () => {
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: 15, max: 21, noNaN: true }), { minLength: 1, maxLength: 60 }),
      fc.integer({ min: 0, max: 6 }),
      (speeds, samples) => {
        const found = speeds.findIndex(
          (_, k) => k >= samples && speeds.slice(k - samples, k + 1).every((y) => y < 18),
        );
        const broken = firstBroken({ tooSlow: { by: 2, for: 0.1 * samples } }, 20, speeds);
        expect(broken).toEqual(found < 0 ? null : ['too_slow', found]);
      },
    ),
    { numRuns: 200, seed: 5 },
  );
});
