import { cellOf } from '../numeric/interpolate.ts';
import { meanGradeSd } from '../road/error-scales.ts';
import { valueAt } from '../road/lookup.ts';
import type { Road } from '../road/road.ts';
import type { Demand, Hill } from './findings.ts';
import type { HillStretch } from './hill-stretches.ts';

/** What a hill is, whoever rides it. */
export type HillFacts = Omit<Hill, 'outcomes'>;

/** Figures of a hill from road and demand. The mean grade is net climb over length, its s.d. that of the road's error model. */
export function hillFacts(road: Road, demand: Demand, stretch: HillStretch, number: number): HillFacts {
  const { from, to, until, kind } = stretch;
  const length = to - from;
  let steepest = cellOf(road.distance, from);
  let extreme = steepest;
  for (let i = steepest; i < road.size && road.distance[i] <= to; i++) {
    if (road.distance[i] < from) continue;
    if (Math.abs(road.grade[i]) > Math.abs(road.grade[steepest])) steepest = i;
    if (Math.abs(demand.share[i]) > Math.abs(demand.share[extreme])) extreme = i;
  }
  const short = demand.share[extreme] >= 0;
  let brakePower = 0;
  let brakeEnergy = 0;
  for (let i = cellOf(road.distance, from); i + 1 < road.size && road.distance[i] < to; i++) {
    if (demand.brakePower[i] > brakePower) brakePower = demand.brakePower[i];
    const time =
      (2 * (road.station[i + 1] - road.station[i])) / (demand.setSpeed[i] + demand.setSpeed[i + 1]);
    brakeEnergy += 0.5 * (demand.brakePower[i] + demand.brakePower[i + 1]) * time;
  }
  return {
    number,
    kind,
    from,
    to,
    until,
    meanGrade: (valueAt(road, 'elevation', to) - valueAt(road, 'elevation', from)) / length,
    meanGradeSd: meanGradeSd(road, from, to),
    maxGrade: road.grade[steepest],
    share: demand.share[extreme],
    shareAt: road.distance[extreme],
    requiredForce: demand.required[extreme],
    availableForce: short ? demand.upper[extreme] : demand.lower[extreme],
    sustainedSpeed: short ? demand.sustained[extreme] : demand.runaway[extreme],
    gears: null,
    brakePower,
    brakeEnergy,
    unresolved: road.smoothing !== null && length < road.smoothing.shortestHill,
  };
}
