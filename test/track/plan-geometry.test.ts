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

/** A line in plan alone: its elevations are all the same. */
function levelLine(latitudeDeg: Float64Array, longitudeDeg: Float64Array) {
  return {
    latitudeDeg,
    longitudeDeg,
    distance: latitudeDeg.map((_, i) => 10 * i),
    elevation: latitudeDeg.map(() => 7),
  };
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
        const kept = simplifyLine(levelLine(lat, lon), tolerance);
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
    const kept = simplifyLine(levelLine(latitudeDeg!, longitudeDeg!), 2);
    expect(kept.length).toBeGreaterThan(20);
    expect(kept.length).toBeLessThan(size / 10);
    expect(farthest(latitudeDeg!, longitudeDeg!, kept)).toBeLessThan(2.02);
  });

  it('of one place, one point or none is what it must be', () => {
    const line = (...values: number[]): Float64Array => Float64Array.from(values);
    const kept = (lat: Float64Array, lon: Float64Array): number[] =>
      Array.from(simplifyLine(levelLine(lat, lon), 1));
    expect(kept(line(), line())).toEqual([]);
    expect(kept(line(1), line(1))).toEqual([0]);
    expect(kept(line(1, 1, 1, 1), line(2, 2, 2, 2))).toEqual([0, 3]);
    expect(kept(line(0, 0.001, 0.002), line(0, 0, 0))).toEqual([0, 2]);
    // There and back the same way: the turning point stays.
    expect(kept(line(0, 0.001, 0.002, 0.001, 0), line(0, 0, 0, 0, 0))).toEqual([0, 2, 4]);
  });

  it('keeps the heights of a straight road: a crest of 8 m stays, one of 0.4 m goes', () => {
    const at = (...values: number[]): Float64Array => Float64Array.from(values);
    const straight = (height: number) => ({
      latitudeDeg: at(50, 50.001, 50.002, 50.003),
      longitudeDeg: at(0, 0, 0, 0),
      distance: at(0, 111, 222, 333),
      elevation: at(0, 0, height, 0),
    });
    expect(Array.from(simplifyLine(straight(8), 1))).toEqual([0, 1, 2, 3]);
    expect(Array.from(simplifyLine(straight(0.4), 1))).toEqual([0, 3]);
  });

  it('leaves no point farther than the tolerance in plan or in height, whichever of the two kept it', () => {
    const random = fc.integer({ min: -30, max: 30 });
    const walk = fc.array(fc.tuple(random, random, random), { minLength: 2, maxLength: 150 });
    fc.assert(
      fc.property(walk, (steps) => {
        const column = (k: 0 | 1 | 2, start: number, scale: number): Float64Array => {
          let value = start;
          return Float64Array.from(steps, (step) => (value += step[k] * scale));
        };
        const line = {
          latitudeDeg: column(0, 47, 1e-6),
          longitudeDeg: column(1, 8, 1e-6),
          distance: Float64Array.from(steps, (_, i) => 5 * i),
          elevation: column(2, 300, 0.05),
        };
        const kept = simplifyLine(line, 1);
        expect(farthest(line.latitudeDeg, line.longitudeDeg, kept)).toBeLessThanOrEqual(1.02);
        for (let k = 1; k < kept.length; k++)
          for (let i = kept[k - 1]!; i <= kept[k]!; i++) {
            const [a, b] = [kept[k - 1]!, kept[k]!];
            const t = (line.distance[i]! - line.distance[a]!) / (line.distance[b]! - line.distance[a]!);
            const between = line.elevation[a]! + t * (line.elevation[b]! - line.elevation[a]!);
            // Half the tolerance square to the line, whose grade is at most 1.5 / 5.
            expect(Math.abs(line.elevation[i]! - between)).toBeLessThanOrEqual(1.05);
          }
      }),
      { seed: 1973 },
    );
  });

  it('of a hundred thousand saw teeth comes to an end, with all of them', () => {
    const zigzag = Float64Array.from({ length: 100_000 }, (_, i) => 50 + 1e-3 * (i % 2));
    const east = Float64Array.from({ length: 100_000 }, (_, i) => 1e-5 * i);
    expect(simplifyLine(levelLine(zigzag, east), 1).length).toBe(100_000);
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
