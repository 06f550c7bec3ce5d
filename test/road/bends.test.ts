import { describe, expect, it } from 'vitest';
import { seededStream } from '../../src/numeric/random.ts';
import { bendsOf } from '../../src/road/bends.ts';
import type { Road } from '../../src/road/road.ts';
import { roadOfTrack } from '../../src/road/road-of-track.ts';
import { expectClose } from '../compare.ts';
import { roadOf } from '../study/road-of.ts';
import { roadOptions, trackOf } from './road-fixtures.ts';

const LATERAL = 2.5;
const SPEED = 25;
/** Curvature that 2.5 m/s2 allows at 25 m/s. */
const ALLOWED = 0.004;

/** A level road of given curvature, knot by knot. */
function curved(length: number, curvature: (x: number) => number): Road {
  const road = roadOf([{ length, grade: 0 }]);
  return { ...road, heading: new Float64Array(road.size), curvature: road.distance.map(curvature) };
}

/** Straight, clothoid of 60 m, right-hand circle of R = 100 m for 120 m, clothoid, straight: 840 m in all. */
function clothoids(x: number): number {
  if (x < 300 || x > 540) return 0;
  if (x < 360) return (x - 300) / 60 / 100;
  return x > 480 ? (540 - x) / 60 / 100 : 1 / 100;
}

/** Points of a road in plan, every 10 m, as a receiver near 47 degrees north would log them. */
function logged(
  length: number,
  curvature: (x: number) => number,
  noise: number,
  seed: number,
  wavelength: string,
) {
  const random = seededStream(seed);
  const step = 0.05;
  const [latitude, longitude] = [[] as number[], [] as number[]];
  let [east, north, heading] = [0, 0, 0.7];
  const count = Math.round(length / step);
  // Length of a degree at 47 degrees north on the WGS84 ellipsoid (NGA.STND.0036, formulas of the two radii).
  const [perLatitude, perLongitude] = [111169.2, 76056.2];
  for (let i = 0; i <= count; i++) {
    if (i % 200 === 0) {
      latitude.push(47 + (north + noise * random.normal()) / perLatitude);
      longitude.push(8 + (east + noise * random.normal()) / perLongitude);
    }
    heading += curvature((i + 0.5) * step) * step;
    east += Math.sin(heading) * step;
    north += Math.cos(heading) * step;
  }
  const distance = Float64Array.from(latitude, (_, i) => 10 * i);
  const track = trackOf(distance, {
    latitudeDeg: Float64Array.from(latitude),
    longitudeDeg: Float64Array.from(longitude),
    elevation: new Float64Array(distance.length).fill(100),
  });
  return roadOfTrack(track, roadOptions({ elevationSource: wavelength as 'gnss' }));
}

const at = (speed: number) => () => speed;

describe('bends of a road', () => {
  it('finds a circle with its radius and speed, and its ends to the resolution', () => {
    const circle = (x: number): number => (x >= 400 && x <= 700 ? -1 / 120 : 0);
    const [bend, ...others] = bendsOf(curved(1200, circle), LATERAL, at(SPEED));
    expect(others).toEqual([]);
    expect(bend?.side).toBe('left');
    expectClose(bend?.curvature ?? 0, 1 / 120, 1e-12);
    expectClose(bend?.speed ?? 0, Math.sqrt(LATERAL * 120), 1e-9);
    expectClose([bend?.from ?? 0, bend?.to ?? 0], [400, 700], 10);
  });

  it('begins on a clothoid where its curvature is what the speed allows', () => {
    const [bend] = bendsOf(curved(840, clothoids), LATERAL, at(SPEED));
    // kappa = x / (60 m x 100 m) is 0.004 after 24 m.
    expectClose([bend?.from ?? 0, bend?.to ?? 0], [324, 516], 0.5);
    expectClose(bend?.curvature ?? 0, 0.01, 1e-9);
    expect(bend?.side).toBe('right');
  });

  it('asks nothing where the set speed is low enough, and follows a set speed that changes', () => {
    expect(bendsOf(curved(840, clothoids), LATERAL, at(15.8))).toEqual([]);
    expect(bendsOf(curved(840, clothoids), LATERAL, (x) => (x < 600 ? 15 : 25))).toEqual([]);
    expect(bendsOf(curved(840, clothoids), LATERAL, at(15.9))).toHaveLength(1);
  });

  it('has none on a road without a heading', () => {
    expect(bendsOf(roadOf([{ length: 500, grade: 0 }]), LATERAL, at(SPEED))).toEqual([]);
  });

  it('tells left from right where they follow each other, and joins two that are one', () => {
    const wave = (x: number): number => (x > 300 && x < 400 ? 0.01 : x > 400 && x < 500 ? -0.01 : 0);
    expect(bendsOf(curved(900, wave), LATERAL, at(SPEED)).map(({ side }) => side)).toEqual(['right', 'left']);
    const broken = (x: number): number => (x > 300 && x < 500 && Math.abs(x - 400) > 6 ? 0.01 : 0);
    expect(bendsOf(curved(900, broken), LATERAL, at(SPEED))).toHaveLength(1);
  });

  it.each([
    ['exact', 0, 0.02],
    ['lidar', 0.3, 0.05],
    ['gnss', 1, 0.08],
  ])('finds the same bend in logged points of a %s source with noise of %s m', (source, noise, within) => {
    for (let seed = 1; seed <= 20; seed++) {
      const found = bendsOf(logged(840, clothoids, noise, seed, source), LATERAL, at(SPEED));
      expect(found).toHaveLength(1);
      const [bend] = found;
      expectClose((bend?.speed ?? 0) / Math.sqrt(LATERAL * 100), 1, within, `speed, seed ${seed}`);
      expectClose([bend?.from ?? 0, bend?.to ?? 0], [324, 516], 15, `ends, seed ${seed}`);
    }
  });

  it('finds no bend in the noise of a straight road', () => {
    for (let seed = 1; seed <= 20; seed++)
      expect(
        bendsOf(
          logged(3000, () => 0, 1, seed, 'gnss'),
          LATERAL,
          at(SPEED),
        ),
      ).toEqual([]);
  });

  it('gives each bend a speed that its curvature allows and the set speed does not, whatever the road', () => {
    const random = seededStream(7);
    for (let k = 0; k < 50; k++) {
      const waves = Array.from({ length: 4 }, () => [random.uniform() * 0.01, 150 + 400 * random.uniform()]);
      const road = curved(3000, (x) =>
        waves.reduce((sum, [height, length]) => sum + height! * Math.sin((2 * Math.PI * x) / length!), 0),
      );
      for (const { from, to, speed, curvature } of bendsOf(road, LATERAL, at(SPEED))) {
        expect(to).toBeGreaterThan(from);
        expect(speed).toBeLessThan(SPEED);
        expect(curvature).toBeGreaterThan(ALLOWED);
        expectClose(speed * speed * curvature, LATERAL, 1e-12);
      }
    }
  });
});
