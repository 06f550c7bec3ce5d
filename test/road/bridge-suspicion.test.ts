import { describe, expect, it } from 'vitest';
import { roadOfTrack } from '../../src/road/road-of-track.ts';
import { evenly, roadOptions, trackOf } from './road-fixtures.ts';
import { measure, randomness, syntheticRoad } from './synthetic-road.ts';

const suspected = (
  distance: Float64Array,
  elevation: Float64Array,
  source: 'barometric' | 'dem30' = 'barometric',
) =>
  roadOfTrack(trackOf(distance, { elevation }), roadOptions({ elevationSource: source })).warnings.filter(
    (w) => w.code.endsWith('-suspected'),
  );
const bump = (distance: Float64Array, at: number, width: number, height: number): Float64Array =>
  distance.map((x) =>
    Math.abs(x - at) < width / 2 ? (height / 2) * (1 + Math.cos((2 * Math.PI * (x - at)) / width)) : 0,
  );

describe('suspicion of bridges and tunnels', () => {
  const distance = evenly(10_000, 10);

  it('names a valley under a bridge, and the hill above a tunnel, at their places', () => {
    const random = randomness(1);
    const valley = bump(distance, 3000, 200, -30);
    const hill = bump(distance, 7000, 300, 60);
    const elevation = distance.map((x, i) => 0.02 * x + valley[i]! + hill[i]! + 0.2 * random.normal());
    const found = suspected(distance, elevation);
    expect(found.map((w) => w.code)).toEqual(['bridge-suspected', 'tunnel-suspected']);
    expect(found[0]!.from! < 2950 && found[0]!.to! > 3050).toBe(true);
    expect(found[1]!.from! < 6950 && found[1]!.to! > 7050).toBe(true);
  });

  it('sees a gorge in a terrain model through its noise', () => {
    const random = randomness(2);
    const elevation = measure(random, 'dem30', bump(distance, 5000, 200, -50), 10);
    expect(suspected(distance, elevation, 'dem30').some((w) => w.from! < 4980 && w.to! > 5020)).toBe(true);
  });

  it('does not name a road that goes down into a real valley and up again', () => {
    const elevation = distance.map((x) => 0.08 * Math.abs(x - 5000));
    expect(suspected(distance, elevation)).toEqual([]);
  });

  it('names nothing on 600 km of made-up roads with sharp legal curves', () => {
    let named = 0;
    for (let seed = 1; seed <= 30; seed++) {
      const random = randomness(seed);
      const truth = syntheticRoad(random, 20_000, 10);
      named += suspected(truth.distance, measure(random, 'barometric', truth.elevation, 10)).length;
    }
    expect(named).toBe(0);
  });
});
