import { describe, expect, it } from 'vitest';
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
    // A random walk of the same s.d. and a correlation of 50 m would end 3.7 m off (one s.d.).
    expect(worst).toBeLessThan(1.5);
    expect(worst).toBeGreaterThan(0.1);
  });

  it('has errors that change sign with about half the smoothing wavelength', () => {
    const road = roadOfTrack(track, roadOptions());
    const other = perturbRoad(road, randomness(9));
    let changes = 0;
    for (let i = 1; i < road.size; i++)
      if ((other.grade[i]! - road.grade[i]!) * (other.grade[i - 1]! - road.grade[i - 1]!) < 0) changes++;
    // Derivative of a Gaussian field: mean distance between zeros pi a sqrt(2/3), a = 200 / (2 pi) (Rice's formula).
    expectClose(20_000 / changes, Math.PI * (200 / (2 * Math.PI)) * Math.sqrt(2 / 3), 12);
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
