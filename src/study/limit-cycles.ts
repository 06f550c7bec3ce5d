import { nearestCheckpoint } from '../loop/replay.ts';
import type { BinRecord } from '../loop/result.ts';
import { traceSpeeds } from '../loop/trace-speeds.ts';
import type { Road } from '../road/road.ts';
import { fromKmh } from '../units/convert.ts';
import { causeOfCycle } from './cycle-cause.ts';
import { steadyReplay, whatIsLeft } from './cycle-replay.ts';
import { LEAST_TURNS, LONGEST_SWING, type Oscillation, oscillationsIn } from './cycle-shape.ts';
import { chainsOf, turningsOf } from './cycle-swings.ts';
import type { CycleCause, Demand, LimitCycle, Replayed, Stretch } from './findings.ts';
import { courseOfRun } from './hold-course.ts';
import { chooseBins } from './measure-figure.ts';

/** Amplitude from which a limit cycle is told, half of peak to peak [m/s]. */
export const LEAST_AMPLITUDE = fromKmh(0.5);
/** Share of its amplitude that an oscillation keeps on a steady road, if the road is not what makes it. */
const BY_ITSELF = 0.5;
/** A limit cycle that pauses for no more turns than this, and goes on at a period no further off, is told as one. */
const PAUSE_TURNS = 4;
const ALIKE = 0.5;
/** Bins blur the ends of a chain: it may look two turning points shorter. */
const SCREENED_TURNINGS = 2 * LEAST_TURNS - 1;
/** Bins see less of a swing than the samples do when a turning point lies across an edge. */
const SCREENED_SHARE = 0.9;

export interface CycleSearch {
  readonly road: Road;
  readonly demand: Demand;
  /** Candidates after their runs over this road; locked throttles are passed over. */
  readonly replayed: readonly Replayed[];
  /** Half of peak to peak [m/s]; 0.5 km/h by default. */
  readonly leastAmplitude?: number;
  /** Told before each candidate how many are done, and of how many. */
  readonly onCandidate?: (done: number, of: number) => void;
}

/**
 * Limit cycles: oscillations of the speed error that the loop sustains by itself.
 *
 * 1. Where a hold is asked for (Demand.holdable, and no change of set speed settling), the error swings by twice the
 *    least amplitude or more for at least four turns, and repeats itself with a period of 2 to 25 s (oscillationsIn).
 *    The record by bin is searched first, and only stretches that swing there are run again, so that a candidate that
 *    holds costs next to nothing.
 * 2. It is not the road's: over a steady road of the stretch's mean grade, wind and air, and with no noise in the
 *    sensor, at least half of the amplitude is left after 24 turns, and the last eight are no smaller than four fifths
 *    of the eight before. A ring that decays behind a hill, a road that is itself a wave, and gusts all fail here.
 * 3. The cause is found by replays over the steady road with one thing taken away at a time (causeOfCycle).
 *
 * @returns by candidate, in order along the way; empty where nothing swings by itself
 */
export function findLimitCycles(search: CycleSearch): LimitCycle[] {
  const { road, demand, leastAmplitude = LEAST_AMPLITUDE, onCandidate } = search;
  const holding = search.replayed.filter(({ plan }) => plan.controller.kind !== 'locked');
  return holding.flatMap((candidate, k) => {
    onCandidate?.(k, holding.length);
    return cyclesOfRun(candidate, swingingStretches(candidate, road, demand, leastAmplitude), leastAmplitude);
  });
}

function cyclesOfRun(
  candidate: Replayed,
  stretches: readonly Stretch[],
  leastAmplitude: number,
): LimitCycle[] {
  const { plan, result } = candidate;
  const cycles: LimitCycle[] = [];
  for (const { from, to } of stretches) {
    const trace = traceSpeeds(plan, nearestCheckpoint(result, from), to, from);
    for (const oscillation of oscillationsIn(trace, leastAmplitude)) {
      const last = cycles.at(-1);
      const cycle = cycleOf(candidate, oscillation, last?.cause ?? null);
      if (cycle === null) continue;
      if (last !== undefined && goesOn(last, cycle)) cycles[cycles.length - 1] = joined(last, cycle);
      else cycles.push(cycle);
    }
  }
  return cycles;
}

