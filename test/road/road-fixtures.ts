// Tracks and options for the tests of this folder, spelt out in full so that nothing leans on defaults.
import type { RoadOptions } from '../../src/road/options.ts';
import type { Track } from '../../src/track/track.ts';

export function roadOptions(some: Partial<RoadOptions> = {}): RoadOptions {
  return {
    name: 'test road',
    grid: 10,
    elevationSource: 'barometric',
    smoothingWavelength: null,
    masks: [],
    shelter: [],
    trimEnds: 0,
    direction: 'there',
    wind: null,
    air: { kind: 'standard', temperature: 288.15, pressure: 101325 },
    nominalSpeed: 20,
    ...some,
  };
}

export function trackOf(distance: Float64Array, some: Partial<Track> = {}): Track {
  return {
    name: null,
    format: 'csv',
    size: distance.length,
    distance,
    latitudeDeg: null,
    longitudeDeg: null,
    elevation: null,
    grade: null,
    heading: null,
    headwind: null,
    time: null,
    speed: null,
    repairs: [],
    ...some,
  };
}

/** 0, step, 2 step .. length. */
export function evenly(length: number, step: number): Float64Array {
  return Float64Array.from({ length: Math.round(length / step) + 1 }, (_, i) => i * step);
}

/** A wind of 5 m/s from `from` [rad], given at rider height so that no profile changes it. */
export function windFrom(from: number, speed = 5): RoadOptions['wind'] {
  return { speed, from, height: 1.2, terrainRoughness: 0.03, riderHeight: 1.2 };
}

/** Root mean square of differences, from index `first` on, `last` excluded. */
export function rms(a: ArrayLike<number>, b: ArrayLike<number>, first = 0, last = a.length): number {
  let sum = 0;
  for (let i = first; i < last; i++) sum += (a[i]! - b[i]!) ** 2;
  return Math.sqrt(sum / (last - first));
}
