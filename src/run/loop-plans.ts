import type { Candidate } from '../control/setup.ts';
import type { SupervisorSetup } from '../control/supervisor-setup.ts';
import type { HoldPlan, LoopPlan, RiderPlan, SensorFault } from '../loop/plan.ts';
import type { Road } from '../road/road.ts';
import type { Requirement } from '../study/findings.ts';
import { fromKmh } from '../units/convert.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';

/** Band of the figures where no requirement names one [m/s]. */
const USUAL_BAND = fromKmh(2);
/** Sample time of a locked throttle, which needs none: as fine as a usual speed loop [s]. */
const LOCKED_SAMPLE = 0.02;
/** A run may take this many times the time at the lowest set speed, and this much more [s], before it is cut off. */
const PATIENCE = 8;
const GRACE = 600;

/** Band of the first requirement that has one, else 2 km/h [m/s]. */
export function bandOf(requirements: readonly Requirement[]): number {
  return requirements.find(({ band }) => band !== null)?.band ?? USUAL_BAND;
}

/** Every band that a figure or a requirement counts in, the figures' own first [m/s]. */
export function bandsOf(requirements: readonly Requirement[]): readonly number[] {
  const asked = requirements.flatMap(({ band }) => (band === null ? [] : [band]));
  return [...new Set([bandOf(requirements), ...asked])];
}

export interface Setting {
  readonly road: Road;
  readonly vehicle: Vehicle;
  readonly hold: HoldPlan;
  readonly rider: RiderPlan;
  readonly supervisor?: SupervisorSetup;
  readonly faults?: readonly SensorFault[];
  readonly scheme: 'exact' | 'fast';
  readonly bands: readonly number[];
  /** Width of the record's bins [m]. */
  readonly bin: number;
}

/** The plan of each candidate over one road: everything alike but the controller. */
export function loopPlans(setting: Setting, candidates: readonly Candidate[]): readonly LoopPlan[] {
  const timeLimit = longestTime(setting.road, setting.hold);
  return candidates.map(({ controller }) => ({
    ...setting,
    controller,
    timeLimit,
    lockedSample: LOCKED_SAMPLE,
  }));
}

function longestTime(road: Road, hold: HoldPlan): number {
  if (road.along === 'time') return (road.station[road.size - 1] ?? 0) + GRACE;
  const slowest = hold.changes.reduce((least, { setSpeed }) => Math.min(least, setSpeed), hold.setSpeed);
  return (PATIENCE * (road.station[road.size - 1] ?? 0)) / slowest + GRACE;
}
