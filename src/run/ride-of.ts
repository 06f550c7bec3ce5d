import type { CaseDocument } from '../case/read-case-file.ts';
import { bendRidingOf, holdOf, riderOf } from '../case/run-of.ts';
import { faultsOf, supervisorOf } from '../case/unit-of.ts';
import { placeOf } from '../case/yaml-source.ts';
import type { SupervisorSetup } from '../control/supervisor-setup.ts';
import type { HoldPlan, RiderPlan, SensorFault } from '../loop/plan.ts';
import { InputError } from '../problems/input-error.ts';
import type { Road } from '../road/road.ts';
import { type BendPlan, planBends } from '../study/bend-plan.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';

/** What is held, by which rules, and what rider and sensor do on the way. */
export interface Ride {
  readonly hold: HoldPlan;
  /** Acts for bends among the written ones. */
  readonly rider: RiderPlan;
  /** Left out where nothing is asked of the unit. */
  readonly supervisor?: SupervisorSetup;
  /** Left out where there are none. */
  readonly faults?: readonly SensorFault[];
  /** Null where the case does not ask for bends. */
  readonly bends: BendPlan | null;
}

/**
 * The ride of a case over its road.
 *
 * @throws InputError `bends-need-track` where bends are asked for on a road whose bends are not known
 */
export function rideOf(document: CaseDocument, vehicle: Vehicle, road: Road): Ride {
  const hold = holdOf(document);
  const written = riderOf(document);
  const supervisor = supervisorOf(document);
  const faults = faultsOf(document);
  const unit = {
    ...(supervisor === undefined ? {} : { supervisor }),
    ...(faults.length === 0 ? {} : { faults }),
  };
  const riding = bendRidingOf(document);
  if (riding === null) return { hold, rider: written, ...unit, bends: null };
  refuseWithoutBends(document, road);
  const { plan, acts } = planBends(
    { road, vehicle, hold, rider: written, ...(supervisor === undefined ? {} : { unit: supervisor }) },
    riding,
  );
  return { hold, rider: acts.length === 0 ? written : { ...written, acts }, ...unit, bends: plan };
}

function refuseWithoutBends({ source }: CaseDocument, road: Road): void {
  if (road.curvature !== null && road.points !== null) return;
  throw new InputError({
    code: 'bends-need-track',
    place: placeOf(source, ['rider', 'bends']),
    message: 'the bends of this road are not known',
    found: road.points === null ? 'a written profile' : 'a track without positions or heading',
    allowed: 'a track with latitude and longitude, or with heading_deg',
  });
}
