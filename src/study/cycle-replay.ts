import type { LoopPlan } from '../loop/plan.ts';
import type { BinRecord } from '../loop/result.ts';
import { runLoop } from '../loop/run-loop.ts';
import type { Road } from '../road/road.ts';
import { meanAlong } from './along-road.ts';
import type { Oscillation } from './cycle-shape.ts';
import type { Stretch } from './findings.ts';
import { trueSpeedFactor } from './hold-course.ts';
import { heldThroughout } from './hold-off.ts';

/** Turns that a replay is given, and those at its end over which the amplitude is taken, twice: to see whether it dies away. */
const TURNS = 24;
const MEASURED = 8;
/** The longer ones of two neighbouring turns fit in a window of this many mean turns. */
const WINDOW = 4 / 3;
/** Bins a turn: extremes of bins are those of every sample, so that this only sets where a window ends. */
const BINS = 12;
/** An oscillation that loses less than this in eight turns is sustained: a damping ratio below 0.004. */
const KEPT = 0.8;
/** The run starts no further below the set speed than this share of it. */
const DEEPEST_START = 0.5;

/** The candidate alone with itself: its plan over a steady road, begun as far below the set speed as it was seen to swing. */
export interface SteadyReplay {
  readonly plan: LoopPlan;
  readonly period: number;
}

/**
 * The plan over a road without waves: mean grade, wind and air of the stretch all the way, the set speed and the lowest
 * gear in use there, a sensor without noise. Whatever swings on it for 24 turns is kept going by the loop itself.
 */
export function steadyReplay(plan: LoopPlan, bins: BinRecord, oscillation: Oscillation): SteadyReplay {
  const { period, amplitude, from, to } = oscillation;
  const held = heldThroughout(plan);
  const { hold, vehicle } = plan;
  let middle = 0;
  while (middle < bins.size - 1 && bins.edge[middle + 1] <= (from + to) / 2) middle++;
  let gear = bins.gear[middle];
  for (let i = middle; i > 0 && bins.edge[i] > from; i--) gear = Math.min(gear, bins.gear[i]);
  for (let i = middle; i < bins.size && bins.edge[i] < to; i++) gear = Math.min(gear, bins.gear[i]);
  const speed = bins.setSpeed[middle];
  const setSpeed = speed / trueSpeedFactor(hold, vehicle);
  const length = (TURNS + 1) * period * (speed + 2 * amplitude);
  return {
    period,
    plan: {
      ...held,
      road: steadyRoad(plan.road, oscillation, length),
      vehicle: {
        ...vehicle,
        drive: { ...vehicle.drive, gear },
        sensor: { ...vehicle.sensor, noise: null },
      },
      hold: {
        ...held.hold,
        setSpeed,
        startSpeed: Math.max(setSpeed - amplitude, DEEPEST_START * setSpeed),
        changes: [],
      },
      rider: { ...held.rider, shifts: [] },
      bin: (speed * period) / BINS,
      timeLimit: TURNS * period,
    },
  };
}

/** What is left of an oscillation on the steady road. */
export interface Left {
  /** Half of peak to peak over the last turns [m/s]; Infinity for a run that ended on the way. */
  readonly amplitude: number;
  readonly sustained: boolean;
}

/** Runs a plan over the steady road and looks at its last turns. */
export function whatIsLeft(plan: LoopPlan, period: number): Left {
  const { status, bins } = runLoop(plan);
  if (status !== 'time_limit' && status !== 'completed')
    return { amplitude: Number.POSITIVE_INFINITY, sustained: true };
  const end = TURNS * period;
  const before = amplitudeBetween(bins, end - 2 * MEASURED * period, end - MEASURED * period, period);
  const amplitude = amplitudeBetween(bins, end - MEASURED * period, end, period);
  return { amplitude, sustained: amplitude >= KEPT * before };
}

/** Mean over windows of a little more than a turn of half of the way from the least to the greatest error [m/s]. */
function amplitudeBetween(bins: BinRecord, from: number, to: number, period: number): number {
  const windows = Math.max(1, Math.floor((to - from) / (WINDOW * period)));
  const width = (to - from) / windows;
  let sum = 0;
  let i = 0;
  for (let k = 0; k < windows; k++) {
    let low = Number.POSITIVE_INFINITY;
    let high = Number.NEGATIVE_INFINITY;
    while (i < bins.size && bins.timeAt[i] < from + k * width) i++;
    for (; i < bins.size && bins.timeAt[i] < from + (k + 1) * width; i++) {
      low = Math.min(low, bins.errorMin[i]);
      high = Math.max(high, bins.errorMax[i]);
    }
    if (high > low) sum += (high - low) / 2;
  }
  return sum / windows;
}

/** A road of the mean grade, wind and air of a stretch, two knots and `length` long [m]. */
function steadyRoad(road: Road, { from, to }: Stretch, length: number): Road {
  const mean = (column: Float64Array): number => meanAlong(road, column, from, to);
  const flat = (value: number): Float64Array => Float64Array.of(value, value);
  const grade = mean(road.grade);
  return {
    ...road,
    along: 'distance',
    size: 2,
    station: Float64Array.of(0, length),
    distance: Float64Array.of(0, length / Math.sqrt(1 + grade * grade)),
    elevation: Float64Array.of(0, (length * grade) / Math.sqrt(1 + grade * grade)),
    rawElevation: null,
    grade: flat(grade),
    gradeSd: flat(0),
    heading: null,
    curvature: null,
    headwind: flat(mean(road.headwind)),
    crosswind: flat(mean(road.crosswind)),
    airDensity: flat(mean(road.airDensity)),
    airTemperature: flat(mean(road.airTemperature)),
    latitudeDeg: null,
    longitudeDeg: null,
    masks: [],
    repairs: [],
    warnings: [],
    turnsAt: null,
    points: null,
  };
}
