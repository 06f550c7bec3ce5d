import { LIMIT_BRAKE, LIMIT_LOWER, LIMIT_RATE, LIMIT_UPPER, type LoopPlan } from '../loop/plan.ts';
import type { FullSeries } from '../loop/result.ts';
import { valueAt } from '../road/lookup.ts';
import { gripForce } from '../vehicle/traction.ts';
import type { Stretch } from './findings.ts';
import { beyondGrip } from './grip-places.ts';
import { AT_LIMIT } from './hill-stretches.ts';
import { errorAt, isSettling } from './series-measures.ts';

/** What a candidate did on a hill, from its own run: from the hill's beginning to the end of what it is answerable for. */
export interface HillEvents {
  readonly leftBand: boolean;
  /** It left its band, sat on a limit, or went beyond the grip of its wheel. */
  readonly affected: boolean;
  /** Least and greatest error there [m/s]. */
  readonly low: number;
  readonly high: number;
  /** Time at the limits, at the rate limit, and with the rider's brake on [s]. */
  readonly timeUpper: number;
  readonly timeLower: number;
  readonly timeRate: number;
  readonly timeBrake: number;
  /** Time with the drive beyond the grip of its wheel; 0 where that is not known [s]. */
  readonly timeBeyondGrip: number;
  /** Shifts of gear, and the gears that were driven in. */
  readonly shifts: number;
  readonly gears: ReadonlySet<number>;
}

/** Over samples [first, last), where no change of set speed is being followed and no shift is being got over. */
export function hillEvents(
  { road, vehicle }: Pick<LoopPlan, 'road' | 'vehicle'>,
  series: FullSeries,
  first: number,
  last: number,
  settling: readonly Stretch[],
  band: number,
): HillEvents {
  const times = { timeUpper: 0, timeLower: 0, timeRate: 0, timeBrake: 0, timeBeyondGrip: 0 };
  let shifts = 0;
  const gears = new Set<number>();
  let low = 0;
  let high = 0;
  for (let i = first; i < last; i++) {
    if (isSettling(series.distance[i], settling)) continue;
    if (i > first && series.gear[i] !== series.gear[i - 1]) shifts++;
    gears.add(series.gear[i]);
    const error = errorAt(series, i);
    low = Math.min(low, error);
    high = Math.max(high, error);
    const span = i + 1 < series.size ? series.time[i + 1] - series.time[i] : 0;
    const limit = series.limit[i];
    if ((limit & LIMIT_UPPER) !== 0) times.timeUpper += span;
    if ((limit & LIMIT_LOWER) !== 0) times.timeLower += span;
    if ((limit & LIMIT_RATE) !== 0) times.timeRate += span;
    if ((limit & LIMIT_BRAKE) !== 0) times.timeBrake += span;
    if (vehicle.traction === null) continue;
    const grip = gripForce(vehicle, valueAt(road, 'grade', series.distance[i]));
    if (beyondGrip(grip, series.driveForce[i], series.driveForce[i]) !== null) times.timeBeyondGrip += span;
  }
  const leftBand = high > band || -low > band;
  return {
    leftBand,
    affected: leftBand || times.timeUpper + times.timeLower > AT_LIMIT || times.timeBeyondGrip > AT_LIMIT,
    low,
    high,
    ...times,
    shifts,
    gears,
  };
}
