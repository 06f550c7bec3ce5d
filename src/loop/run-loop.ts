import { biteLog } from './bite-log.ts';
import { buildMachine } from './build-machine.ts';
import { checkPlan } from './check-plan.ts';
import { stallSpeed } from './engage-gear.ts';
import { journey } from './journey.ts';
import * as at from './layout.ts';
import { ledgerOf } from './ledger.ts';
import { distanceAt } from './places.ts';
import { asksOfHold, type LoopPlan, type RunStatus } from './plan.ts';
import { recorder } from './record.ts';
import { detailRecorder } from './record-detail.ts';
import type { Checkpoint, LoopResult } from './result.ts';
import { settle } from './settle.ts';
import { statusOf } from './status.ts';

/** Distance between checkpoints [m]. */
const CHECKPOINT_EVERY = 1000;

/**
 * Runs the closed loop over a road: the controller once a sample with zero-order hold, the plant stepped between by
 * the scheme of the plan (equations and method in exact.ts and fast.ts), from a settled start to the end of the road,
 * standstill, stall or the time limit. It never throws on the way: how it ended is the status.
 *
 * Errors of speed at 50 Hz against a converged solution: below 2e-8 m/s (`exact`; with slack, rounded commands, shifts,
 * a belt and a fuel cut too; 1.4e-6 m/s with crosswind, whose drag is linearised once a step), 2e-5 m/s (`fast`). While
 * the rider's brake is on: 2e-5 and 1e-4 m/s, since its onset is not cut. Where a command is rounded or the law steps
 * (a fuel cut), `fast` may take a step a sample early or late: 0.02 m/s; so does a loop that swings of itself.
 *
 * Those are errors against the equations as they stand, in which the ratio of a belt and the charge and heat of a battery
 * move once a sample. Against a belt and a battery that move all the time they are first order in the sample: at 50 Hz
 * some 1e-4 m/s (what turns before the belt weighs 0.002 kg m2) to 7e-4 m/s (0.02 kg m2), and 1e-3 m/s of a battery, 3e-3 m/s of one that heats up in seconds.
 *
 * @param plan everything the run depends on
 * @returns records by distance bin, the account of energy, a checkpoint about every kilometre
 * @throws InputError where the plan itself cannot be run (no road, no sample time, more than four bands)
 */
export function runLoop(plan: LoopPlan): LoopResult {
  checkPlan(plan);
  const { road } = plan;
  const machine = buildMachine(plan);
  const { s } = machine;
  settle(machine, plan, 0, plan.hold.startSpeed);
  const end = road.distance[road.size - 1];
  const edge = binEdges(end, plan.bin);
  const detail = plan.detail === true ? detailRecorder(edge.length - 1, machine.p[at.P_SAMPLE]) : null;
  const record = recorder(edge, plan.bands.length, detail);
  const run = journey(machine, plan, record.add);
  const bites = biteLog(s);
  const checkpoints: Checkpoint[] = [checkpoint(0, run.time(), s)];
  const bins = edge.length - 1;

  let status: RunStatus | null = s[at.SPEED] < stallSpeed(machine) ? 'stalled' : null;
  let cell = 0;
  for (let bin = 0; bin < bins && status === null; bin++) {
    while (cell < road.size - 2 && road.distance[cell + 1] < edge[bin + 1]) cell++;
    const until = bin + 1 < bins ? stationIn(road, cell, edge[bin + 1]) : Number.POSITIVE_INFINITY;
    const entered = run.time();
    const event = run.advance(until, Number.POSITIVE_INFINITY);
    status = statusOf(event) ?? (run.late() ? 'time_limit' : null);
    record.close(machine, entered);
    bites.note(edge[bin]);
    if (status === null && edge[bin + 1] >= CHECKPOINT_EVERY * checkpoints.length)
      checkpoints.push(checkpoint(distanceAt(road, s[at.STATION]), run.time(), s));
  }
  return {
    status: status ?? 'time_limit',
    endDistance: status === 'completed' ? end : distanceAt(road, s[at.STATION]),
    endTime: run.time(),
    bins: record.finish(),
    ledger: ledgerOf(machine, plan.vehicle),
    checkpoints,
    shifts: run.shifts,
    bites: bites.finish(),
    ...(run.holdEvents.length > 0 || asksOfHold(plan) ? { holdEvents: run.holdEvents } : {}),
  };
}

function checkpoint(distance: number, time: number, s: Float64Array): Checkpoint {
  return { distance, station: s[at.STATION], time, state: s.slice() };
}

/** Edges at whole multiples of the width and at the end [m]; a last bin narrower than a millionth joins the one before. */
function binEdges(end: number, width: number): Float64Array {
  const bins = Math.max(1, Math.ceil(end / width - 1e-6));
  const edge = new Float64Array(bins + 1);
  for (let i = 0; i < bins; i++) edge[i] = i * width;
  edge[bins] = end;
  return edge;
}

function stationIn(road: LoopPlan['road'], cell: number, distance: number): number {
  const width = road.distance[cell + 1] - road.distance[cell];
  const share = width > 0 ? (distance - road.distance[cell]) / width : 1;
  return road.station[cell] + share * (road.station[cell + 1] - road.station[cell]);
}