/** Of the same cause and nearly the same period, after no more than a few turns that were too small or too irregular to count. */
function goesOn(one: LimitCycle, next: LimitCycle): boolean {
  const turnLength = (one.to - one.from) / one.turns;
  const alike = Math.abs(next.period - one.period) <= ALIKE * one.period;
  return one.cause === next.cause && alike && next.from - one.to <= PAUSE_TURNS * turnLength;
}

function joined(one: LimitCycle, next: LimitCycle): LimitCycle {
  const turns = one.turns + next.turns;
  const mean = (a: number, b: number): number => (a * one.turns + b * next.turns) / turns;
  return {
    ...one,
    to: next.to,
    turns,
    period: mean(one.period, next.period),
    speedAmplitude: mean(one.speedAmplitude, next.speedAmplitude),
    throttleAmplitude: mean(one.throttleAmplitude, next.throttleAmplitude),
  };
}

/** Stretches of whole bins in which the record swings like a limit cycle [m]. */
function swingingStretches(
  candidate: Replayed,
  road: Road,
  demand: Demand,
  leastAmplitude: number,
): Stretch[] {
  const { bins } = candidate.result;
  const chosen = chooseBins(bins, 'holdable', { road, demand }, courseOfRun(candidate).settling);
  const stretches: Stretch[] = [];
  for (let first = 0; first < bins.size; first++) {
    if (chosen[first] === 0) continue;
    let end = first;
    while (end < bins.size && chosen[end] === 1) end++;
    const height = SCREENED_SHARE * 2 * leastAmplitude;
    const turnings = turningsOf(
      bins.errorMin.subarray(first, end),
      bins.errorMax.subarray(first, end),
      height,
    );
    const time = bins.timeAt.subarray(first, end);
    for (const chain of chainsOf(turnings, time, LONGEST_SWING + longestBin(bins), SCREENED_TURNINGS)) {
      const from = first + chain[0].at;
      const to = first + chain[chain.length - 1].at;
      stretches.push({ from: bins.edge[Math.max(first, from - 1)], to: bins.edge[Math.min(end, to + 2)] });
    }
    first = end;
  }
  return stretches;
}

function longestBin(bins: BinRecord): number {
  let longest = 0;
  for (let i = 0; i < bins.size; i++) longest = Math.max(longest, bins.time[i]);
  return longest;
}

/** An oscillation with what it is made by; null: not by the loop itself. */
function cycleOf(
  { name, plan, result }: Replayed,
  oscillation: Oscillation,
  before: CycleCause | null,
): LimitCycle | null {
  const { from, to, period, turns, amplitude } = oscillation;
  const replay = steadyReplay(plan, result.bins, oscillation);
  const alone = whatIsLeft(replay.plan, period);
  if (!alone.sustained || alone.amplitude < BY_ITSELF * amplitude) return null;
  return {
    candidate: name,
    from,
    to,
    period,
    turns,
    speedAmplitude: amplitude,
    throttleAmplitude: throttleAmplitude(result.bins, oscillation),
    ...causeOfCycle({ ...replay, amplitude: alone.amplitude }, before),
  };
}

/** Mean over the turns of half of the way from the least to the greatest throttle. */
function throttleAmplitude(bins: BinRecord, { from, to, period }: Oscillation): number {
  let sum = 0;
  let turns = 0;
  let i = 0;
  while (i < bins.size - 1 && bins.edge[i + 1] <= from) i++;
  while (i < bins.size && bins.edge[i] < to) {
    const start = bins.timeAt[i];
    let low = Number.POSITIVE_INFINITY;
    let high = Number.NEGATIVE_INFINITY;
    for (; i < bins.size && bins.edge[i] < to && bins.timeAt[i] < start + period; i++) {
      low = Math.min(low, bins.throttleMin[i]);
      high = Math.max(high, bins.throttleMax[i]);
    }
    sum += (high - low) / 2;
    turns++;
  }
  return turns > 0 ? sum / turns : 0;
}
