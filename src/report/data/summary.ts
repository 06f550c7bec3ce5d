import type { Warning } from '../../problems/warning.ts';
import type { CandidateResult, RunResult } from '../../run/run-result.ts';
import { type Figure, isNone, type RequirementFinding } from '../../study/findings.ts';
import { toKm, toKmh, toPct, toWh } from '../../units/convert.ts';
import { decimalsOf } from './decimals-of.ts';
import { rounded } from './fixed.ts';
import { hillRows } from './hill-table.ts';
import { jsonText } from './json-text.ts';
import { climbOf } from './route.ts';

type Json = string | number | boolean | null | readonly Json[] | { readonly [key: string]: Json };

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
  return {
    schema_version: run.schemaVersion,
    tool: { name: 'ridgehold', version: run.toolVersion },
    status: run.status,
    title: run.title,
    case: run.caseName,
    inputs: run.inputs.map(({ name, sha256, bytes }) => ({ name, sha256, bytes })),
    overrides: run.overrides,
    scheme: run.scheme,
    route: routeOf(run),
    vehicle: { name: run.vehicle.name, ...numbers({ mass_kg: run.vehicle.mass }) },
    hold: numbers({ set_speed_kmh: toKmh(run.hold.setSpeed), band_kmh: toKmh(run.band) }),
    candidates: run.candidates.map(candidateOf),
    hills: hillRows(run.hills),
    requirements: run.requirements.map(requirementOf),
    defaults: run.defaults.map(({ key, value, of, source }) => ({ key, value, of, source })),
    warnings: run.warnings.map(warningOf),
    files,
  };
}

/** Numbers and figures, rounded by the unit in their names. */
function numbers(values: Readonly<Record<string, Figure>>): Record<string, Json> {
  const json: Record<string, Json> = {};
  for (const [name, value] of Object.entries(values)) {
    if (isNone(value)) {
      json[name] = null;
      json[`${name}_reason`] = value.none;
    } else json[name] = rounded(value, decimalsOf(name), name);
  }
  return json;
}

/** A number without a unit, to so many significant digits. */
function significant(value: number, digits: number, what: string): number {
  return rounded(value, 0, what) === value ? value : Number(value.toPrecision(digits));
}

function routeOf({ road, demand }: RunResult): Json {
  const { up, down } = climbOf(road);
  let beyond = 0;
  let runaway = 0;
  for (let i = 0; i + 1 < road.size; i++) {
    const share = (demand.share[i]! + demand.share[i + 1]!) / 2;
    const length = road.distance[i + 1]! - road.distance[i]!;
    if (share > 1) beyond += length;
    if (share < -1) runaway += length;
  }
  return {
    name: road.name,
    ...numbers({ length_m: road.distance[road.size - 1] ?? 0, climb_m: up, descent_m: down }),
    points: road.size,
    repairs: road.repairs.length,
    ...numbers({ grid_m: road.grid, above_range_m: beyond, below_range_m: runaway }),
    smoothing:
      road.smoothing === null
        ? null
        : {
            source: road.smoothing.source,
            ...numbers({
              wavelength_m: road.smoothing.wavelength,
              residual_sd_m: road.smoothing.residualSd,
              source_grade_sd_pct: toPct(road.smoothing.sourceGradeSd),
              shortest_hill_m: road.smoothing.shortestHill,
            }),
          },
    masks: road.masks.map(({ from, to, reason }) => ({
      ...numbers({ from_km: toKm(from), to_km: toKm(to) }),
      reason,
    })),
    repair_list: road.repairs.map(({ kind, from, to, points, line, message }) => ({
      kind,
      ...numbers({ from_km: toKm(from), to_km: toKm(to) }),
      points,
      line,
      message,
    })),
  };
}

function candidateOf({ name, controller, result, figures }: CandidateResult): Json {
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
      ...(ledger.battery === null ? {} : { battery_wh: toWh(ledger.battery) }),
    }),
    gains:
      controller.kind === 'pi'
        ? {
            kp_pct_per_kmh: significant(toPct(controller.kp) / toKmh(1), 7, 'kp'),
            ki_pct_per_kmh_s: significant(toPct(controller.ki) / toKmh(1), 7, 'ki'),
            setpoint_weight: controller.setpointWeight,
            sample_s: controller.sample,
            design: controller.design === null ? null : controller.design.words,
          }
        : null,
  };
}

function requirementOf(finding: RequirementFinding): Json {
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
    verdict: finding.verdict,
    words: finding.words,
  };
}

function whereWords(where: RequirementFinding['requirement']['where']): string {
  return typeof where === 'string' ? where : `km ${toKm(where.from)} to ${toKm(where.to)}`;
}

function warningOf({ code, message, place, from, to }: Warning): Json {
  return {
    code,
    message,
    ...(place === undefined ? {} : { place: { ...place } }),
    ...(from === undefined ? {} : numbers({ from_km: toKm(from) })),
    ...(to === undefined ? {} : numbers({ to_km: toKm(to) })),
  };
}
