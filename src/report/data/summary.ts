import { integerGains } from '../../control/integer-gains.ts';
import { linearController } from '../../control/linear-controller.ts';
import type { ShiftEvent } from '../../loop/result.ts';
import type { CandidateResult, RunResult } from '../../run/run-result.ts';
import { type Figure, isNone, type RequirementFinding } from '../../study/findings.ts';
import { toDeg, toKm, toKmh, toLitre, toPct, toWh } from '../../units/convert.ts';
import type { Vehicle } from '../../vehicle/vehicle.ts';
import { type EnergyUse, energyUse } from '../model/energy-use.ts';
import { asksOfHold } from '../model/hold-away.ts';
import { bendsJson } from './bend-table.ts';
import { cycleRows } from './cycle-table.ts';
import { decimalsOf } from './decimals-of.ts';
import { rounded } from './fixed.ts';
import { hillRows } from './hill-table.ts';
import { holdEventRows } from './hold-event-table.ts';
import { type Json, numbers, warningJson } from './json-parts.ts';
import { jsonText } from './json-text.ts';
import { worstPoints } from './margin-table.ts';
import { matrixJson } from './matrix-table.ts';
import { rideJson } from './ride-summary.ts';
import { routeSummary } from './route-summary.ts';

/**
 * summary.json: what a run found, for programs. Files read are named with their SHA-256; no clock and no absolute
 * path is in it, so that the same inputs give the same bytes. A figure that does not exist is null, with its
 * reason under `<key>_reason`.
 *
 * @param files names of the other files written beside it: what a later run into the same folder may delete
 * @throws NotFiniteError for a number that is not finite
 */
export function summaryJson(run: RunResult, files: readonly string[]): string {
  return jsonText(summaryOf(run, files));
}

function summaryOf(run: RunResult, files: readonly string[]): Json {
  const worst = worstPoints(run.loops);
  return {
    schema_version: run.schemaVersion,
    tool: { name: 'ridgehold', version: run.toolVersion },
    status: run.status,
    title: run.title,
    case: run.caseName,
    inputs: run.inputs.map(({ name, sha256, bytes }) => ({ name, sha256, bytes })),
    overrides: run.overrides,
    scheme: run.scheme,
    route: routeSummary(run.road, run.demand),
    vehicle: { name: run.vehicle.name, ...numbers({ mass_kg: run.vehicle.mass }) },
    hold: numbers({ set_speed_kmh: toKmh(run.hold.setSpeed), band_kmh: toKmh(run.band) }),
    candidates: run.candidates.map((candidate) => ({
      ...candidateOf(candidate, run.vehicle),
      ...(worst.has(candidate.name) ? { worst_point: worst.get(candidate.name) ?? null } : {}),
    })),
    hills: hillRows(run.hills),
    cycles: cycleRows(run.cycles),
    requirements: run.requirements.map(requirementJson),
    ...(asksOfHold(run) ? { hold_events: holdEventRows(run) } : {}),
    ...(run.bends === null ? {} : { bends: bendsJson(run.bends) }),
    ...(run.loggedRides.length === 0 ? {} : { logged_rides: run.loggedRides.map(rideJson) }),
    ...(run.matrix === null ? {} : { matrix: matrixJson(run.matrix) }),
    spread: { roads: run.spread.roads, seed: run.spread.seed },
    defaults: run.defaults.map(({ key, value, of, source }) => ({ key, value, of, source })),
    warnings: run.warnings.map(warningJson),
    files,
    given: run.given.map(({ key, value, of }) => ({ key, value, of })),
  };
}

/** A number without a unit, to so many significant digits. */
function significant(value: number, digits: number, what: string): number {
  return rounded(value, 0, what) === value ? value : Number(value.toPrecision(digits));
}

function candidateOf(
  { name, controller, result, figures, loop }: CandidateResult,
  { drive }: Vehicle,
): Record<string, Json> {
  const { ledger } = result;
  return {
    name,
    kind: controller.kind,
    status: result.status,
    ...numbers({ end_m: result.endDistance }),
    ...numbers(figures),
    ledger_residual: significant(ledger.residual, 3, `${name}: ledger_residual`),
    energy: numbers({
      drive_wh: toWh(ledger.drive),
      regeneration_wh: toWh(ledger.regeneration),
      aero_wh: toWh(ledger.aero),
      rolling_wh: toWh(ledger.rolling),
      climb_wh: toWh(ledger.climb),
      brake_wh: toWh(ledger.brake),
      kinetic_wh: toWh(ledger.kinetic),
      ...(drive.gears.length > 1 ? { shifts_wh: toWh(ledger.shifts) } : {}),
      ...usedOf(energyUse(drive.source, result)),
    }),
    ...(result.shifts.length === 0
      ? {}
      : { shifts: result.shifts.map((shift) => shiftOf(shift, result.endTime)) }),
    gains: gainsOf(controller),
    ...marginsOf(loop, controller),
  };
}

