import type { BinDetail, Distribution } from '../loop/result.ts';
import { classTimes, quantileOf } from './class-times.ts';
import {
  type FigureRecord,
  held,
  type Measure,
  placeless,
  sum,
  worstBin,
  worstError,
} from './figure-measures.ts';
import type { Figure } from './findings.ts';
import { heldTime } from './held-time.ts';
import { hillEnds, isSteady } from './steady-grades.ts';

const NO_DETAIL = { none: 'the run kept no detail' };
const NO_SAMPLE = { none: 'no sample of it there' };

/** A figure of the detail over the time with hold on [s], in SI; its place is where the score is greatest. */
export function detailed(
  record: FigureRecord,
  of: (detail: BinDetail, time: number) => Figure,
  score: ((detail: BinDetail, i: number) => number) | null = null,
): Measure {
  const { detail } = record.bins;
  const { value } = held(record, (time) => (detail === null ? NO_DETAIL : of(detail, time)));
  if (detail === null || score === null || typeof value !== 'number') return placeless(value);
  return { value, at: worstBin(record, (i) => score(detail, i))?.at ?? null };
}

/** Where |e| was greatest: the place of a sum of errors. */
export const byError = (record: FigureRecord) => (_: BinDetail, i: number) => worstError(record, i);

/** Value that a share of the samples of the chosen bins stays at or below; of magnitudes where asked. */
export function quantile(
  { chosen }: FigureRecord,
  distribution: Distribution,
  share: number,
  magnitude = false,
): Figure {
  return quantileOf(classTimes(distribution, chosen, magnitude), share) ?? NO_SAMPLE;
}

/** Furthest class from 0 in a bin, counted from 1; 0 for none. */
export function furthestClass({ start, index }: Distribution, i: number): number {
  let furthest = 0;
  for (let k = start[i]; k < start[i + 1]; k++)
    furthest = Math.max(furthest, index[k] < 0 ? -index[k] : index[k] + 1);
  return furthest;
}

/**
 * Time integral of |e| times the time since the last event [m s]: start of the run, or what `events` has; one within a
 * bin counts from the start of the bin.
 */
export function timeWeightedError({ bins, chosen, events }: FigureRecord, detail: BinDetail): number {
  let total = 0;
  let next = 0;
  let since = 0;
  for (let i = 0; i < bins.size; i++) {
    let restarts = false;
    for (; next < events.length && events[next] < bins.edge[i + 1]; next++) restarts = true;
    if (restarts) since = bins.timeAt[i];
    if (chosen[i] === 1) total += (bins.timeAt[i] - since) * detail.errorAbsolute[i] + detail.errorMoment[i];
  }
  return total;
}

/** Distance that must count for a hill to have a steady error [m]. */
const ENOUGH = 50;

/** The steady error of the hill where it is greatest [m/s], without its sign, and the middle of its end [m]. */
export function steadyHillError(record: FigureRecord): Measure {
  const { bins, chosen, road } = record;
  const limited = (i: number): boolean => bins.timeUpper[i] + bins.timeLower[i] + bins.timeOff[i] > 0;
  let worst: { value: number; at: number } | null = null;
  let i = 0;
  for (const { from, to } of hillEnds(road)) {
    let [length, time, error] = [0, 0, 0];
    let free = true;
    while (i < bins.size && bins.edge[i] < from) i++;
    for (; i < bins.size && bins.edge[i + 1] <= to; i++) {
      if (limited(i)) free = false;
      if (chosen[i] !== 1 || !isSteady(road, bins.edge[i], bins.edge[i + 1])) continue;
      length += bins.edge[i + 1] - bins.edge[i];
      time += heldTime(bins, i);
      error += bins.errorMean[i];
    }
    const value = Math.abs(error / time);
    if (free && length >= ENOUGH && time > 0 && value > (worst?.value ?? -1))
      worst = { value, at: (from + to) / 2 };
  }
  return worst ?? placeless({ none: 'no hill there has a steady end with the command within its limits' });
}

export const sumOf = (record: FigureRecord, column: ArrayLike<number>): number =>
  sum(record, (i) => column[i]);
