import { LIMIT_LOWER, LIMIT_UPPER } from '../loop/plan.ts';
import type { FullSeries } from '../loop/result.ts';
import type { SpeedTrace } from '../loop/trace-speeds.ts';
import type { Stretch } from './findings.ts';

const LIMITS = LIMIT_UPPER | LIMIT_LOWER;

export const errorAt = (series: SpeedTrace, i: number): number => series.speed[i] - series.setSpeed[i];
const limited = (series: FullSeries, i: number): boolean => (series.limit[i] & LIMITS) !== 0;

export const isSettling = (distance: number, settling: readonly Stretch[]): boolean =>
  settling.some(({ from, to }) => distance >= from && distance < to);

/** Time that sample i stands for [s]. */
const spanOf = (series: FullSeries, i: number): number =>
  i + 1 < series.size ? series.time[i + 1] - series.time[i] : 0;

/** First sample at or behind a horizontal distance; the size where there is none. */
export function sampleAt(series: SpeedTrace, distance: number): number {
  let low = 0;
  let high = series.size;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (series.distance[middle] < distance) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Error, time lost and time at a limit over samples [first, last), where no change of set speed is being followed. */
export function passageOf(
  series: FullSeries,
  first: number,
  last: number,
  settling: readonly Stretch[] = [],
): { extreme: number; timeLost: number; timeAtLimit: number } {
  let extreme = 0;
  let timeLost = 0;
  let timeAtLimit = 0;
  for (let i = first; i < last; i++) {
    if (isSettling(series.distance[i], settling)) continue;
    const e = errorAt(series, i);
    if (Math.abs(e) > Math.abs(extreme)) extreme = e;
    timeLost -= (e / series.setSpeed[i]) * spanOf(series, i);
    if (limited(series, i)) timeAtLimit += spanOf(series, i);
  }
  return { extreme, timeLost, timeAtLimit };
}

/** Samples [first, last) thinned to at most `most` rows; least and greatest speed and command of every piece are kept. */
export function thinSeries(series: FullSeries, first: number, last: number, most: number): FullSeries {
  const count = last - first;
  if (count <= most) return pick(series, range(first, last));
  const pieces = Math.max(1, Math.floor((most - 2) / 4));
  const kept = new Set<number>([first, last - 1]);
  for (let k = 0; k < pieces; k++) {
    const a = first + Math.floor((k * count) / pieces);
    const b = first + Math.floor(((k + 1) * count) / pieces);
    for (const column of [series.speed, series.command]) {
      let low = a;
      let high = a;
      for (let i = a; i < b; i++) {
        if (column[i] < column[low]) low = i;
        if (column[i] > column[high]) high = i;
      }
      kept.add(low).add(high);
    }
  }
  return pick(
    series,
    [...kept].sort((a, b) => a - b),
  );
}

const range = (first: number, last: number): number[] =>
  Array.from({ length: Math.max(0, last - first) }, (_, k) => first + k);

function pick(series: FullSeries, rows: readonly number[]): FullSeries {
  const numbers = (column: Float64Array): Float64Array => Float64Array.from(rows, (i) => column[i]);
  const bytes = (column: Uint8Array): Uint8Array => Uint8Array.from(rows, (i) => column[i]);
  return {
    size: rows.length,
    time: numbers(series.time),
    distance: numbers(series.distance),
    setSpeed: numbers(series.setSpeed),
    reference: numbers(series.reference),
    speed: numbers(series.speed),
    measured: numbers(series.measured),
    command: numbers(series.command),
    actuator: numbers(series.actuator),
    proportional: numbers(series.proportional),
    integral: numbers(series.integral),
    feedforward: numbers(series.feedforward),
    limit: bytes(series.limit),
    gear: bytes(series.gear),
    shaftSpeed: numbers(series.shaftSpeed),
    driveForce: numbers(series.driveForce),
    brakeForce: numbers(series.brakeForce),
    acceleration: numbers(series.acceleration),
  };
}
