import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { areaPath, envelopePath, linePath, type Point, thinned } from '../../../src/report/charts/paths.ts';

/** Height of a polyline at x; x increases. */
function heightAt(points: readonly Point[], x: number): number {
  const next = points.findIndex((p) => p[0] >= x);
  const [a, b] = [points[Math.max(0, next - 1)]!, points[next]!];
  return b[0] > a[0] ? a[1] + ((b[1] - a[1]) * (x - a[0])) / (b[0] - a[0]) : b[1];
}

describe('thinned points', () => {
  it('keep the corners of a straight-edged line and nothing between them', () => {
    const line = Array.from({ length: 101 }, (_, i): Point => [i, i <= 40 ? 2 * i : 80]);
    expect(thinned(line)).toEqual([line[0], line[40], line[100]]);
  });

  it('stay within twice the tolerance of every point that they leave out', () => {
    const heights = fc.array(fc.double({ min: -50, max: 50, noNaN: true }), { minLength: 3, maxLength: 200 });
    fc.assert(
      fc.property(heights, fc.double({ min: 0.01, max: 20, noNaN: true }), (list, tolerance) => {
        const line = list.map((y, i): Point => [i, y]);
        const kept = thinned(line, tolerance);
        for (const [x, y] of line)
          expect(Math.abs(heightAt(kept, x) - y)).toBeLessThanOrEqual(2 * tolerance + 1e-9);
        expect(kept[0]).toEqual(line[0]);
        expect(kept[kept.length - 1]).toEqual(line[line.length - 1]);
      }),
      { seed: 8 },
    );
  });

  it('keep both ends of a step', () => {
    const step: Point[] = [
      [0, 0],
      [1, 0],
      [1, 5],
      [2, 5],
    ];
    expect(thinned(step)).toEqual(step);
  });
});

describe('paths', () => {
  it('are broken where a point is not finite', () => {
    expect(
      linePath([
        [0, 0],
        [1, 2],
        [2, Number.NaN],
        [3, 1],
        [4, 1],
      ]),
    ).toBe('M0,0L1,2M3,1L4,1');
    expect(linePath([])).toBe('');
  });

  it('close around an area and an envelope', () => {
    expect(
      areaPath(
        [
          [0, 1],
          [2, 3],
        ],
        10,
      ),
    ).toBe('M0,10L2,10L2,3L0,1Z');
    expect(
      envelopePath(
        [
          [0, 1],
          [2, 3],
        ],
        [
          [0, 0],
          [2, 1],
        ],
      ),
    ).toBe('M0,0L2,1L2,3L0,1Z');
  });
});
