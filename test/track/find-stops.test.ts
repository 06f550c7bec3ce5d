import { describe, expect, it } from 'vitest';
import { roadOfTrack } from '../../src/road/road-of-track.ts';
import { readTrack } from '../../src/track/read-track.ts';
import type { Track } from '../../src/track/track.ts';
import { roadOptions } from '../road/road-fixtures.ts';
import { type Randomness, randomness } from '../road/synthetic-road.ts';

/** Metres for a degree at 51 N: meridian 111 259, parallel 70 197 (WGS 84, from memory of geodetic tables, to 1e-3). */
const NORTH = 111_259;
const EAST = 70_197;

interface Place {
  readonly x: number;
  readonly y: number;
  readonly t: number;
}

/** A ride north at 10 m/s for 1 km, braking and starting by 2 m/s2 around a rest, and 1 km on; one point a second. */
function ride(rest: number, scatter: (second: number) => readonly [number, number]): Place[] {
  const places: Place[] = [];
  for (let t = 0; t <= 210 + rest; t++) {
    // 97.5 s at 10 m/s, 5 s braking over 25 m, the rest, 5 s up over 25 m.
    const before = Math.min(t, 97.5);
    const braking = Math.min(Math.max(t - 97.5, 0), 5);
    const starting = Math.min(Math.max(t - 102.5 - rest, 0), 5);
    const after = Math.max(t - 107.5 - rest, 0);
    const y = 10 * before + 10 * braking - braking * braking + starting * starting + 10 * after;
    const resting = t >= 102.5 && t <= 102.5 + rest;
    const [dx, dy] = resting ? scatter(t) : [0, 0];
    places.push({ x: dx, y: y + dy, t });
  }
  return places;
}

/** Length of the ride without any scatter [m]: 975 + 25 + 25 and what is left of 210 s at 10 m/s. */
const LENGTH = 975 + 25 + 25 + 10 * (210 - 107.5);

function trackOfPlaces(places: readonly Place[], timed: boolean): Track {
  const points = places.map(({ x, y, t }) => {
    const time = timed ? `<time>${new Date(1_715_325_600_000 + t * 1000).toISOString()}</time>` : '';
    return `<trkpt lat="${(51 + y / NORTH).toFixed(7)}" lon="${(-1 + x / EAST).toFixed(7)}"><ele>50</ele>${time}</trkpt>`;
  });
  const text = `<gpx version="1.1"><trk><trkseg>${points.join('\n')}</trkseg></trk></gpx>`;
  return readTrack({ name: 'a.gpx', bytes: new TextEncoder().encode(text) });
}

const white = (random: Randomness, sd: number) => (): [number, number] => [
  sd * random.normal(),
  sd * random.normal(),
];

/** First-order wander: s.d. [m], correlation time [s]. */
function wander(random: Randomness, sd: number, correlation: number): () => [number, number] {
  const keep = Math.exp(-1 / correlation);
  const put = sd * Math.sqrt(1 - keep * keep);
  let [x, y] = [0, 0];
  return () => {
    x = keep * x + put * random.normal();
    y = keep * y + put * random.normal();
    return [x, y];
  };
}

/** Furthest from north, either way round [deg], and the strongest bend [1/m]. */
function worstHeading(track: Track): readonly [number, number] {
  const road = roadOfTrack(track, roadOptions({ elevationSource: 'barometric' }));
  const off = road.heading!.map((psi) => Math.abs(((psi * 180) / Math.PI + 180) % 360) - 180).map(Math.abs);
  return [Math.max(...off), Math.max(...road.curvature!.map(Math.abs))];
}

describe('a stop', () => {
  const kinds = [
    ['white noise of 1.5 m', (random: Randomness) => white(random, 1.5)],
    ['white noise of 0.5 m', (random: Randomness) => white(random, 0.5)],
    ['a wander of 3 m in 30 s', (random: Randomness) => wander(random, 3, 30)],
  ] as const;
  for (const [words, kind] of kinds)
    for (const timed of [true, false])
      for (const rest of [30, 60, 300])
        it(`of ${rest} s in ${words} adds no road, ${timed ? 'with' : 'without'} times`, () => {
          for (let seed = 1; seed <= 12; seed++) {
            const places = ride(rest, kind(randomness(seed)));
            const track = trackOfPlaces(places, timed);
            const excess = track.distance.at(-1)! - LENGTH;
            expect(Math.abs(excess)).toBeLessThan(2);
            const [heading, bend] = worstHeading(track);
            expect(heading).toBeLessThan(3);
            expect(bend).toBeLessThan(1 / 300);
            expect(track.repairs.map(({ kind: repair }) => repair)).toEqual(['doubled_point']);
            const { from, to, message } = track.repairs[0]!;
            expect(Math.abs(from - 1000)).toBeLessThan(8);
            expect(to).toBe(from);
            if (timed) expect(Number(/(\d+) s at rest/.exec(message)![1])).toBeGreaterThanOrEqual(rest - 5);
          }
        });
});

describe('no stop', () => {
  const circle = (radius: number, step: number): Place[] =>
    Array.from({ length: Math.ceil((2 * Math.PI * radius) / step) }, (_, i) => {
      const turned = (i * step) / radius;
      return { x: radius * (1 - Math.cos(turned)), y: radius * Math.sin(turned), t: i };
    });
  const ahead = (step: number, points: number, after: Place): Place[] =>
    Array.from({ length: points }, (_, i) => ({
      x: after.x,
      y: after.y + (i + 1) * step,
      t: after.t + i + 1,
    }));

  it.each([
    [5, 1],
    [8, 2],
    [8, 0.5],
  ])('is found in a circle of %f m driven once, points %f m apart, without times', (radius, step) => {
    const round = circle(radius, step);
    const track = trackOfPlaces([...round, ...ahead(step, 300, round.at(-1)!)], false);
    expect(track.repairs).toEqual([]);
  });

  it('is found in walking the machine along at 1 m/s with points that scatter', () => {
    for (let seed = 21; seed <= 32; seed++) {
      const random = randomness(seed);
      // Without times, a scatter as wide as the steps is a knot.
      for (const [timed, sd] of [
        [true, 1],
        [false, 0.5],
      ] as const) {
        const places = Array.from({ length: 300 }, (_, t) => ({
          x: sd * random.normal(),
          y: t + sd * random.normal(),
          t,
        }));
        const stops = trackOfPlaces(places, timed).repairs.filter(({ points }) => points > 5);
        expect(stops).toEqual([]);
      }
    }
  });

  it('is found in a hairpin of 6 m taken at 3 m/s', () => {
    const arc = circle(6, 3).slice(0, 7);
    const up = Array.from({ length: 60 }, (_, t) => ({ x: 0, y: 3 * (t - 60), t }));
    const turn = arc.map((place, i) => ({ ...place, t: 60 + i }));
    const down = Array.from({ length: 60 }, (_, i) => ({ x: 12, y: -3 * (i + 1), t: 67 + i }));
    for (const timed of [true, false])
      expect(trackOfPlaces([...up, ...turn, ...down], timed).repairs).toEqual([]);
  });
});
