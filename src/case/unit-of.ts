import * as z from 'zod';
import type { SupervisorSetup } from '../control/supervisor-setup.ts';
import type { SensorFault } from '../loop/plan.ts';
import { fromKmh } from '../units/convert.ts';
import type { CaseFile } from './case-schema.ts';
import { type DefaultUsed, listDefaults } from './list-defaults.ts';
import type { CaseDocument } from './read-case-file.ts';
import { routePlace } from './run-of.ts';
import { supervisorSchema } from './supervisor-schema.ts';

/** Something in the case asks the unit for more than to hold from the start to the end. */
function asksUnit({ hold, rider, faults }: CaseFile): boolean {
  return hold.starts !== 'engaged' || rider.does.length > 0 || rider.bends !== undefined || faults.length > 0;
}

/**
 * The rules of the speed-hold unit, in SI; undefined where nothing in the case asks anything of the unit. A case that
 * asks for something and writes no rules has none, and the usual ramps and taps.
 */
export function supervisorOf({ file }: CaseDocument): SupervisorSetup | undefined {
  if (file.supervisor === undefined && !asksUnit(file)) return undefined;
  const supervisor = file.supervisor ?? supervisorSchema.parse({});
  const { lowest_speed_kmh, too_slow, too_fast, believable_m_s2, override } = supervisor;
  return {
    lowestSpeed: lowest_speed_kmh === undefined ? 0 : fromKmh(lowest_speed_kmh),
    tooSlow: too_slow === undefined ? null : { by: fromKmh(too_slow.below_set_kmh), for: too_slow.for_s },
    tooFast: too_fast === undefined ? null : { by: fromKmh(too_fast.above_set_kmh), for: too_fast.for_s },
    believable: believable_m_s2 ?? null,
    resumeRamp: supervisor.resume_ramp_m_s2,
    tap: fromKmh(supervisor.tap_kmh),
    tapRamp: supervisor.tap_ramp_m_s2 ?? null,
    override: { integral: override.integral, reentry: fromKmh(override.reentry_kmh) },
  };
}

/** What the speed sensor does wrong on the way. */
export function faultsOf({ file }: CaseDocument): readonly SensorFault[] {
  return file.faults.map((fault) => ({
    at: routePlace(fault),
    shows: fault.speed_sensor,
    for: fault.for_s,
  }));
}

/** Defaults of a unit that is asked for something and has no rules written. */
export function unitDefaults({ file }: CaseDocument): readonly DefaultUsed[] {
  if (file.supervisor !== undefined || !asksUnit(file)) return [];
  return listDefaults(z.strictObject({ supervisor: supervisorSchema }), { supervisor: {} }, 'case');
}
