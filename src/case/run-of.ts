import type { HoldPlan, RiderPlan } from '../loop/plan.ts';
import type { Requirement, Where } from '../study/findings.ts';
import { fromKm, fromKmh } from '../units/convert.ts';
import type { RequirementFile } from './case-schema.ts';
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
  };
}

/** The rider who stands by, and changes gear as planned. */
export function riderOf({ file: { rider, hold } }: CaseDocument): RiderPlan {
  return {
    brakesAbove: rider.brakes_above_kmh === undefined ? null : fromKmh(rider.brakes_above_kmh),
    shifts: hold.shifts.map(({ at_km, gear }) => ({ distance: fromKm(at_km), gear: gear - 1 })),
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

function whereOf(where: RequirementFile['where']): Where {
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
