import type { Road } from '../road/road.ts';
import type { RoadSegment, Stretch } from './findings.ts';
import { describeSegments } from './segments.ts';

/**
 * What one more segment must save [m]: sum over the road of length times (grade - mean grade)^2.
 * A stretch inside another grade becomes its own when length x (difference of grade)^2 exceeds twice this:
 * 500 m at 2 %, 125 m at 4 %, 55 m at 6 %. Below that a table row says no more than its neighbours do.
 */
export const TERRAIN_PENALTY = 0.1;
const MOST_CELLS = 10_000;

/**
 * Cuts the road into stretches of constant grade, optimally: the least sum over all segmentations of
 * length x (grade - mean of its segment)^2 plus `penalty` a segment.
 *
 * Optimal partitioning by dynamic programming with pruning: R. Killick, P. Fearnhead, I. A. Eckley, "Optimal
 * detection of changepoints with a linear computational cost", JASA 107 (2012) 1590-1598, eq. 3-6 (K = 0 for a
 * sum of squares). The data are the cells between knots, each weighted with its horizontal length; on a road of
 * more than 10,000 cells neighbours are joined, steps of grade excepted, because pruning does little where a grade
 * goes on for ever.
 *
 * @param road at least one cell of positive length
 * @param penalty [m], >= 0
 * @returns segments in order; together they cover the road
 */
export function segmentsByTerrain(road: Road, penalty: number = TERRAIN_PENALTY): RoadSegment[] {
  const n = road.size - 1;
  const length: number[] = [];
  const grade: number[] = [];
  const edge: number[] = [road.distance[0]];
  const shortest = (road.distance[n] - road.distance[0]) / MOST_CELLS;
  let width = 0;
  let rise = 0;
  for (let i = 0; i < n; i++) {
    const dx = road.distance[i + 1] - road.distance[i];
    width += dx;
    rise += (dx * (road.grade[i] + road.grade[i + 1])) / 2;
    const step = i + 2 <= n && road.distance[i + 2] === road.distance[i + 1];
    if (!(width > 0) || (width < shortest && !step && i + 1 < n)) continue;
    length.push(width);
    grade.push(rise / width);
    edge.push(road.distance[i + 1]);
    width = 0;
    rise = 0;
  }
  const starts = segmentStarts(Float64Array.from(length), Float64Array.from(grade), penalty);
  const stretches: Stretch[] = starts.map((start, k) => ({
    from: edge[start],
    to: edge[k + 1 < starts.length ? starts[k + 1] : length.length],
  }));
  return describeSegments(road, stretches);
}

/**
 * First cell of each segment of the best segmentation of `value` with weights `weight` (> 0, equal lengths).
 * Ties go to the earlier start.
 */
export function segmentStarts(weight: Float64Array, value: Float64Array, penalty: number): number[] {
  const n = weight.length;
  if (n === 0) return [];
  // Centred values keep the differences of running sums exact enough.
  let total = 0;
  let mean = 0;
  for (let i = 0; i < n; i++) {
    total += weight[i];
    mean += weight[i] * value[i];
  }
  mean /= total;
  const w = new Float64Array(n + 1);
  const s = new Float64Array(n + 1);
  const q = new Float64Array(n + 1);
  for (let i = 0; i < n; i++) {
    const v = value[i] - mean;
    w[i + 1] = w[i] + weight[i];
    s[i + 1] = s[i] + weight[i] * v;
    q[i + 1] = q[i] + weight[i] * v * v;
  }
  const best = new Float64Array(n + 1);
  best[0] = -penalty;
  const last = new Int32Array(n + 1);
  // Starts that may still be the last cut of a best segmentation, and their cost at the present end.
  const alive = new Int32Array(n + 1);
  const cost = new Float64Array(n + 1);
  let count = 1;
  for (let end = 1; end <= n; end++) {
    let least = Number.POSITIVE_INFINITY;
    let from = 0;
    for (let k = 0; k < count; k++) {
      const start = alive[k];
      const ds = s[end] - s[start];
      const c = best[start] + (q[end] - q[start] - (ds * ds) / (w[end] - w[start]));
      cost[k] = c;
      if (c < least) {
        least = c;
        from = start;
      }
    }
    best[end] = least + penalty;
    last[end] = from;
    // A start no better than a cut here can go; the sliver keeps rounding from holding a level road's starts alive.
    const bound = best[end] - 1e-9 * penalty;
    let kept = 0;
    for (let k = 0; k < count; k++) if (cost[k] < bound) alive[kept++] = alive[k];
    alive[kept++] = end;
    count = kept;
  }
  const starts: number[] = [];
  for (let end = n; end > 0; end = last[end]) starts.push(last[end]);
  return starts.reverse();
}
