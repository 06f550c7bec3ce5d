import type { HoldPlan, RiderAct, RiderDeed, RiderPlan, RoutePlace } from '../loop/plan.ts';
import type { BendRiding } from '../study/bend-plan.ts';
import type { Requirement, Where } from '../study/findings.ts';
import { fromKm, fromKmh, fromPct } from '../units/convert.ts';
import type { ActFile, RequirementFile } from './case-schema.ts';
import type { CaseDocument } from './read-case-file.ts';

/** The speed to hold, in SI. */
export function holdOf({ file: { hold } }: CaseDocument): HoldPlan {
  return {
    setSpeed: fromKmh(hold.set_speed_kmh),
    setSpeedIs: hold.set_speed_is,
    startSpeed: fromKmh(hold.start_speed_kmh ?? hold.set_speed_kmh),
    changes: hold.changes.map((change) => ({
      at: 'at_km' in change ? { distance: fromKm(change.at_km) } : { time: change.at_s },
      setSpeed: fromKmh(change.set_speed_kmh),
      ramp: change.ramp_m_s2 ?? null,
    })),
    ...(hold.starts === 'engaged' ? {} : { starts: hold.starts }),
  };
}

/** The rider who stands by, changes gear as planned, and does what is written; what bends ask for is not in it. */
export function riderOf({ file: { rider, hold } }: CaseDocument): RiderPlan {
  const acts = rider.does.map(
    (one): RiderAct => ({ at: routePlace(one), does: deedOf(one), reason: 'written' }),
  );
  return {
    brakesAbove: rider.brakes_above_kmh === undefined ? null : fromKmh(rider.brakes_above_kmh),
    shifts: hold.shifts.map(({ at_km, gear }) => ({ distance: fromKm(at_km), gear: gear - 1 })),
    ...(acts.length === 0 ? {} : { acts }),
    ...(rider.resumes_after_s === undefined ? {} : { resumesAfter: rider.resumes_after_s }),
  };
}

/** A place along the way as a file writes it. */
export const routePlace = (item: { readonly at_km: number } | { readonly at_s: number }): RoutePlace =>
  'at_km' in item ? { distance: fromKm(item.at_km) } : { time: item.at_s };

function deedOf(one: ActFile): RiderDeed {
  switch (one.act) {
    case 'engage':
    case 'resume':
      return { kind: one.act };
    case 'tap':
      return { kind: 'tap', taps: one.taps };
    case 'override':
      return { kind: 'override', throttle: fromPct(one.throttle_pct), for: one.for_s };
    case 'cancel':
      // biome-ignore lint/suspicious/noThenProperty: what the rider does then, never a promise
      return { kind: 'cancel', then: one.then };
    case 'brake':
      return { kind: 'brake', to: fromKmh(one.to_kmh), deceleration: one.brake_m_s2 };
    case 'ride':
      return { kind: 'ride', to: fromKmh(one.to_kmh), acceleration: one.gains_m_s2 };
    case 'clutch':
      return { kind: 'clutch', for: one.for_s };
  }
}

/** How the rider rides bends, in SI; null: the case does not ask for them. */
export function bendRidingOf({ file: { rider } }: CaseDocument): BendRiding | null {
  if (rider.bends === undefined) return null;
  const { max_lateral_m_s2, brake_m_s2, resumes_after_s, shortest_hold_s } = rider.bends;
  return {
    maxLateral: max_lateral_m_s2,
    deceleration: brake_m_s2,
    resumesAfter: resumes_after_s,
    shortestHold: shortest_hold_s,
  };
}

/** Limits stay in the unit of the figure, which its name ends in; bands become m/s. */
export function requirementsOf({ file }: CaseDocument): Requirement[] {
  return file.requirements.map((given) => ({
    id: given.id,
    figure: given.figure,
    band: given.band_kmh === undefined ? null : fromKmh(given.band_kmh),
    atLeast: 'at_least' in given ? given.at_least : null,
    atMost: 'at_most' in given ? given.at_most : null,
    where: whereOf(given.where),
    candidates: given.candidates ?? null,
  }));
}

/** Stretches become m. */
export function whereOf(where: RequirementFile['where']): Where {
  return typeof where === 'string' ? where : { from: fromKm(where.from_km), to: fromKm(where.to_km) };
}

/** How the road is cut for the table. */
export type Segmenting = { readonly by: 'length'; readonly length: number } | { readonly by: 'terrain' };

export function segmentsOf({ file: { segments } }: CaseDocument): Segmenting {
  return segments.by === 'length' ? { by: 'length', length: segments.length_m } : { by: 'terrain' };
}

/** What is written: the series, and the width of the distance bins [m]. */
export interface Output {
  readonly series: 'bins' | 'full';
  readonly bin: number;
}

export function outputOf({ file: { output } }: CaseDocument): Output {
  return { series: output.series, bin: output.bin_m };
}

/** How the plant is stepped. */
export const schemeOf = ({ file }: CaseDocument): 'exact' | 'fast' => file.scheme;

/** The title as written; null: none. */
export const titleOf = ({ file }: CaseDocument): string | null => file.title ?? null;
