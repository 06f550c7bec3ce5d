import { cellOf } from '../numeric/interpolate.ts';
import { cellIndex } from '../vehicle/drive-law.ts';
import { loadBelt, turnsAlong } from './belt.ts';
import { buildMachine } from './build-machine.ts';
import { checkPlan } from './check-plan.ts';
import { loadGear, stallSpeed } from './engage-gear.ts';
import { journey } from './journey.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import { distanceIn, stationAt } from './places.ts';
import type { LoopPlan, RunStatus } from './plan.ts';
import type { Checkpoint, FullSeries, LoopResult } from './result.ts';
import { sampleColumns } from './sample-columns.ts';
import { settleSensor } from './sense-speed.ts';
import { settle } from './settle.ts';
import { statusOf } from './status.ts';

/** Where a replay starts: all state of a run at a sample, or settled at a horizontal distance [m] at the set speed there. */
export type ReplayStart = Checkpoint | { readonly settledAt: number };

/**
 * Runs a window of the road and keeps every controller sample.
 *
 * From a checkpoint of the same plan the samples are those of the run, bit for bit. The plan may differ from the one
 * that made the checkpoint in vehicle, controller gains or set speed (which then changes at the start of the window);
 * the road must be the same.
 *
 * @param start a checkpoint, or a place to start settled
 * @param to horizontal distance [m] at which the window ends
 * @param from horizontal distance [m] from which samples are kept: what comes before is run and not told
 * @returns `completed` when the window was driven; the samples that start at or behind `from` and before `to`
 * @throws InputError where the plan itself cannot be run
 */
export function replay(
  plan: LoopPlan,
  start: ReplayStart,
  to: number,
  from = 0,
): { readonly status: RunStatus; readonly series: FullSeries } {
  const { road } = plan;
  const machine = machineAt(plan, start);
  const { s, p } = machine;
  const until = to >= road.distance[road.size - 1] ? Number.POSITIVE_INFINITY : stationAt(road, to);
  const run = journey(machine, plan, () => undefined);

  let status: RunStatus | null = s[at.SPEED] < stallSpeed(machine) ? 'stalled' : null;
  if (status === null)
    status = statusOf(run.advance(Math.min(until, stationAt(road, from)), Number.POSITIVE_INFINITY));
  let cell = cellOf(road.station, s[at.STATION]);
  const length = Math.min(until, road.station[road.size - 1]) - s[at.STATION];
  const pace = road.along === 'time' ? 1 : s[at.SPEED];
  const columns = sampleColumns(length / (pace * p[at.P_SAMPLE]));
  while (status === null && s[at.STATION] < until) {
    if (run.late()) status = 'time_limit';
    else {
      const time = run.time();
      while (cell < road.size - 2 && road.station[cell + 1] <= s[at.STATION]) cell++;
      const distance = distanceIn(road, cell, s[at.STATION]);
      status = statusOf(run.advance(until, 1));
      if (status !== 'non_finite') columns.push(machine, time, distance);
    }
  }
  return { status: status ?? 'completed', series: columns.finish() };
}

/** The machine of a plan, in the state of a checkpoint or settled at a place. */
export function machineAt(plan: LoopPlan, start: ReplayStart): Machine {
  checkPlan(plan);
  const machine = buildMachine(plan);
  if ('settledAt' in start)
    settle(machine, plan, stationAt(plan.road, start.settledAt), setSpeedAt(plan, start.settledAt));
  else restore(machine, start);
  return machine;
}

/** The last checkpoint at or before a horizontal distance [m]; the first where there is none. */
export function nearestCheckpoint(result: LoopResult, distance: number): Checkpoint {
  return result.checkpoints.findLast((point) => point.distance <= distance) ?? result.checkpoints[0]!;
}

/** Set speed in force at a place; changes by time are not known there. */
function setSpeedAt(plan: LoopPlan, distance: number): number {
  const made = plan.hold.changes.findLast(
    (change) => 'distance' in change.at && change.at.distance <= distance,
  );
  return made?.setSpeed ?? plan.hold.setSpeed;
}

function restore(machine: Machine, { state }: Checkpoint): void {
  const { s, speedEdges, throttleEdges, gears, belt } = machine;
  s.set(state.subarray(0, at.HISTORY));
  if (state.length === s.length) s.set(state.subarray(at.HISTORY), at.HISTORY);
  else for (let i = at.HISTORY; i < s.length; i += at.HISTORY_STRIDE) s[i] = s[at.FILTERED];
  if (state.length !== s.length) settleSensor(machine);
  // Another vehicle has other gears, masses and cells; at an edge of the same one, either side is right and must stay.
  const speedCell = s[at.SPEED_CELL];
  const ratio = s[at.RATIO];
  const turns = turnsAlong(machine);
  loadGear(machine, Math.min(s[at.GEAR], gears.length / 2 - 1));
  if (belt !== null) loadBelt(machine, Math.min(Math.max(ratio, belt.least), belt.greatest), turns);
  if (holds(speedEdges, speedCell, s[at.RATIO] * s[at.SPEED])) s[at.SPEED_CELL] = speedCell;
  if (!holds(throttleEdges, s[at.THROTTLE_CELL], s[at.THROTTLE]))
    s[at.THROTTLE_CELL] = cellIndex(throttleEdges, s[at.THROTTLE]);
}

function holds(edges: Float64Array, cell: number, x: number): boolean {
  const low = edges[cell - 1] ?? Number.NEGATIVE_INFINITY;
  const high = edges[cell] ?? Number.POSITIVE_INFINITY;
  return cell <= edges.length && x >= low - 1e-6 && x <= high + 1e-6;
}
