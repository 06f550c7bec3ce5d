import { describe, expect, it } from 'vitest';
import { meanGradeSd } from '../../src/road/error-scales.ts';
import { perturbRoad } from '../../src/road/perturb-road.ts';
import { roadOfTrack } from '../../src/road/road-of-track.ts';
import { expectClose } from '../compare.ts';
import { evenly, roadOptions, trackOf } from './road-fixtures.ts';
import { measure, randomness, syntheticRoad } from './synthetic-road.ts';

const truth = syntheticRoad(randomness(1), 20_000, 10);
const track = trackOf(truth.distance, {
  elevation: measure(randomness(2), 'barometric', truth.elevation, 10),
});

describe('a perturbed road', () => {
  it('has errors of the stated s.d. at every knot, over many draws', () => {
    const road = roadOfTrack(track, roadOptions());
    const squares = new Float64Array(road.size);
    const draws = 200;
    for (let seed = 1; seed <= draws; seed++) {
      const other = perturbRoad(road, randomness(seed));
      other.grade.forEach((g, i) => {
        squares[i]! += ((g - road.grade[i]!) / road.gradeSd[i]!) ** 2 / draws;
      });
    }
    const mean = squares.reduce((sum, v) => sum + v, 0) / road.size;
    expectClose(mean, 1, 0.02, 'mean variance ratio');
    // 200 draws: the variance ratio of one knot has a s.d. of 0.1.
    expect(Math.min(...squares)).toBeGreaterThan(0.55);
    expect(Math.max(...squares)).toBeLessThan(1.5);
  });

  it('errs by a bounded height: no drift over 20 km', () => {
    const road = roadOfTrack(track, roadOptions());
    let worst = 0;
    for (let seed = 1; seed <= 30; seed++) {
      const other = perturbRoad(road, randomness(seed));
      other.elevation.forEach((z, i) => {
        worst = Math.max(worst, Math.abs(z - road.elevation[i]!));
      });
    }
    // Height errors have a s.d. of 0.5 m, differences of two 0.7 m, and 60,000 knots are looked at.
    expect(worst).toBeLessThan(4);
    expect(worst).toBeGreaterThan(1);
  });

  it.each([
    ['lidar', 'lidar'],
    ['barometric', 'barometric'],
    ['barometric-1m', 'barometric'],
    ['gnss', 'gnss'],
    ['dem30', 'dem30'],
  ] as const)(
    'errs over a hill as the smoothed road does under %s noise, in draws and by formula',
    (noise, source) => {
      for (const stretch of [300, 1000, 3000]) {
        let measured = 0;
        let drawn = 0;
        let stated = 0;
        for (let seed = 1; seed <= 10; seed++) {
          const random = randomness(77 * seed);
          const real = syntheticRoad(random, 20_000, 10);
          const elevation = measure(random, noise, real.elevation, 10);
          const road = roadOfTrack(
            trackOf(real.distance, { elevation }),
            roadOptions({ elevationSource: source }),
          );
          const other = perturbRoad(road, random);
          for (let i = 100; i + stretch / 10 < road.size - 100; i += 7) {
            const k = i + stretch / 10;
            const climb = road.elevation[k]! - road.elevation[i]!;
            measured += ((climb - (real.elevation[k]! - real.elevation[i]!)) / stretch) ** 2;
            drawn += ((climb - (other.elevation[k]! - other.elevation[i]!)) / stretch) ** 2;
            stated += meanGradeSd(road, road.distance[i]!, road.distance[k]!) ** 2;
          }
        }
        // The model has two lengths where the true errors have a whole spectrum: right within 0.8 to 1.55, rather too wide.
        expect(Math.sqrt(stated / measured), `formula over ${stretch} m`).toBeGreaterThan(0.8);
        expect(Math.sqrt(stated / measured), `formula over ${stretch} m`).toBeLessThan(1.55);
        expect(Math.sqrt(drawn / stated), `draws over ${stretch} m`).toBeGreaterThan(0.8);
        expect(Math.sqrt(drawn / stated), `draws over ${stretch} m`).toBeLessThan(1.2);
      }
    },
  );

  it('knows the mean grade of a short stretch as well as a knot, and of a written road exactly', () => {
    const road = roadOfTrack(track, roadOptions());
    expectClose(meanGradeSd(road, 9000, 9001) / road.gradeSd[900]!, 1, 1e-3);
    expect(meanGradeSd(roadOfTrack(track, roadOptions({ elevationSource: 'exact' })), 0, 500)).toBe(0);
  });

  it('leaves a written or surveyed road as it is, and the same seed gives the same road', () => {
    const exact = roadOfTrack(track, roadOptions({ elevationSource: 'exact' }));
    expect(perturbRoad(exact, randomness(1))).toBe(exact);
    const road = roadOfTrack(track, roadOptions());
    expect(perturbRoad(road, randomness(4))).toEqual(perturbRoad(road, randomness(4)));
    expect(perturbRoad(road, randomness(4)).grade).not.toEqual(perturbRoad(road, randomness(5)).grade);
  });

  it('shares its errors between the ways out and back', () => {
    const road = roadOfTrack(track, roadOptions({ direction: 'both' }));
    const other = perturbRoad(road, randomness(3));
    const half = road.size / 2;
    expectClose(
      other.grade.slice(half),
      other.grade
        .slice(0, half)
        .reverse()
        .map((g) => -g),
      1e-15,
    );
    expectClose(other.elevation[road.size - 1]!, other.elevation[0]!, 1e-9);
  });

  it('integrates elevation and station anew', () => {
    const distance = evenly(3000, 10);
    const road = roadOfTrack(trackOf(distance, { elevation: distance.map((x) => 0.1 * x) }), roadOptions());
    const other = perturbRoad(road, randomness(8));
    for (let i = 1; i < road.size; i++) {
      const mean = (other.grade[i]! + other.grade[i - 1]!) / 2;
      expectClose(other.elevation[i]! - other.elevation[i - 1]!, 10 * mean, 1e-6);
      expectClose(other.station[i]! - other.station[i - 1]!, 10 * Math.sqrt(1 + mean * mean), 1e-5);
    }
  });
});
