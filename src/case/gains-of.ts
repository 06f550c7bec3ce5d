import { designDroop } from '../control/design-droop.ts';
import { designRejection } from '../control/design-rejection.ts';
import { designSettling } from '../control/design-settling.ts';
import { designSimc } from '../control/design-simc.ts';
import type { DesignRecord } from '../control/setup.ts';
import { InputError, type Problem } from '../problems/input-error.ts';
import { fromKmh, fromPct, fromPctPerKmh } from '../units/convert.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { CandidateFile } from './case-schema.ts';
import type { CaseDocument } from './read-case-file.ts';
import { placeOf } from './yaml-source.ts';

type PiFile = Extract<CandidateFile, { kind: 'pi' | 'pid' | 'integer' }>;
type DesignedFile = Extract<PiFile, { design: unknown }>;

/** Gains of a PI candidate [1/(m/s)], [1/(m/s)/s], and the design they come from; null: typed. */
export interface GainsOfCandidate {
  readonly kp: number;
  readonly ki: number;
  readonly record: DesignRecord | null;
}

/** What a candidate of the case is worked out with. */
export interface CandidateContext {
  readonly document: CaseDocument;
  readonly vehicle: Vehicle;
  /** Of the operating point of a design. */
  readonly surroundings: Surroundings;
  /** Of the candidate in the file's list. */
  readonly index: number;
}

/**
 * The gains as typed, or as worked out from what was asked.
 *
 * @throws InputError at the candidate's `design`, where it cannot be met
 */
export function gainsOf(file: PiFile, context: CandidateContext): GainsOfCandidate {
  if ('design' in file) return placed(context, () => designed(file, context));
  const kp = fromPctPerKmh(file.kp_pct_per_kmh);
  const ki = 'ti_s' in file ? kp / file.ti_s : fromPctPerKmh(file.ki_pct_per_kmh_s);
  return { kp, ki, record: null };
}

function designed(
  file: DesignedFile,
  { document, vehicle, surroundings }: CandidateContext,
): GainsOfCandidate {
  const { design } = file;
  const point = {
    vehicle,
    surroundings,
    at: design.at_kmh === undefined ? trueSetSpeed(document, vehicle) : fromKmh(design.at_kmh),
    sample: file.sample_s,
    computingDelay: file.computing_delay_s,
    integration: file.integration,
    setpointWeight: file.setpoint_weight,
  };
  if ('droop_kmh' in design)
    return designDroop({
      ...point,
      droop: fromKmh(design.droop_kmh),
      gradeStep: fromPct(design.grade_step_pct),
      damping: design.damping,
    });
  if ('closed_loop_s' in design)
    return designSimc({ ...point, closedLoop: design.closed_loop_s, rule: design.rule });
  if ('max_sensitivity' in design) return designRejection({ ...point, sensitivity: design.max_sensitivity });
  return designSettling({ ...point, settling: design.settling_s, overshoot: fromPct(design.overshoot_pct) });
}

/** The true speed that the set speed stands for [m/s]: a sensor that shows too much makes the vehicle slower. */
function trueSetSpeed({ file: { hold } }: CaseDocument, { sensor }: Vehicle): number {
  const setSpeed = fromKmh(hold.set_speed_kmh);
  return hold.set_speed_is === 'indicated' ? setSpeed / (1 + sensor.scaleError) : setSpeed;
}

/** Brings what a design refuses to its place in the file. */
function placed<T>({ document, index }: CandidateContext, work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    const place = placeOf(document.source, ['candidates', index, 'design']);
    const [first, ...others] = error.problems.map((problem): Problem => ({ ...problem, place }));
    throw first === undefined ? error : new InputError(first, ...others);
  }
}
