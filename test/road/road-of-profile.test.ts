import { describe, expect, it } from 'vitest';
import type { ProfileOptions } from '../../src/road/options.ts';
import { roadOfProfile } from '../../src/road/road-of-profile.ts';
import type { Profile, ProfilePiece } from '../../src/track/track.ts';
import { expectClose } from '../compare.ts';
import { roadOptions, windFrom } from './road-fixtures.ts';
import { randomness } from './synthetic-road.ts';

const piece = (extent: number, grade: number, some: Partial<ProfilePiece> = {}): ProfilePiece => ({
  extent,
  grade,
  heading: null,
  headwind: null,
  ...some,
});
const profile = (pieces: ProfilePiece[], some: Partial<Profile> = {}): Profile => ({
  by: 'length',
  pieces,
  verticalCurve: 0,
  startElevation: 20,
  ...some,
});
const options = (some: Partial<ProfileOptions> = {}): ProfileOptions => roadOptions(some);

describe('road of a written profile', () => {
  it('steps by two knots at one place, and has no other knots than the grid and the steps', () => {
    const road = roadOfProfile(profile([piece(25, 0), piece(15, 0.06)]), options());
    expectClose(road.distance, [0, 10, 20, 25, 25, 30, 40], 1e-12);
    expectClose(road.grade, [0, 0, 0, 0, 0.06, 0.06, 0.06], 0);
    expectClose(road.elevation, [20, 20, 20, 20, 20, 20.3, 20.9], 1e-12);
    expectClose(road.station[6]!, 25 + 15 * Math.sqrt(1 + 0.0036), 1e-12);
    expectClose(road.gradeSd, new Float64Array(7), 0);
    expect(road.heading).toBeNull();
  });

  it('says that masks change nothing, and which stretches are not on it', () => {
    const written = profile([piece(1000, 0.02)]);
    const stretch = (from: number, to: number) => ({ from, to, reason: 'wood', factor: 0.5 });
    const told = (some: Parameters<typeof roadOptions>[0], given = written): string[] =>
      roadOfProfile(given, roadOptions(some)).warnings.map(({ code }) => code);
    expect(told({})).toEqual([]);
    expect(told({ masks: [stretch(100, 200)] })).toEqual(['masks-unused']);
    expect(told({ masks: [stretch(5000, 6000)] })).toEqual(['masks-unused', 'mask-outside-road']);
    expect(told({ shelter: [stretch(100, 1000)] })).toEqual([]);
    expect(told({ shelter: [stretch(100, 1200)] })).toEqual(['shelter-past-end']);
    expect(told({ shelter: [stretch(1000, 1200)] })).toEqual(['shelter-outside-road']);
    // 50 s at the nominal 20 m/s.
    const timed = profile([piece(50, 0.02)], { by: 'time' });
    expect(told({ shelter: [stretch(100, 1000)] }, timed)).toEqual([]);
    expect(told({ shelter: [stretch(100, 1200)] }, timed)).toEqual(['shelter-past-end']);
  });

  it('lays a parabola over a change of grade, half on each side', () => {
    const road = roadOfProfile(profile([piece(200, 0), piece(200, 0.06)], { verticalCurve: 60 }), options());
    const at = (x: number): number => Array.from(road.distance).findIndex((d) => Math.abs(d - x) < 1e-9);
    expectClose([road.grade[at(170)]!, road.grade[at(200)]!, road.grade[at(230)]!], [0, 0.03, 0.06], 1e-15);
    // Parabola of length l over a change A: at its middle it stands A l / 8 off the tangents.
    expectClose(road.elevation[at(200)]! - 20, (0.06 * 60) / 8, 1e-4);
    expectClose(road.elevation[at(400)]! - 20, 12, 1e-4);
    expect(new Set(road.distance).size).toBe(road.size);
  });

  it('runs along time, with nominal distance', () => {
    const road = roadOfProfile(
      profile([piece(5, 0), piece(10, 0.04)], { by: 'time' }),
      options({ nominalSpeed: 20 }),
    );
    expect(road.along).toBe('time');
    expect(road.station[road.size - 1]).toBe(15);
    expect(road.distance[road.size - 1]).toBe(300);
    const step = Array.from(road.station).findIndex((t, i) => road.station[i + 1] === t);
    expectClose(road.station[step]!, 5, 1e-12);
    expectClose([road.grade[step]!, road.grade[step + 1]!], [0, 0.04], 0);
    expectClose(road.elevation[road.size - 1]!, 20 + 8, 1e-9);
    expectClose(road.station[1]! - road.station[0]!, 0.5, 1e-12, 'grid of 10 m at 20 m/s [s]');
  });

  it('steps the wind where heading or headwind change, and knows its own headwind first', () => {
    const road = roadOfProfile(
      profile([
        piece(20, 0, { heading: 0 }),
        piece(20, 0, { heading: Math.PI }),
        piece(20, 0, { headwind: 3, heading: 0 }),
      ]),
      options({ wind: windFrom(0) }),
    );
    expectClose(road.distance, [0, 10, 20, 20, 30, 40, 40, 50, 60], 0);
    expectClose(road.headwind, [5, 5, 5, -5, -5, -5, 3, 3, 3], 1e-12);
    expectClose(road.heading!, [0, 0, 0, Math.PI, Math.PI, Math.PI, 0, 0, 0], 0);
  });

  it('is driven back as the mirror of the way there', () => {
    for (let seed = 1; seed <= 20; seed++) {
      const random = randomness(seed);
      const pieces = Array.from({ length: 5 }, () =>
        piece(100 * (1 + Math.floor(5 * random.uniform())), 0.06 * random.normal(), {
          heading: random.uniform(),
        }),
      );
      const given = profile(pieces, { verticalCurve: 40 });
      const wind = windFrom(1);
      const there = roadOfProfile(given, options({ wind }));
      const back = roadOfProfile(given, options({ wind, direction: 'back' }));
      const both = roadOfProfile(given, options({ wind, direction: 'both' }));
      const flipped = (a: Float64Array): Float64Array =>
        a
          .slice()
          .reverse()
          .map((v) => -v);
      expectClose(back.grade, flipped(there.grade), 1e-12);
      expectClose(back.headwind, flipped(there.headwind), 1e-12);
      expectClose(back.elevation, there.elevation.slice().reverse(), 5e-3);
      expectClose(both.grade.slice(there.size), back.grade, 1e-12);
    }
  });

  it('refuses vertical curves that overlap, no pieces, and a wind without heading', () => {
    const tight = profile([piece(100, 0), piece(50, 0.05), piece(100, 0)], { verticalCurve: 60 });
    expect(() => roadOfProfile(tight, options())).toThrow(/overlap in piece 2.*60\.0 m.*at most 50\.0 m/);
    expect(() => roadOfProfile(profile([]), options())).toThrow(/no pieces/);
    expect(() => roadOfProfile(profile([piece(100, 0)]), options({ wind: windFrom(0) }))).toThrow(
      /which way/,
    );
  });
});
