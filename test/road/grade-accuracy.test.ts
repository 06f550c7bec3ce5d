import { describe, expect, it } from 'vitest';
import type { ElevationSource } from '../../src/road/options.ts';
import { roadOfTrack } from '../../src/road/road-of-track.ts';
import { evenly, rms, roadOptions, trackOf } from './road-fixtures.ts';
import { measure, type NoiseClass, randomness, syntheticRoad } from './synthetic-road.ts';

/**
 * The experiment whose figures were computed independently of the project: a 40 km road (tangents 100-900 m, grades
 * N(0, 3.5 %), vertical curves K 10-60 m/%), rms grade error [%] of third-order Whittaker smoothing at its best
 * wavelength: white .33, satellite .85, barometric .26 (0.2 m steps) and .29 (1 m steps), 30 m terrain model .79,
 * lidar .19. Each of those is one realisation; here 12 are averaged.
 * The recipe leaves the road's roughness open, and where the wavelength is long that counts: without noise the published
 * road is off by .126 % at 200 m and .273 % at 400 m, this one by .115 and .289, so it is the rougher one at length.
 * `allowed` is the published figure, but for the three long wavelengths the published figure with this road's own bias:
 * their single realisations here range from .31 to .38, .79 to 1.06 and .72 to 1.00, and hold the published ones.
 */
const CLASSES: readonly {
  noise: NoiseClass;
  source: ElevationSource;
  wavelength: number | null;
  allowed: number;
  bestBelow: number;
}[] = [
  { noise: 'lidar', source: 'lidar', wavelength: null, allowed: 0.195, bestBelow: 0.19 },
  { noise: 'barometric', source: 'barometric', wavelength: null, allowed: 0.26, bestBelow: 0.26 },
  { noise: 'barometric-1m', source: 'barometric', wavelength: null, allowed: 0.29, bestBelow: 0.29 },
  { noise: 'white', source: 'gnss', wavelength: 400, allowed: 0.35, bestBelow: 0.33 },
  { noise: 'gnss', source: 'gnss', wavelength: null, allowed: 1.0, bestBelow: 0.85 },
  { noise: 'dem30', source: 'dem30', wavelength: null, allowed: 0.92, bestBelow: 0.79 },
];
const SEEDS = Array.from({ length: 12 }, (_, i) => 77 * (i + 1));

const SOURCES = CLASSES.filter((given) => given.noise !== 'white');

function realisation(seed: number, length: number, given: (typeof CLASSES)[number]) {
  const random = randomness(seed);
  const truth = syntheticRoad(random, length, 10);
  const elevation = measure(random, given.noise, truth.elevation, 10);
  const road = roadOfTrack(
    trackOf(truth.distance, { elevation }),
    roadOptions({ elevationSource: given.source, smoothingWavelength: given.wavelength }),
  );
  return { road, truth };
}

describe('grade from noisy elevation', () => {
  it.each(CLASSES)('is as good as the published experiment under $noise noise', (given) => {
    const errors = SEEDS.map((seed) => {
      const { road, truth } = realisation(seed, 40_000, given);
      return 100 * rms(road.grade, truth.grade);
    });
    const mean = Math.sqrt(errors.reduce((sum, e) => sum + e * e, 0) / errors.length);
    expect(mean).toBeLessThanOrEqual(given.allowed);
    expect(Math.min(...errors)).toBeLessThanOrEqual(given.bestBelow);
  });

  it.each(SOURCES)(
    'covers 93 to 97 percent of the true grade by its 95 percent band under $noise noise',
    (given) => {
      let inside = 0;
      let points = 0;
      for (const seed of [...SEEDS, ...SEEDS.map((s) => s + 1)]) {
        const { road, truth } = realisation(seed, 20_000, given);
        for (let i = 0; i < road.size; i++) {
          if (Math.abs(road.grade[i]! - truth.grade[i]!) <= 1.96 * road.gradeSd[i]!) inside++;
          points++;
        }
      }
      expect(inside / points).toBeGreaterThanOrEqual(0.93);
      expect(inside / points).toBeLessThanOrEqual(0.97);
    },
  );

  it.each(SOURCES)('says how much worse the ends of a track are under $noise noise', (given) => {
    let squares = 0;
    let variances = 0;
    let inside = 0;
    const roads = 150;
    for (let seed = 1; seed <= roads; seed++) {
      const { road, truth } = realisation(seed, 5000, given);
      for (const i of [0, road.size - 1]) {
        const error = road.grade[i]! - truth.grade[i]!;
        squares += error * error;
        variances += road.gradeSd[i]! * road.gradeSd[i]!;
        if (Math.abs(error) <= 1.96 * road.gradeSd[i]!) inside++;
      }
    }
    const ratio = Math.sqrt(variances / squares);
    expect(ratio).toBeGreaterThan(0.8);
    expect(ratio).toBeLessThan(1.35);
    expect(inside / (2 * roads)).toBeGreaterThanOrEqual(0.88);
  });

  it.each([
    { spacing: 2, grid: 10 },
    { spacing: 10, grid: 5 },
    { spacing: 25, grid: 10 },
  ])('keeps error and coverage with points every $spacing m on a $grid m grid', ({ spacing, grid }) => {
    let inside = 0;
    let points = 0;
    let squares = 0;
    for (const seed of SEEDS) {
      const random = randomness(seed);
      const truth = syntheticRoad(random, 20_000, 1);
      const noisy = measure(random, 'barometric', truth.elevation, 1);
      const distance = evenly(20_000, spacing);
      const elevation = distance.map((x) => noisy[x]!);
      const road = roadOfTrack(trackOf(distance, { elevation }), roadOptions({ grid }));
      for (let i = 0; i < road.size; i++) {
        const error = road.grade[i]! - truth.grade[Math.round(road.distance[i]!)]!;
        squares += error * error;
        points++;
        if (Math.abs(error) <= 1.96 * road.gradeSd[i]!) inside++;
      }
    }
    expect(100 * Math.sqrt(squares / points)).toBeLessThanOrEqual(0.28);
    expect(inside / points).toBeGreaterThanOrEqual(0.93);
    expect(inside / points).toBeLessThanOrEqual(0.97);
  });
});
