import { atSeaLevel } from '../case/candidates-of.ts';
import type { CaseDocument } from '../case/read-case-file.ts';
import { linearController } from '../control/linear-controller.ts';
import { type LoopStability, loopStability } from '../control/loop-stability.ts';
import type { Candidate } from '../control/setup.ts';
import type { HoldPlan } from '../loop/plan.ts';
import type { LoopResult } from '../loop/result.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';

/** The linear loop of a candidate at the set speeds on the level, in the gears that its run was driven in; null: it has none. */
export function loopOfRun(
  document: CaseDocument,
  vehicle: Vehicle,
  hold: HoldPlan,
  { controller }: Candidate,
  { bins }: LoopResult,
): LoopStability | null {
  const linear = linearController(controller);
  if ('none' in linear) return null;
  const gears = [...new Set(bins.gear.subarray(0, bins.size))];
  return loopStability(vehicle, linear, trueSetSpeeds(hold, vehicle), atSeaLevel(document), gears);
}

/** The true speeds that the set speeds of a run stand for [m/s]. */
function trueSetSpeeds(hold: HoldPlan, { sensor }: Vehicle): readonly number[] {
  const shown = hold.setSpeedIs === 'indicated' ? 1 + sensor.scaleError : 1;
  return [hold.setSpeed, ...hold.changes.map(({ setSpeed }) => setSpeed)].map((speed) => speed / shown);
}
