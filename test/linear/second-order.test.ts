import { Matrix } from 'ml-matrix';
import { describe, expect, test } from 'vitest';
import { holdInput } from '../../src/linear/hold-input.ts';
import { parabolicPeak, stepFigures } from '../../src/linear/step-figures.ts';
import { expectClose } from '../compare.ts';
import { readReference } from '../read-reference.ts';

interface Row {
  readonly zeta: number;
  readonly overshoot_pct: number;
  readonly rise_10_90_times_w0: number;
  readonly settling_2pct_times_w0: number;
  readonly peak_time_times_w0?: number;
}
const { second_order_step } = readReference<{ second_order_step: { rows: Row[] } }>(
  'linear/published_examples.json',
);

/** Unit step of 1 / (s^2 + 2 zeta s + 1), by repeated exact steps. */
function step(zeta: number, spacing: number, duration: number): Float64Array {
  const { phi, gamma } = holdInput(
    new Matrix([
      [0, 1],
      [-1, -2 * zeta],
    ]),
    new Matrix([[0], [1]]),
    spacing,
  );
  const values = new Float64Array(Math.round(duration / spacing) + 1);
  let x = 0;
  let v = 0;
  for (let i = 1; i < values.length; i++) {
    const next = phi.get(0, 0) * x + phi.get(0, 1) * v + gamma.get(0, 0);
    v = phi.get(1, 0) * x + phi.get(1, 1) * v + gamma.get(1, 0);
    x = next;
    values[i] = x;
  }
  return values;
}

describe('stepFigures of the second-order system', () => {
  test.each(second_order_step.rows)('with damping $zeta agrees with the published table', (row) => {
    const found = stepFigures(step(row.zeta, 0.005, 40), 0.005, 1, 0.02);
    expectClose(100 * found.overshoot, row.overshoot_pct, 1e-6);
    expectClose(found.settling, row.settling_2pct_times_w0, 1e-4);
    expectClose(found.rise, row.rise_10_90_times_w0, 2e-5);
    if (row.peak_time_times_w0 !== undefined) expectClose(found.peakTime, row.peak_time_times_w0, 1e-4);
  });
  test('scales with the final value and knows a response that does not settle', () => {
    const values = step(0.4, 0.01, 30);
    const unit = stepFigures(values, 0.01, 1, 0.02);
    const half = stepFigures(
      values.map((x) => -x / 2),
      0.01,
      -0.5,
      0.02,
    );
    expectClose(
      [half.overshoot, half.settling, half.rise],
      [unit.overshoot, unit.settling, unit.rise],
      1e-12,
    );
    expect(stepFigures(step(0.05, 0.01, 10), 0.01, 1, 0.02).settling).toBe(Number.POSITIVE_INFINITY);
    expect(stepFigures(Float64Array.of(1, 1, 1), 1, 1, 0.02)).toMatchObject({
      overshoot: 0,
      settling: 0,
      rise: 0,
    });
  });
});

test('parabolicPeak finds the top of a parabola between two samples', () => {
  const values = Float64Array.from({ length: 10 }, (_, i) => 7 - (i - 4.3) ** 2);
  const peak = parabolicPeak(values);
  expectClose([peak.index, peak.value], [4.3, 7], 1e-14);
});
