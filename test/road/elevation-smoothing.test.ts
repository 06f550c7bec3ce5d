import { describe, expect, it } from 'vitest';
import { smoothElevation } from '../../src/road/elevation-smoothing.ts';
import { roadOfTrack } from '../../src/road/road-of-track.ts';
import { expectClose } from '../compare.ts';
import { evenly, rms, roadOptions, trackOf } from './road-fixtures.ts';
import { measure, randomness, syntheticRoad } from './synthetic-road.ts';

describe('robust smoothing of elevation', () => {
  it('drops 40 of 40 spikes and keeps the grade of the road without them', () => {
    // Source: computed independently: 4000 points, white noise 0.5 m, 1 % spikes of 30 m, wavelength 300 m: rms grade error
    // 0.834 % without weights, 0.249 % with Tukey's biweight, 0.243 % for the same road without spikes.
    const random = randomness(11);
    const truth = syntheticRoad(random, 39_990, 10);
    const clean = truth.elevation.map((z) => z + 0.5 * random.normal());
    const spiked = clean.slice();
    const places = new Set<number>();
    while (places.size < 40) places.add(20 + Math.floor(3960 * random.uniform()));
    for (const i of places) spiked[i]! += random.uniform() < 0.5 ? 30 : -30;
    const smooth = (elevation: Float64Array) =>
      smoothElevation({
        distance: truth.distance,
        elevation,
        grid: 10,
        knots: 4000,
        wavelength: 300,
        noiseFloor: 0.1,
      });
    const robust = smooth(spiked);
    const reference = 100 * rms(smooth(clean).grade, truth.grade);
    const error = 100 * rms(robust.grade, truth.grade);
    expect([...places].filter((i) => !robust.outliers.includes(i))).toEqual([]);
    expect(robust.outliers.length).toBeLessThanOrEqual(42);
    // The published weights lose 2.5 % to the road without spikes; these may not lose more.
    expect(error).toBeLessThanOrEqual(reference * (0.249 / 0.243));
    expect(error).toBeLessThanOrEqual(0.3);
    expectClose(robust.noiseSd, 0.5, 0.03, 'noise seen in the residuals [m]');
  });

  it('does not take a real short hill for an outlier when the road around it is calm', () => {
    // A railway overbridge: 7 m high, 300 m from foot to foot, on a level road; the source is smoothed over 800 m.
    const random = randomness(3);
    const distance = evenly(10_000, 10);
    const hill = distance.map((x) =>
      Math.abs(x - 5000) < 150 ? 3.5 * (1 + Math.cos((2 * Math.PI * (x - 5000)) / 300)) : 0,
    );
    const elevation = hill.map((z) => z + 0.3 * random.normal());
    const road = roadOfTrack(trackOf(distance, { elevation }), roadOptions({ elevationSource: 'gnss' }));
    expect(road.repairs.filter((r) => r.from > 4800 && r.to < 5200)).toEqual([]);
    // What third-order smoothing over 800 m leaves of it is 2.2 m; robust weights must not take that away too.
    expect(Math.max(...road.elevation)).toBeGreaterThan(2);
  });

  it('bridges a masked dip as the published example does', () => {
    // Source: computed independently: a dip of 25 m over 150 m; greatest grade error 13.2 % before, 2.0 % after masking.
    let worst = 0;
    let worstUnmasked = 0;
    for (let seed = 1; seed <= 10; seed++) {
      const random = randomness(seed);
      const truth = syntheticRoad(random, 20_000, 10);
      const elevation = measure(random, 'barometric', truth.elevation, 10).map((z, i) => {
        const x = truth.distance[i]! - 10_000;
        return Math.abs(x) < 75 ? z - 12.5 * (1 + Math.cos((2 * Math.PI * x) / 150)) : z;
      });
      const masks = [{ from: 9920, to: 10_080, reason: 'viaduct' }];
      const track = trackOf(truth.distance, { elevation });
      const open = roadOfTrack(track, roadOptions());
      const masked = roadOfTrack(track, roadOptions({ masks }));
      for (let i = 980; i <= 1020; i++) {
        worst = Math.max(worst, 100 * Math.abs(masked.grade[i]! - truth.grade[i]!));
        worstUnmasked = Math.max(worstUnmasked, 100 * Math.abs(open.grade[i]! - truth.grade[i]!));
      }
      expect(masked.gradeSd[1000]!).toBeGreaterThan(1.2 * masked.gradeSd[500]!);
      expect(masked.masks).toEqual(masks);
      const named = open.warnings.filter((w) => w.code === 'bridge-suspected');
      expect(named.length).toBe(1);
      expect(named[0]!.from).toBeLessThan(9980);
      expect(named[0]!.to).toBeGreaterThan(10_020);
      expect(masked.warnings.filter((w) => /suspected/.test(w.code))).toEqual([]);
    }
    expect(worstUnmasked).toBeGreaterThan(10);
    expect(worst).toBeLessThanOrEqual(2);
  });

  it('keeps 90 % of the height of the shortest hill it names', () => {
    const distance = evenly(6000, 10);
    const first = roadOfTrack(trackOf(distance, { elevation: distance.map(() => 0) }), roadOptions());
    const foot = first.smoothing!.shortestHill;
    const elevation = distance.map((x) =>
      Math.abs(x - 3000) < foot / 2 ? 2 * (1 + Math.cos((2 * Math.PI * (x - 3000)) / foot)) : 0,
    );
    const road = roadOfTrack(trackOf(distance, { elevation }), roadOptions());
    expectClose(Math.max(...road.elevation) / 4, 0.9, 0.02, 'share of the height');
  });

  it('gives a constant grade and a parabola back exactly', () => {
    const distance = evenly(5000, 10);
    const slope = roadOfTrack(trackOf(distance, { elevation: distance.map((x) => 0.07 * x) }), roadOptions());
    expectClose(
      slope.grade,
      distance.map(() => 0.07),
      1e-9,
    );
    const crest = roadOfTrack(
      trackOf(distance, { elevation: distance.map((x) => 100 + 0.05 * x - 1e-5 * x * x) }),
      roadOptions(),
    );
    expectClose(
      crest.grade,
      distance.map((x) => 0.05 - 2e-5 * x),
      1e-9,
    );
    expectClose(
      crest.elevation,
      distance.map((x) => 100 + 0.05 * x - 1e-5 * x * x),
      1e-6,
    );
  });

  it('weakens a sine of 1000 m by the gain of its wavelength', () => {
    // A = 5 m, L = 1000 m: peak grade 2 pi A / L = 3.1416 %; gain at 300 m wavelength 1 / (1 + lambda (2 sin(pi / 100))^6).
    const distance = evenly(20_000, 10);
    const elevation = distance.map((x) => 5 * Math.sin((2 * Math.PI * x) / 1000));
    const road = roadOfTrack(trackOf(distance, { elevation }), roadOptions({ smoothingWavelength: 300 }));
    const gain = 1 / (1 + (Math.sin(Math.PI / 100) / Math.sin(Math.PI / 30)) ** 6);
    const central = Math.sin((2 * Math.PI) / 100) / ((2 * Math.PI) / 100);
    expectClose(road.grade[1000]!, 0.01 * Math.PI * gain * central, 1e-6);
  });
});
