import { describe, expect, test } from 'vitest';
import { fitStep, joinSteps } from '../../src/identify/fit-step.ts';
import type { StepRecord } from '../../src/identify/step-test.ts';
import { twoPointStep } from '../../src/identify/two-point-step.ts';
import { seededStream } from '../../src/numeric/random.ts';
import { expectClose } from '../compare.ts';

interface Response {
  readonly gain: number;
  readonly lag: number;
  readonly delay: number;
}
const record = (
  { gain, lag, delay }: Response,
  noise: () => number = () => 0,
  { step = 0.1, until = 60, change = 0.05 } = {},
): StepRecord => {
  const time = Float64Array.from({ length: Math.round((until + 10) / step) + 1 }, (_, i) => -10 + i * step);
  return {
    file: 'made.csv',
    name: 'made.csv',
    at: 10,
    from: 0.3,
    to: 0.3 + change,
    time,
    speed: time.map((t) => 16 + gain * change * (1 - Math.exp(-Math.max(0, t - delay) / lag)) + noise()),
  };
};

describe('two points of a response', () => {
  test('give what the formula gives: 1.3, 8 s, 0.4 s come out as 8.0039 s and 0.3935 s', () => {
    // t28.3 = 0.4 + 8 ln(1 / 0.717) = 3.0614 s, t63.2 = 0.4 + 8 ln(1 / 0.368) = 8.3974 s: worked out outside of the
    // program; the record is long, so that its tail stands for the end.
    const two = twoPointStep(
      record({ gain: 1.3, lag: 8, delay: 0.4 }, undefined, { step: 0.01, until: 400 }),
    );
    expectClose(two.gain, 1.3, 1e-9);
    expectClose(two.timeConstant, 8.0039, 2e-4);
    expectClose(two.delay, 0.3935, 2e-4);
  });
});

describe('the fit of a step', () => {
  test('is exact for a response without noise, up and down', () => {
    for (const change of [0.05, -0.08]) {
      const { fit, before, settled } = fitStep(
        record({ gain: 7.5, lag: 8, delay: 0.43 }, undefined, { change }),
      )!;
      expectClose(fit.gain.value, 7.5, 1e-7);
      expectClose(fit.timeConstant.value, 8, 1e-6);
      expectClose(fit.delay.value, 0.43, 1e-6);
      expectClose([before, settled], [16, 16 + 7.5 * change], 1e-8);
    }
  });

  test('keeps a delay of nothing', () => {
    const { fit } = fitStep(record({ gain: 5, lag: 3, delay: 0 }))!;
    expectClose(fit.delay.value, 0, 1e-6);
    expectClose(fit.timeConstant.value, 3, 1e-6);
  });

  test('has intervals that hold the truth in about 95 % of seeded records, white noise or coloured', () => {
    for (const keep of [0, 0.9]) {
      const random = seededStream(63 + keep * 10);
      const hits = { gain: 0, timeConstant: 0, delay: 0 };
      const truth = { gain: 8, timeConstant: 8, delay: 0.4 };
      const TRIALS = 200;
      for (let trial = 0; trial < TRIALS; trial++) {
        let drift = 0;
        const noise = () => {
          drift = keep * drift + 0.02 * Math.sqrt(1 - keep * keep) * random.normal();
          return drift;
        };
        const { fit } = fitStep(record({ gain: 8, lag: 8, delay: 0.4 }, noise, { step: 0.2, until: 45 }))!;
        for (const name of ['gain', 'timeConstant', 'delay'] as const) {
          const { low, high } = fit[name];
          hits[name] += low <= truth[name] && truth[name] <= high ? 1 : 0;
        }
      }
      for (const hit of Object.values(hits)) {
        expect(hit / TRIALS).toBeGreaterThan(0.9);
        expect(hit / TRIALS).toBeLessThan(0.995);
      }
    }
  });

  test('is none where the speed does not answer', () => {
    expect(fitStep(record({ gain: 0, lag: 8, delay: 0.4 }))).toBe(null);
  });

  test('joins steps by their mean, with the scatter between them', () => {
    const lags = [7, 8, 9];
    const steps = lags.map((lag) => fitStep(record({ gain: 8, lag, delay: 0.4 }))!);
    const { all, up, down } = joinSteps(steps);
    expectClose(all.timeConstant.value, 8, 1e-6);
    // of 7, 8, 9: standard deviation 1, of the mean 1 / sqrt 3; Student's t of 2 degrees is 4.303
    expectClose(all.timeConstant.standardError, 1 / Math.sqrt(3), 1e-6);
    expectClose(all.timeConstant.high - 8, 4.303 / Math.sqrt(3), 1e-3);
    expect(up).toEqual(all);
    expect(down).toBe(null);
  });
});
