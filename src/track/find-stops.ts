import { medianOf } from '../numeric/running-median.ts';
import { legBetween } from './geodesic.ts';
import { STANDING_RADIUS, STANDING_SPEED } from './limits.ts';
import { pickPoints } from './pick-points.ts';
import type { RawTrack } from './raw-track.ts';

/** A stretch of the kept points that does not advance; all are indices into them, ends included. */
export interface Stop {
  readonly first: number;
  readonly last: number;
  /** The one nearest to the middle of the stop. */
  readonly middle: number;
}

/** The speed at a point is the slope of a line through its neighbours: this long [s], or so many if that is longer. */
const WINDOW = 10;
const WINDOW_POINTS = 5;
/** Neighbours farther away in time than this [s] say nothing about a stop. */
const LONGEST_WINDOW = 60;

/**
 * Points are a knot where so many of them go a way this many times the diagonal of the box around them. A circle
 * driven once goes 2.2 diagonals; ten points of white noise go 3.7, and more of them more.
 */
const KNOT_POINTS = 10;
/** No knot is looked at over more points at once, so that a night at rest takes no time. */
const MOST_KNOT_POINTS = 600;
const KNOT_RATIO = 3;

/** Points of a core that make a stop; fewer are left to the comparison of single points. */
const FEWEST_STANDING = 3;
/** Reach of a stop around its middle, in median distances from it (3.5 standard deviations of white noise), and least [m]. */
const REACH = 3;
const LEAST_REACH = 2;

/**
 * Finds where a recorded track stands still though its points go on scattering, as those of a satellite receiver do.
 *
 * With times, by the net movement: the slope of the positions over about 10 s, by least squares, is below 0.5 m/s. (Single
 * points at 1 Hz that scatter by 1.5 m move 2.7 m/s; their slope over 10 s has a standard deviation of 0.14 m/s on each
 * axis.) With or without times, by knots: points that go many times as far as the place is wide. From this core a stop reaches over the
 * neighbours within its own scatter, and never more than 10 m around its middle.
 *
 * @param kept raw indices to look at
 * @returns stops in order, apart from each other; none for a track with a distance column, which does not scatter
 */
export function findStops(raw: RawTrack, kept: Int32Array): Stop[] {
  const { latitudeDeg, longitudeDeg, time } = raw;
  if (raw.distance !== null || latitudeDeg === null || longitudeDeg === null) return [];
  const x = new Float64Array(kept.length);
  const y = new Float64Array(kept.length);
  // Added up leg by leg: exact enough over the few metres of a stop, wherever on the globe.
  for (let k = 1; k < kept.length; k++) {
    const [a, b] = [kept[k - 1]!, kept[k]!];
    const leg = legBetween(latitudeDeg[a]!, longitudeDeg[a]!, latitudeDeg[b]!, longitudeDeg[b]!);
    x[k] = x[k - 1]! + leg.east;
    y[k] = y[k - 1]! + leg.north;
  }
  const standing = new Uint8Array(kept.length);
  const clock = time === null ? null : pickPoints(time, kept);
  markKnots(standing, x, y, clock);
  if (clock !== null) markSlow(standing, x, y, clock);
  const stops: Stop[] = [];
  for (let k = 0; k < kept.length; k++) {
    if (standing[k] === 0 || k <= (stops.at(-1)?.last ?? -1)) continue;
    const end = endOfCore(standing, x, y, k);
    if (end - k + 1 >= FEWEST_STANDING) stops.push(around(x, y, k, end, (stops.at(-1)?.last ?? -1) + 1));
    k = end;
  }
  return stops;
}

const length = (x: number, y: number): number => Math.sqrt(x * x + y * y);