function gainsOf(controller: CandidateResult['controller']): Json {
  if (controller.kind === 'locked') return null;
  const perKmh = (gain: number, name: string): number => significant(toPct(gain) / toKmh(1), 7, name);
  const gains = {
    kp_pct_per_kmh: perKmh(controller.kp, 'kp'),
    ki_pct_per_kmh_s: perKmh(controller.ki, 'ki'),
  };
  if (controller.kind === 'integer') {
    const counts = integerGains(controller);
    return { ...gains, kp_count: counts.kp, ki_count: counts.ki, sample_s: controller.sample };
  }
  return {
    ...gains,
    ...(controller.kind === 'pid' && controller.kd > 0
      ? {
          kd_pct_s_per_kmh: perKmh(controller.kd, 'kd'),
          derivative_filter_s: controller.derivativeFilter,
        }
      : {}),
    setpoint_weight: controller.setpointWeight,
    sample_s: controller.sample,
    design: controller.design === null ? null : controller.design.words,
  };
}

/** What was taken from tank or battery. */
function usedOf(use: EnergyUse | null): Record<string, Figure> {
  if (use === null) return {};
  if (use.volume !== null) return { fuel_l: toLitre(use.volume) };
  return {
    battery_wh: toWh(use.drawn),
    ...(use.chargeAtEnd === null ? {} : { charge_at_end_pct: toPct(use.chargeAtEnd) }),
  };
}

/** Gears from 1. */
const shiftOf = ({ time, distance, from, to, resumedAt }: ShiftEvent, endTime: number): Json => ({
  ...numbers({ at_km: toKm(distance), time_s: time }),
  from_gear: from + 1,
  to_gear: to + 1,
  ...(resumedAt === null
    ? {}
    : numbers({ hold_resumed_s: resumedAt < endTime ? resumedAt : { none: 'the run ended before' } })),
});

function marginsOf(
  loop: CandidateResult['loop'],
  controller: CandidateResult['controller'],
): Record<string, Json> {
  const linear = linearController(controller);
  const reason = 'none' in linear ? linear.none : 'no set speed that the drive holds on the level';
  const none = loop === null ? reason : null;
  const figure = (value: number | null | undefined): Figure =>
    value === null || value === undefined
      ? { none: none ?? 'the linear loop is unstable' }
      : Number.isFinite(value)
        ? value
        : { none: 'no crossover: nothing makes the linear loop oscillate' };
  const phase = loop?.phaseMargin;
  return numbers({
    gain_margin: figure(loop?.gainMargin),
    phase_margin_deg: figure(typeof phase === 'number' ? toDeg(phase) : phase),
  });
}

/** A finding as summary.json has it. */
export function requirementJson(finding: RequirementFinding): Json {
  const { requirement } = finding;
  const decimals = decimalsOf(requirement.figure);
  const figure = (name: string, value: Figure): Record<string, Json> =>
    isNone(value)
      ? { [name]: null, [`${name}_reason`]: value.none }
      : { [name]: rounded(value, decimals, `${requirement.id}: ${name}`) };
  return {
    id: requirement.id,
    figure: requirement.figure,
    candidate: finding.candidate,
    ...figure('measured', finding.measured),
    limit: requirement.atLeast ?? requirement.atMost,
    sense: requirement.atLeast === null ? 'at most' : 'at least',
    ...(requirement.band === null ? {} : numbers({ band_kmh: toKmh(requirement.band) })),
    where: whereWords(requirement.where),
    ...figure('margin', finding.margin),
    ...figure('spread', finding.spread),
    worst_at_km: finding.worstAt === null ? null : rounded(toKm(finding.worstAt), 4),
    ...(finding.afterHill === undefined ? {} : { worst_after_hill: finding.afterHill }),
    verdict: finding.verdict,
    words: finding.words,
  };
}

function whereWords(where: RequirementFinding['requirement']['where']): string {
  return typeof where === 'string' ? where : `km ${toKm(where.from)} to ${toKm(where.to)}`;
}
