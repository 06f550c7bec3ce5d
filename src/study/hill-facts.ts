import type { Road } from '../road/road.ts';
import { knotBefore, meanAlong, valueAt } from './along-road.ts';
import type { Demand, Hill } from './findings.ts';
import type { HillStretch } from './hill-stretches.ts';

/** What a hill is, whoever rides it. */
export type HillFacts = Omit<Hill, 'outcomes'>;

/**
 * Figures of a hill from road and demand. The mean grade is net climb over length. Its s.d. takes errors of the grade
 * as one within a smoothing wavelength and independent beyond: rms of the knots' s.d. / sqrt(max(1, length / wavelength)).
 */
export function hillFacts(road: Road, demand: Demand, stretch: HillStretch, number: number): HillFacts {
  const { from, to, until, kind } = stretch;
  const length = to - from;
  const variance = meanAlong(
    road,
    road.gradeSd.map((sd) => sd * sd),
    from,
    to,
  );
  const independent = road.smoothing === null ? 1 : Math.max(1, length / road.smoothing.wavelength);
  let steepest = knotBefore(road, from);
  let extreme = steepest;
  for (let i = steepest; i < road.size && road.distance[i] <= to; i++) {
    if (road.distance[i] < from) continue;
    if (Math.abs(road.grade[i]) > Math.abs(road.grade[steepest])) steepest = i;
    if (Math.abs(demand.share[i]) > Math.abs(demand.share[extreme])) extreme = i;
  }
  const short = demand.share[extreme] >= 0;
  return {
    number,
    kind,
    from,
    to,
    until,
    meanGrade: (valueAt(road, road.elevation, to) - valueAt(road, road.elevation, from)) / length,
    meanGradeSd: Math.sqrt(variance / independent),
    maxGrade: road.grade[steepest],
    share: demand.share[extreme],
    shareAt: road.distance[extreme],
    requiredForce: demand.required[extreme],
    availableForce: short ? demand.upper[extreme] : demand.lower[extreme],
    sustainedSpeed: short ? demand.sustained[extreme] : demand.runaway[extreme],
    unresolved: road.smoothing !== null && length < road.smoothing.shortestHill,
  };
}
