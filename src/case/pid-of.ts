import type {
  AntiWindup,
  ControllerForm,
  FeedforwardSetup,
  GainSchedule,
  GradeSource,
  PidSetup,
} from '../control/setup.ts';
import { InputError } from '../problems/input-error.ts';
import { fromDeg, fromHz, fromKmh, fromPct, fromPctPerKmh } from '../units/convert.ts';
import type { CandidateFile } from './case-schema.ts';
import type { CandidateContext, GainsOfCandidate } from './gains-of.ts';
import { placeOf } from './yaml-source.ts';

type FamilyFile = Extract<CandidateFile, { kind: 'p' | 'pi' | 'pid' }>;
type WindupFile = Extract<CandidateFile, { kind: 'pi' }>['anti_windup'];

/** Anti-windup of a plain PI; null: what only the family has. */
export function plainAntiWindup(file: WindupFile): AntiWindup | null {
  if (file.kind === 'back_calculation') return { kind: file.kind, trackingTime: file.tracking_s };
  return file.kind === 'none' || file.kind === 'conditional' ? { kind: file.kind } : null;
}

/** A controller of the PID family in SI. */
export function pidOf(file: FamilyFile, gains: GainsOfCandidate, context: CandidateContext): PidSetup {
  const { feedforward, observer } = file;
  const modelled = feedforward !== undefined || observer !== undefined;
  return {
    kind: 'pid',
    kp: gains.kp,
    ki: gains.ki,
    ...derivativeOf(file, gains.kp),
    setpointWeight: file.kind === 'p' ? 1 : file.setpoint_weight,
    sample: file.sample_s,
    computingDelay: file.computing_delay_s,
    integration: file.kind === 'p' ? 'forward' : file.integration,
    form: file.kind === 'p' ? { kind: 'positional', antiWindup: { kind: 'none' } } : formOf(file.anti_windup),
    deadBand:
      file.dead_band === undefined
        ? null
        : {
            halfWidth: fromKmh(file.dead_band.half_width_kmh),
            integratesInside: file.dead_band.inside === 'runs_on',
          },
    rateLimit: file.rate_limit_pct_per_s === undefined ? null : fromPct(file.rate_limit_pct_per_s),
    schedule: file.schedule === undefined ? null : scheduleOf(file.schedule, context),
    model: modelled
      ? { mass: file.model_mass_kg ?? context.vehicle.mass, surroundings: context.surroundings }
      : null,
    feedforward: feedforward === undefined ? null : feedforwardOf(feedforward),
    observerFilter: observer === undefined ? null : 1 / fromHz(observer.filter_hz),
    ramp: file.setpoint_ramp_m_s2 ?? null,
    design: gains.record,
  };
}

/** Anti-windup by its kind in the file. */
export function integralRuleOf<F extends Exclude<WindupFile, { kind: 'back_calculation' | 'velocity_form' }>>(
  file: F,
) {
  if (file.kind !== 'integral_cap') return { kind: file.kind };
  const { against } = file;
  // Against the sum of the error the figure is taken for one of km/h s.
  return {
    kind: 'cap',
    cap: against === 'throttle' ? fromPct(file.cap_pct) : fromKmh(file.cap_pct),
    of: against,
  } as const;
}

function formOf(file: WindupFile): ControllerForm {
  if (file.kind === 'velocity_form') return { kind: 'velocity' };
  const antiWindup =
    file.kind === 'back_calculation'
      ? ({ kind: file.kind, trackingTime: file.tracking_s } as const)
      : integralRuleOf(file);
  return { kind: 'positional', antiWindup };
}

/** Without a filter of its own the derivative has a tenth of its time. */
function derivativeOf(file: FamilyFile, kp: number): Pick<PidSetup, 'kd' | 'derivativeFilter'> {
  if (file.kind !== 'pid') return { kd: 0, derivativeFilter: 0 };
  if ('kd_pct_s_per_kmh' in file)
    return { kd: fromPctPerKmh(file.kd_pct_s_per_kmh), derivativeFilter: file.derivative_filter_s };
  return { kd: kp * file.td_s, derivativeFilter: file.derivative_filter_s ?? file.td_s / 10 };
}

function feedforwardOf(file: NonNullable<FamilyFile['feedforward']>): FeedforwardSetup {
  if (file.of === 'drag') return { drag: true, grade: null };
  const { grade_from: from } = file;
  const grade: GradeSource =
    from.kind === 'known_road'
      ? { kind: 'known_road', preview: from.preview_s }
      : {
          kind: 'accelerometer',
          filter: 1 / fromHz(from.filter_hz),
          pitchError: fromDeg(from.pitch_error_deg),
        };
  return { drag: file.of === 'drag_and_grade', grade };
}

function scheduleOf(
  file: NonNullable<FamilyFile['schedule']>,
  { document, vehicle, index }: CandidateContext,
): GainSchedule {
  const gears = vehicle.drive.gears.length;
  file.rows.forEach(({ gear }, row) => {
    if (gear === undefined || gear <= gears) return;
    throw new InputError({
      code: 'out-of-range',
      place: placeOf(document.source, ['candidates', index, 'schedule', 'rows', row, 'gear']),
      message: 'is no gear of the vehicle',
      found: `gear ${gear}`,
      allowed: gears === 1 ? '1, or no gear' : `1 to ${gears}`,
    });
  });
  return {
    speed: Float64Array.from(file.at_kmh, fromKmh),
    rows: file.rows.map(({ gear, factor, ki_factor }) => ({
      gear: gear === undefined ? null : gear - 1,
      proportional: Float64Array.from(factor),
      integral: Float64Array.from(ki_factor ?? factor),
    })),
  };
}
