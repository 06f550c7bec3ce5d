import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { boundingBox, planLine, simplifyLine, unwindLongitudes } from '../../src/track/plan-geometry.ts';
import { readTrack } from '../../src/track/read-track.ts';
import { expectClose } from '../compare.ts';

// A sphere's metres are within 0.6 % of the ellipsoid's, which is enough for a tolerance.
const DEGREE = (6371008.8 * Math.PI) / 180;

function toSegment(p: readonly number[], a: readonly number[], b: readonly number[]): number {
  const [dx, dy] = [b[0]! - a[0]!, b[1]! - a[1]!];
  const square = dx * dx + dy * dy;
  const t = square === 0 ? 0 : ((p[0]! - a[0]!) * dx + (p[1]! - a[1]!) * dy) / square;
  const at = Math.min(1, Math.max(0, t));
  return Math.hypot(p[0]! - a[0]! - at * dx, p[1]! - a[1]! - at * dy);
}

function farthest(lat: Float64Array, lon: Float64Array, kept: Int32Array): number {
  const scale = DEGREE * Math.cos((lat[0]! * Math.PI) / 180);
  const place = (i: number): number[] => [lon[i]! * scale, lat[i]! * DEGREE];
  let worst = 0;
  for (let k = 1; k < kept.length; k++)
    for (let i = kept[k - 1]! + 1; i < kept[k]!; i++)
      worst = Math.max(worst, toSegment(place(i), place(kept[k - 1]!), place(kept[k]!)));
  return worst;
}

describe('a simplified line', () => {
  it('keeps both ends, and every point left out within the tolerance', () => {
    const walks = fc.array(
      fc.record({ lat: fc.integer({ min: -300, max: 300 }), lon: fc.integer({ min: -300, max: 300 }) }),
      { minLength: 1, maxLength: 200 },
    );
    fc.assert(
      fc.property(walks, fc.constantFrom(0, 1, 10, 100), (steps, tolerance) => {
        let [a, b] = [47, 8];
        const lat = new Float64Array(steps.length);
        const lon = new Float64Array(steps.length);
        steps.forEach((step, i) => {
          a += step.lat * 1e-6;
          b += step.lon * 1e-6;
          [lat[i], lon[i]] = [a, b];
        });
        const kept = simplifyLine(lat, lon, tolerance);
        expect([kept[0], kept.at(-1)]).toEqual([0, steps.length - 1]);
        expect(kept.every((i, k) => k === 0 || i > kept[k - 1]!)).toBe(true);
        expect(farthest(lat, lon, kept)).toBeLessThanOrEqual(tolerance * 1.01 + 1e-3);
      }),
      { seed: 20260, numRuns: 100 },
    );
  });

  it('of a recorded run has a tenth of its points at 2 m', () => {
    const file = new URL(
      '../../node_modules/gpx-parse/tests/integration/data/route-1.1.gpx',
      import.meta.url,
    );
    const { latitudeDeg, longitudeDeg, size } = readTrack({ name: 'run.gpx', bytes: readFileSync(file) });
    const kept = simplifyLine(latitudeDeg!, longitudeDeg!, 2);
    expect(kept.length).toBeGreaterThan(20);
    expect(kept.length).toBeLessThan(size / 10);
    expect(farthest(latitudeDeg!, longitudeDeg!, kept)).toBeLessThan(2.02);
  });

  it('of one place, one point or none is what it must be', () => {
    const line = (...values: number[]): Float64Array => Float64Array.from(values);
    expect(Array.from(simplifyLine(line(), line(), 1))).toEqual([]);
    expect(Array.from(simplifyLine(line(1), line(1), 1))).toEqual([0]);
    expect(Array.from(simplifyLine(line(1, 1, 1, 1), line(2, 2, 2, 2), 1))).toEqual([0, 3]);
    expect(Array.from(simplifyLine(line(0, 0.001, 0.002), line(0, 0, 0), 1))).toEqual([0, 2]);
    // There and back the same way: the turning point stays.
    expect(Array.from(simplifyLine(line(0, 0.001, 0.002, 0.001, 0), line(0, 0, 0, 0, 0), 1))).toEqual([
      0, 2, 4,
    ]);
  });
});

describe('a line in plan', () => {
  it('spans the antimeridian without a step', () => {
    const lat = Float64Array.from([10, 10, 10, 11]);
    const lon = Float64Array.from([179.9, -179.9, -179.8, 179.95]);
    expectClose(unwindLongitudes(lon), [179.9, 180.1, 180.2, 179.95], 1e-9);
    expectClose(boundingBox(lat, lon), [179.9, 10, -179.8, 11], 1e-9);
    const { x } = planLine(lat, lon);
    expect(x[1]! - x[0]!).toBeGreaterThan(21_000);
    expect(x[1]! - x[0]!).toBeLessThan(22_300);
  });

  it('is in metres to the east and north of its middle', () => {
    // Length of a degree at 45 N: 111131.779 m of latitude, 78846.835 m of longitude (from memory of WGS 84 tables).
    const { x, y } = planLine(Float64Array.from([44.999, 45.001]), Float64Array.from([7, 7.002]));
    expectClose(x, [-78.8468, 78.8468], 1e-3);
    expectClose(y, [-111.1318, 111.1318], 1e-3);
  });
});
