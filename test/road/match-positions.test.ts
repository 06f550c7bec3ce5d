import geodesic from 'geographiclib-geodesic';
import { describe, expect, it } from 'vitest';
import { type Line, matchPositions } from '../../src/road/match-positions.ts';
import { expectClose } from '../compare.ts';
import { randomness } from './synthetic-road.ts';

// Karney's algorithm, as in the tests of track/: the places of these roads do not come from the code under test.
const WGS84 = geodesic.Geodesic.WGS84;

/** A road by its headings, a knot each 10 m. */
function road(headingOf: (way: number) => number, length: number, lat = 51.9, lon = -14.6): Line {
  const size = length / 10 + 1;
  const [latitudeDeg, longitudeDeg] = [new Float64Array(size).fill(lat), new Float64Array(size).fill(lon)];
  for (let i = 1; i < size; i++) {
    const next = WGS84.Direct(latitudeDeg[i - 1]!, longitudeDeg[i - 1]!, headingOf((i - 1) * 10), 10);
    [latitudeDeg[i], longitudeDeg[i]] = [next.lat2!, next.lon2!];
  }
  return {
    size,
    distance: Float64Array.from({ length: size }, (_, i) => i * 10),
    latitudeDeg,
    longitudeDeg,
    turnsAt: null,
  };
}

/** Positions `aside` metres to the right of knots, in the order given. */
function beside(line: Line, knots: readonly number[], aside: number): [Float64Array, Float64Array] {
  const places = knots.map((k) => {
    const from = Math.min(k, line.size - 2);
    const [lat1, lon1] = [line.latitudeDeg[from]!, line.longitudeDeg[from]!];
    const { azi1 } = WGS84.Inverse(lat1, lon1, line.latitudeDeg[from + 1]!, line.longitudeDeg[from + 1]!);
    return WGS84.Direct(line.latitudeDeg[k]!, line.longitudeDeg[k]!, azi1! + 90, aside);
  });
  return [Float64Array.from(places, ({ lat2 }) => lat2!), Float64Array.from(places, ({ lon2 }) => lon2!)];
}
const knots = (from: number, to: number, step: number): number[] =>
  Array.from({ length: Math.floor(Math.abs(to - from) / Math.abs(step)) + 1 }, (_, i) => from + i * step);

describe('positions beside a straight road', () => {
  it.each([
    ['at 52 degrees north', 51.9, -14.6],
    ['on the equator', 0, 20],
    ['over the antimeridian', -17, 179.999],
    ['at 70 degrees south', -70, 60],
  ])('lie where they are, as far off as they are: %s', (_where, lat, lon) => {
    const line = road(() => 60, 2000, lat, lon);
    const at = knots(1, 198, 3);
    const { along, off } = matchPositions(line, ...beside(line, at, 7));
    expectClose(
      along,
      at.map((k) => 10 * k),
      0.1,
    );
    expectClose(
      off,
      at.map(() => 7),
      0.02,
    );
  });

  it('lie nowhere farther than 30 m off, or beyond an end', () => {
    const line = road(() => 90, 1000);
    expect([...matchPositions(line, ...beside(line, [50], 29)).off].every((off) => off > 28)).toBe(true);
    expect(matchPositions(line, ...beside(line, [50], 31)).along[0]).toBeNaN();
    for (const [end, away] of [
      [0, 270],
      [100, 90],
    ] as const) {
      const place = WGS84.Direct(line.latitudeDeg[end]!, line.longitudeDeg[end]!, away, 12);
      const { along } = matchPositions(line, Float64Array.of(place.lat2!), Float64Array.of(place.lon2!));
      expect(along[0]).toBeNaN();
    }
  });

  it('of which there are none give none', () => {
    expect(
      matchPositions(
        road(() => 0, 100),
        new Float64Array(0),
        new Float64Array(0),
      ).along.length,
    ).toBe(0);
  });
});

describe('a road that comes near itself', () => {
  // Out, a half turn of 12 m radius, and back 24 m beside itself.
  const hairpin = road((way) => (way < 600 ? 0 : way < 638 ? ((way - 600) / 38) * 180 : 180), 1200);

  it('keeps the legs of a hairpin apart, with positions that scatter over to the other', () => {
    const random = randomness(3);
    const at = knots(0, 119, 1);
    const [lat, lon] = beside(hairpin, at, 0);
    const scattered = at.map((_, i) =>
      WGS84.Direct(lat[i]!, lon[i]!, 360 * random.uniform(), Math.abs(6 * random.normal())),
    );
    const { along } = matchPositions(
      hairpin,
      Float64Array.from(scattered, ({ lat2 }) => lat2!),
      Float64Array.from(scattered, ({ lon2 }) => lon2!),
    );
    const found = at.filter((_, i) => !Number.isNaN(along[i]!));
    expect(found.length).toBeGreaterThan(110);
    for (const k of found) expect(Math.abs(along[k]! - 10 * k), `at ${10 * k} m`).toBeLessThan(25);
  });

  it('goes out, and then back, where it is driven both ways', () => {
    const out = road(() => 45, 1000);
    const mirrored = (values: Float64Array): Float64Array =>
      Float64Array.from([...values, ...values.toReversed()]);
    const both: Line = {
      size: 2 * out.size,
      distance: Float64Array.from([...out.distance, ...out.distance.toReversed().map((x) => 2000 - x)]),
      latitudeDeg: mirrored(out.latitudeDeg),
      longitudeDeg: mirrored(out.longitudeDeg),
      turnsAt: 1000,
    };
    const at = [...knots(2, 100, 2), ...knots(98, 2, -2)];
    const { along } = matchPositions(both, ...beside(both, at, 0));
    expectClose(
      along,
      at.map((k, i) => (i < 50 ? 10 * k : 2000 - 10 * k)),
      0.1,
    );
  });

  it('goes backwards along it under a ride against it', () => {
    const line = road((way) => way / 20, 1000);
    const at = knots(98, 2, -2);
    expectClose(
      matchPositions(line, ...beside(line, at, 0)).along,
      at.map((k) => 10 * k),
      0.1,
    );
  });

  it('finds a crossing of itself on the way that is ridden', () => {
    // A loop of 360 degrees over 1200 m, that crosses the way it came by.
    const loop = road((way) => (way < 400 ? 0 : way < 1600 ? ((way - 400) / 1200) * 450 : 90), 2400);
    const at = knots(0, 238, 2);
    expectClose(
      matchPositions(loop, ...beside(loop, at, 2)).along,
      at.map((k) => 10 * k),
      1,
    );
  });
});
