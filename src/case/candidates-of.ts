import type { AntiWindup, Candidate, ControllerSetup } from '../control/setup.ts';
import { InputError, type Problem } from '../problems/input-error.ts';
import { airAlong } from '../road/air.ts';
import { fromPct } from '../units/convert.ts';
import { type Surroundings, stillAndLevel } from '../vehicle/surroundings.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { CandidateFile } from './case-schema.ts';
import { onlyCoasts } from './drive-of.ts';
import { type CandidateContext, gainsOf } from './gains-of.ts';
import type { CaseDocument } from './read-case-file.ts';
import { roadOptionsOf } from './road-of.ts';
import { placeOf } from './yaml-source.ts';

type FileOf<K extends ControllerSetup['kind']> = Extract<CandidateFile, { kind: K }>;

/** A kind of controller without a line here does not compile. */
const setupOf: {
  readonly [K in ControllerSetup['kind']]: (file: FileOf<K>, context: CandidateContext) => ControllerSetup;
} = {
  locked: (file, context) => ({ kind: 'locked', throttle: lockedThrottle(file, context) }),
  pi: (file, context) => {
    needsDrive(context);
    const { kp, ki, record } = gainsOf(file, context);
    return {
      kind: 'pi',
      kp,
      ki,
      setpointWeight: file.setpoint_weight,
      sample: file.sample_s,
      computingDelay: file.computing_delay_s,
      integration: file.integration,
      antiWindup: antiWindupOf(file.anti_windup),
      ramp: file.setpoint_ramp_m_s2 ?? null,
      design: record,
    };
  },
};

/**
 * The candidates in SI, designs worked out to gains.
 *
 * @param vehicle that they drive, as loaded
 * @param surroundings of the operating points of designs; by default level, still, the air of the case at sea level
 * @throws InputError with a problem for every candidate whose design cannot be met, whose throttle lies outside the
 *   drive's range, or that needs a drive where there is none
 */
export function candidatesOf(
  document: CaseDocument,
  vehicle: Vehicle,
  surroundings: Surroundings = atSeaLevel(document),
): Candidate[] {
  const problems: Problem[] = [];
  const candidates = document.file.candidates.flatMap((file, index): Candidate[] => {
    const context = { document, vehicle, surroundings, index };
    try {
      const controller = file.kind === 'locked' ? setupOf.locked(file, context) : setupOf.pi(file, context);
      return [{ name: file.name ?? file.kind, controller }];
    } catch (error) {
      if (!(error instanceof InputError)) throw error;
      problems.push(...error.problems);
      return [];
    }
  });
  const [first, ...others] = problems;
  if (first !== undefined) throw new InputError(first, ...others);
  return candidates;
}

/** Level, still, the air of the case at sea level. */
export function atSeaLevel(document: CaseDocument): Surroundings {
  const { density, temperature } = airAlong(Float64Array.of(0), roadOptionsOf(document).air);
  return stillAndLevel(density[0]!, temperature[0]!);
}

function lockedThrottle(file: FileOf<'locked'>, context: CandidateContext): number | 'level' {
  if (!('throttle_pct' in file)) {
    needsDrive(context);
    return file.throttle;
  }
  const throttle = fromPct(file.throttle_pct);
  const { throttleMin } = context.vehicle.drive;
  if (throttle < throttleMin)
    throw new InputError({
      code: 'out-of-range',
      place: placeOf(context.document.source, ['candidates', context.index, 'throttle_pct']),
      message: 'is below what the drive can do: it does not regenerate',
      found: `${file.throttle_pct} %`,
      allowed: `from ${throttleMin * 100} to 100 %`,
    });
  return throttle;
}

function needsDrive({ document, vehicle, index }: CandidateContext): void {
  if (!onlyCoasts(vehicle)) return;
  throw new InputError({
    code: 'no-drive',
    place: placeOf(document.source, ['candidates', index]),
    message: 'the vehicle has no drive: it can only coast',
    allowed: 'a locked throttle with throttle_pct, or a drive in the vehicle',
  });
}

function antiWindupOf(file: FileOf<'pi'>['anti_windup']): AntiWindup {
  return file.kind === 'back_calculation'
    ? { kind: 'back_calculation', trackingTime: file.tracking_s }
    : { kind: file.kind };
}
