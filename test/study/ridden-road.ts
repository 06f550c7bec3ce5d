// A winding road on the ellipsoid, laid by an independent solver, and rides over it whose speed and place are known.
import geodesic from 'geographiclib-geodesic';
import type { RoadOptions } from '../../src/road/options.ts';
import type { Road } from '../../src/road/road.ts';
import { roadOfTrack } from '../../src/road/road-of-track.ts';
import type { RideLog } from '../../src/track/read-ride.ts';
import { evenly, roadOptions, trackOf } from '../road/road-fixtures.ts';
import { type Randomness, randomness } from '../road/synthetic-road.ts';

const WGS84 = geodesic.Geodesic.WGS84;
const STEP = 2;

export interface Ground {
  readonly lat: Float64Array;
  readonly lon: Float64Array;
  /** [m] */
  readonly length: number;
}

/** Headings swing between north and east, with a hairpin in the middle; points each 2 m. */
export function winding(length = 8000): Ground {
  const size = Math.round(length / STEP) + 1;
  const [lat, lon] = [new Float64Array(size), new Float64Array(size)];
  [lat[0], lon[0]] = [51.9, -14.6];
  for (let i = 1; i < size; i++) {
    const s = i * STEP;
    // Turns by half a circle over 60 m at the middle, and back over as much 400 m later.
    const turn = (from: number): number => 180 * Math.min(1, Math.max(0, (s - from) / 60));
    const heading = 45 + 40 * Math.sin(s / 300) + turn(length / 2) - turn(length / 2 + 400);
    const next = WGS84.Direct(lat[i - 1]!, lon[i - 1]!, heading, STEP);
    [lat[i], lon[i]] = [next.lat2!, next.lon2!];
  }
  return { lat, lon, length };
}

export function roadOver(ground: Ground, some: Partial<RoadOptions> = {}): Road {
  const distance = evenly(ground.length, STEP);
  const track = trackOf(distance, {
    latitudeDeg: ground.lat,
    longitudeDeg: ground.lon,
    grade: distance.map((s) => 0.04 * Math.sin(s / 500)),
  });
  return roadOfTrack(track, roadOptions({ elevationSource: 'exact', ...some }));
}

/** Speed of the known ride over time [m/s], and its way in closed form [m]. */
export const speedAt = (t: number): number => 16 + 3 * Math.sin(t / 20);
export const wayAt = (t: number): number => 16 * t + 60 * (1 - Math.cos(t / 20));

/** A fix at a place along the ground, scattered by `noise` metres each way. */
export function fixAt(
  { lat, lon }: Ground,
  way: number,
  noise: number,
  random: Randomness,
): [number, number] {
  const i = Math.min(lat.length - 2, Math.max(0, Math.floor(way / STEP)));
  const share = way / STEP - i;
  const place = [lat[i]! + share * (lat[i + 1]! - lat[i]!), lon[i]! + share * (lon[i + 1]! - lon[i]!)];
  const moved = WGS84.Direct(place[0]!, place[1]!, 360 * random.uniform(), Math.abs(noise * random.normal()));
  return [moved.lat2!, moved.lon2!];
}

/** A log of ways at times. */
export function logOf(
  ground: Ground,
  time: Float64Array,
  way: (t: number) => number,
  some: Partial<RideLog> & { readonly noise?: number; readonly seed?: number } = {},
): RideLog {
  const { noise = 0, seed = 5, ...rest } = some;
  const random = randomness(seed);
  const fixes = Array.from(time, (t) => fixAt(ground, way(t), noise, random));
  return {
    name: null,
    format: 'gpx',
    size: time.length,
    time,
    distance: null,
    latitudeDeg: Float64Array.from(fixes, ([lat]) => lat),
    longitudeDeg: Float64Array.from(fixes, ([, lon]) => lon),
    speed: null,
    throttle: null,
    leftOut: 0,
    ...rest,
  };
}

/** 0, 1, 2 .. seconds. */
export const seconds = (count: number): Float64Array => Float64Array.from({ length: count }, (_, i) => i);