/** Where the slope of the positions over time is below walking pace. */
function markSlow(standing: Uint8Array, x: Float64Array, y: Float64Array, time: Float64Array): void {
  const size = x.length;
  const side = WINDOW_POINTS >> 1;
  let [low, high] = [0, 0];
  for (let k = 0; k < size; k++) {
    while (time[low]! < time[k]! - WINDOW / 2) low++;
    while (high + 1 < size && time[high + 1]! <= time[k]! + WINDOW / 2) high++;
    const first = Math.max(0, Math.min(low, k - side));
    const last = Math.min(size - 1, Math.max(high, k + side));
    if (last - first + 1 < WINDOW_POINTS || time[last]! - time[first]! > LONGEST_WINDOW) continue;
    let [sumT, sumX, sumY, sumTT, sumTX, sumTY] = [0, 0, 0, 0, 0, 0];
    for (let i = first; i <= last; i++) {
      const t = time[i]! - time[k]!;
      const [dx, dy] = [x[i]! - x[k]!, y[i]! - y[k]!];
      sumT += t;
      sumX += dx;
      sumY += dy;
      sumTT += t * t;
      sumTX += t * dx;
      sumTY += t * dy;
    }
    const count = last - first + 1;
    const spread = sumTT - (sumT * sumT) / count;
    const vx = (sumTX - (sumT * sumX) / count) / spread;
    const vy = (sumTY - (sumT * sumY) / count) / spread;
    if (length(vx, vy) < STANDING_SPEED) standing[k] = 1;
  }
}

/** Where points go to and fro in a place; with a clock, only where they do not get on meanwhile. */
function markKnots(standing: Uint8Array, x: Float64Array, y: Float64Array, clock: Float64Array | null): void {
  const size = x.length;
  for (let k = 0; k < size; k++) {
    let [west, east, south, north] = [x[k]!, x[k]!, y[k]!, y[k]!];
    let way = 0;
    let last = -1;
    for (let i = k + 1; i < Math.min(size, k + MOST_KNOT_POINTS); i++) {
      way += length(x[i]! - x[i - 1]!, y[i]! - y[i - 1]!);
      [west, east] = [Math.min(west, x[i]!), Math.max(east, x[i]!)];
      [south, north] = [Math.min(south, y[i]!), Math.max(north, y[i]!)];
      const diagonal = length(east - west, north - south);
      if (diagonal > 2 * STANDING_RADIUS) break;
      if (i - k + 1 < KNOT_POINTS || way <= KNOT_RATIO * diagonal) continue;
      const most = clock === null ? diagonal : STANDING_SPEED * (clock[i]! - clock[k]!);
      if (length(x[i]! - x[k]!, y[i]! - y[k]!) <= most) last = i;
    }
    if (last < 0) continue;
    standing.fill(1, k, last + 1);
    // What goes on after this one overlaps with its end.
    k = Math.max(k, last - KNOT_POINTS);
  }
}

/** The last of the standing points from `first` on that keep together: who creeps on makes several stops. */
function endOfCore(standing: Uint8Array, x: Float64Array, y: Float64Array, first: number): number {
  let [meanX, meanY] = [x[first]!, y[first]!];
  let last = first;
  for (let k = first + 1; k < standing.length && standing[k] === 1; k++) {
    if (length(x[k]! - meanX, y[k]! - meanY) > STANDING_RADIUS) break;
    last = k;
    meanX += (x[k]! - meanX) / (k - first + 1);
    meanY += (y[k]! - meanY) / (k - first + 1);
  }
  return last;
}

/** The stop with this core, over the neighbours within its scatter, none before `least`. */
function around(x: Float64Array, y: Float64Array, from: number, to: number, least: number): Stop {
  const centreX = medianOf(x.slice(from, to + 1));
  const centreY = medianOf(y.slice(from, to + 1));
  const off = (k: number): number => length(x[k]! - centreX, y[k]! - centreY);
  const scatter = medianOf(Float64Array.from({ length: to - from + 1 }, (_, i) => off(from + i)));
  const reach = Math.min(Math.max(REACH * scatter, LEAST_REACH), STANDING_RADIUS);
  const end = (start: number, step: 1 | -1): number => {
    let k = start;
    const inside = (i: number): boolean => i >= least && i < x.length && off(i) <= reach;
    // A single point beyond is scatter; a rider on the way does not come back.
    while (inside(k + step) || inside(k + 2 * step)) k += inside(k + step) ? step : 2 * step;
    return k;
  };
  const first = end(from, -1);
  const last = end(to, 1);
  let middle = first;
  for (let k = first; k <= last; k++) if (off(k) < off(middle)) middle = k;
  return { first, last, middle };
}
