import type { BinRecord } from '../loop/result.ts';
import { valueAt } from '../road/lookup.ts';
import type { Road } from '../road/road.ts';
import { meanAlong } from './along-road.ts';
import type { Figure, Replayed, RoadSegment, Segment, SegmentRun, Stretch } from './findings.ts';
import { heldTime } from './held-time.ts';

/**
 * Cuts the road into stretches of equal length; the last one takes the rest, and joins its neighbour when it is
 * shorter than a tenth of the length.
 *
 * @param road the road
 * @param length [m], > 0
 * @returns segments in order; together they cover the road
 */
export function segmentsByLength(road: Road, length = 500): RoadSegment[] {
  const end = road.distance[road.size - 1];
  const stretches: Stretch[] = [];
  for (let k = 0; k * length < end; k++) {
    const rest = end - (k + 1) * length;
    const to = rest < length / 10 ? end : (k + 1) * length;
    stretches.push({ from: k * length, to });
    if (to === end) break;
  }
  return describeSegments(road, stretches);
}

/** Numbers the stretches from 1 and gives each its mean grade (net climb over length) and mean headwind. */
export function describeSegments(road: Road, stretches: readonly Stretch[]): RoadSegment[] {
  return stretches.map(({ from, to }, k) => ({
    number: k + 1,
    from,
    to,
    meanGrade: (valueAt(road, 'elevation', to) - valueAt(road, 'elevation', from)) / (to - from),
    meanHeadwind: meanAlong(road, road.headwind, from, to),
  }));
}

const ENDED = { none: 'the run ended before' };

/**
 * What each candidate did in each segment, from the record by distance bins. A bin that straddles a border is
 * shared out by length; extremes count wherever a tenth of the bin or more lies inside.
 *
 * @returns the segments with one run a candidate, in the order of `replayed`
 */
export function segmentRuns(segments: readonly RoadSegment[], replayed: readonly Replayed[]): Segment[] {
  const runs = replayed.map((candidate) => runsOf(candidate, segments));
  return segments.map((segment, k) => ({ ...segment, runs: runs.map((run) => run[k]) }));
}

function runsOf({ name, result }: Replayed, segments: readonly RoadSegment[]): SegmentRun[] {
  const { bins } = result;
  let first = 0;
  return segments.map(({ from, to }) => {
    while (first < bins.size && bins.edge[first + 1] <= from) first++;
    const sum = { time: 0, held: 0, error: 0, square: 0, throttle: 0, limit: 0, energy: 0, worst: 0 };
    for (let i = first; i < bins.size && bins.edge[i] < to; i++) addBin(sum, bins, i, from, to);
    const per = (x: number): Figure => (sum.time > 0 ? x / sum.time : ENDED);
    const whileHeld = (x: () => number): Figure =>
      sum.time > 0 ? (sum.held > 0 ? x() : { none: 'hold was on nowhere there' }) : ENDED;
    const all = (x: number): Figure => (sum.time > 0 ? x : ENDED);
    return {
      candidate: name,
      meanError: whileHeld(() => sum.error / sum.held),
      rmsError: whileHeld(() => Math.sqrt(Math.max(0, sum.square / sum.held))),
      worstError: whileHeld(() => sum.worst),
      meanThrottle: per(sum.throttle),
      atLimit: whileHeld(() => sum.limit / sum.held),
      wheelEnergy: all(sum.energy),
      time: all(sum.time),
    };
  });
}

interface Sums {
  time: number;
  /** With hold on. */
  held: number;
  error: number;
  square: number;
  throttle: number;
  limit: number;
  energy: number;
  worst: number;
}

function addBin(sum: Sums, bins: BinRecord, i: number, from: number, to: number): void {
  const width = bins.edge[i + 1] - bins.edge[i];
  const share = (Math.min(to, bins.edge[i + 1]) - Math.max(from, bins.edge[i])) / width;
  if (!(share > 0)) return;
  sum.time += share * bins.time[i];
  sum.held += share * heldTime(bins, i);
  sum.error += share * bins.errorMean[i];
  sum.square += share * bins.errorSquare[i];
  sum.throttle += share * bins.throttleMean[i] * bins.time[i];
  sum.limit += share * (bins.timeUpper[i] + bins.timeLower[i]);
  sum.energy += share * bins.driveWork[i];
  if (share < 0.1) return;
  const extreme = -bins.errorMin[i] > bins.errorMax[i] ? bins.errorMin[i] : bins.errorMax[i];
  if (Math.abs(extreme) > Math.abs(sum.worst)) sum.worst = extreme;
}
