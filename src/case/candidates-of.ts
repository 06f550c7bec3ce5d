import type { Candidate, ControllerSetup } from '../control/setup.ts';
import { InputError, type Problem } from '../problems/input-error.ts';
import { airAlong } from '../road/air.ts';
import { fromPct, fromPctPerKmh } from '../units/convert.ts';
import { type Surroundings, stillAndLevel } from '../vehicle/surroundings.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { CandidateFile } from './case-schema.ts';
import { onlyCoasts } from './drive-of.ts';
import { type CandidateContext, gainsOf } from './gains-of.ts';
import { integerOf } from './integer-of.ts';
import { pidOf, plainAntiWindup } from './pid-of.ts';
import { FAMILY_KEYS } from './pid-schema.ts';
import type { CaseDocument } from './read-case-file.ts';
import { roadOptionsOf } from './road-of.ts';
import { placeOf } from './yaml-source.ts';

type FileOf<K extends CandidateFile['kind']> = Extract<CandidateFile, { kind: K }>;

/** A kind of controller without a line here does not compile. */
const setupOf: {
  readonly [K in CandidateFile['kind']]: (file: FileOf<K>, context: CandidateContext) => ControllerSetup;
} = {
  locked: (file, context) => ({ kind: 'locked', throttle: lockedThrottle(file, context) }),
  p: (file, context) => {
    needsDrive(context);
    return pidOf(file, { kp: fromPctPerKmh(file.kp_pct_per_kmh), ki: 0, record: null }, context);
  },
  pi: (file, context) => {
    needsDrive(context);
    const gains = gainsOf(file, context);
    const antiWindup = plainAntiWindup(file.anti_windup);
    if (antiWindup === null || FAMILY_KEYS.some((key) => file[key] !== undefined))
      return pidOf(file, gains, context);
    return {
      kind: 'pi',
      kp: gains.kp,
      ki: gains.ki,
      setpointWeight: file.setpoint_weight,
      sample: file.sample_s,
      computingDelay: file.computing_delay_s,
      integration: file.integration,
      antiWindup,
      ramp: file.setpoint_ramp_m_s2 ?? null,
      design: gains.record,
    };
  },
  pid: (file, context) => {
    needsDrive(context);
    return pidOf(file, gainsOf(file, context), context);
  },
  integer: (file, context) => {
    needsDrive(context);
    return integerOf(file, gainsOf(file, context), context);
  },
};

function controllerOf(file: CandidateFile, context: CandidateContext): ControllerSetup {
  switch (file.kind) {
    case 'locked':
      return setupOf.locked(file, context);
    case 'p':
      return setupOf.p(file, context);
    case 'pi':
      return setupOf.pi(file, context);
    case 'pid':
      return setupOf.pid(file, context);
    case 'integer':
      return setupOf.integer(file, context);
  }
}

/**
 * One candidate in SI, its design worked out to gains.
 *
 * @throws InputError as `candidatesOf`
 */
export const candidateOf = (file: CandidateFile, context: CandidateContext): Candidate => ({
  name: file.name ?? file.kind,
  controller: controllerOf(file, context),
});

/**
 * The candidates in SI, designs worked out to gains.
 *
 * @param vehicle that they drive, as loaded
 * @param surroundings of the operating points of designs; by default level, still, the air of the case at sea level
 * @param one what works out one of them
 * @throws InputError with a problem for every candidate whose design cannot be met, whose throttle lies outside the
 *   drive's range, or that needs a drive where there is none
 */
export function candidatesOf(
  document: CaseDocument,
  vehicle: Vehicle,
  surroundings: Surroundings = atSeaLevel(document),
  one: typeof candidateOf = candidateOf,
): Candidate[] {
  const problems: Problem[] = [];
  const candidates = document.file.candidates.flatMap((file, index): Candidate[] => {
    const context = { document, vehicle, surroundings, index };
    try {
      return [one(file, context)];
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
