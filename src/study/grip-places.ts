import type { LoopPlan } from '../loop/plan.ts';
import type { LoopResult } from '../loop/result.ts';
import { cellOf } from '../numeric/interpolate.ts';
import { valueAt } from '../road/lookup.ts';
import { type GripForce, gripForce } from '../vehicle/traction.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { Demand, Replayed, Stretch } from './findings.ts';

/** Gaps shorter than this are bridged [s at the set speed]. */
const BRIDGED = 5;

/** A stretch in which the drive reached what the contact of the driven wheel can carry. */
export interface GripPlace extends Stretch {
  /** The wheel would spin; the front wheel would leave the road; the wheel would slide, held back too hard. */
  readonly kind: 'spin' | 'lift' | 'slide';
  /** Wheel force where it went furthest beyond, and the limit there [N]; both negative for `slide`. */
  readonly force: number;
  readonly limit: number;
  /** Where that is, to a bin of the record [m]. */
  readonly at: number;
  /** The set speed itself asks for as much there; else the design or the rider's throttle went there. */
  readonly asked: boolean;
}

/**
 * Where a run reached the grip of its driven wheel. The loop has no slip: it goes on as if the wheel held, so that what
 * it says of such a place is not what the vehicle would do.
 *
 * @param replayed a candidate after its run
 * @param demand of the same road and vehicle
 * @returns in order along the way, gaps of up to 5 s bridged; empty where the grip is not known or never reached
 */
export function gripPlaces(
  {
    plan,
    result,
  }: { readonly plan: Pick<LoopPlan, 'road' | 'vehicle'>; readonly result: Pick<LoopResult, 'bins'> },
  demand: Demand,
): GripPlace[] {
  const { road, vehicle } = plan;
  const { bins } = result;
  const places: GripPlace[] = [];
  for (let i = 0; i < bins.size; i++) {
    const at = (bins.edge[i] + bins.edge[i + 1]) / 2;
    const beyond = beyondGrip(
      gripForce(vehicle, valueAt(road, 'grade', at)),
      bins.driveForceMin[i],
      bins.driveForceMax[i],
    );
    if (beyond === null) continue;
    const knot = cellOf(road.distance, at);
    const required = demand.required[knot];
    const asked = beyond.kind === 'slide' ? required <= beyond.limit : required >= beyond.limit;
    const place = { ...beyond, at, asked, from: bins.edge[i], to: bins.edge[i + 1] };
    const last = places.at(-1);
    if (last?.kind === place.kind && place.from <= last.to + BRIDGED * demand.setSpeed[knot])
      places[places.length - 1] = joined(last, place);
    else places.push(place);
  }
  return places;
}

/** One a bin of the record: 1 where the drive reached the grip at least once. All 0 where the grip is not known. */
export function gripBins({ plan: { road, vehicle }, result: { bins } }: Replayed): Uint8Array {
  const marks = new Uint8Array(bins.size);
  if (vehicle.traction === null) return marks;
  for (let i = 0; i < bins.size; i++) {
    const grade = valueAt(road, 'grade', (bins.edge[i] + bins.edge[i + 1]) / 2);
    const beyond = beyondGrip(gripForce(vehicle, grade), bins.driveForceMin[i], bins.driveForceMax[i]);
    marks[i] = beyond === null ? 0 : 1;
  }
  return marks;
}

/** Greatest force that the driven wheel passes on with the front wheel on the road [N]; infinite where the grip is not known. */
export function greatestGrip(vehicle: Vehicle, grade: number): number {
  const grip = gripForce(vehicle, grade);
  return grip === null ? Number.POSITIVE_INFINITY : Math.min(grip.greatest, grip.lift);
}

/** Which limit a range of forces reaches, and which force does. */
export function beyondGrip(
  grip: GripForce | null,
  least: number,
  greatest: number,
): Pick<GripPlace, 'kind' | 'force' | 'limit'> | null {
  if (grip === null) return null;
  if (greatest >= Math.min(grip.greatest, grip.lift))
    return grip.lift < grip.greatest
      ? { kind: 'lift', force: greatest, limit: grip.lift }
      : { kind: 'spin', force: greatest, limit: grip.greatest };
  return least <= grip.least ? { kind: 'slide', force: least, limit: grip.least } : null;
}

function joined(a: GripPlace, b: GripPlace): GripPlace {
  const worse = Math.abs(b.force) - Math.abs(b.limit) > Math.abs(a.force) - Math.abs(a.limit) ? b : a;
  return { ...worse, from: a.from, to: b.to, asked: a.asked || b.asked };
}
