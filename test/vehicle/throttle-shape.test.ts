import { expect, test } from 'vitest';
import { shapeNodes, throttleShape } from '../../src/vehicle/throttle-shape.ts';
import { expectClose } from '../compare.ts';

test.each([0.1, 1, 3, 4, 5, 12, 20])(
  'shape %d is straight between its nodes within 0.2 %% of full torque',
  (k) => {
    const shape = (x: number): number => (1 - Math.exp(-k * x)) / (1 - Math.exp(-k));
    const nodes = shapeNodes(k);
    let worst = 0;
    for (let i = 1; i < nodes.length; i++) {
      const [from, to] = [nodes[i - 1]!, nodes[i]!];
      for (let part = 0; part <= 1; part += 0.01) {
        const x = from + part * (to - from);
        const straight = shape(from) + part * (shape(to) - shape(from));
        worst = Math.max(worst, shape(x) - straight);
        expectClose(throttleShape(k)(x), shape(x), 1e-14);
      }
    }
    expect(worst).toBeLessThan(0.002);
    // Few: with one cell less it would be too coarse somewhere.
    expect(worst).toBeGreaterThan(0.0009);
    expect([nodes[0], nodes.at(-1)]).toEqual([0, 1]);
  },
);

test('in proportion it needs one cell, like a plate at 5 fifteen', () => {
  expect(shapeNodes(0)).toEqual(Float64Array.of(0, 1));
  expect(shapeNodes(5).length).toBe(16);
  expect(throttleShape(0)(0.3)).toBe(0.3);
});
