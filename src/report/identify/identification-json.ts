import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex, utf8ToBytes } from '@noble/hashes/utils.js';
import type { CoastDownFit } from '../../identify/coast-down.ts';
import { type Estimate, scaledEstimate } from '../../identify/estimate.ts';
import type { RoadLoadForm } from '../../identify/reference-conditions.ts';
import type { CoastDownIdentification, Identification } from '../../run/identification.ts';
import { TOOL_VERSION } from '../../run/tool-version.ts';
import { toCelsius, toHpa, toKmh, toNPerKmh2, toPct } from '../../units/convert.ts';
import { type Json, warningJson } from '../data/json-parts.ts';
import { jsonText } from '../data/json-text.ts';
import { SPEED_UNITS } from '../quantity.ts';
import { identificationAnswer } from './identification-answer.ts';

/** Version of the shape of identify.json, by the rule of SCHEMA_VERSION. */
const IDENTIFICATION_VERSION = '1.0';

/**
 * identify.json: what logs told, for programs. No clock and no absolute path is in it.
 *
 * @param output name of the vehicle file beside it; its SHA-256 tells whether anybody changed it since
 * @param files names of the other files beside it, which a later run may write over
 */
export function identificationJson(result: Identification, output: string, files: readonly string[]): string {
  return jsonText({
    schema_version: IDENTIFICATION_VERSION,
    tool: { name: 'ridgehold', version: TOOL_VERSION },
    kind: result.kind,
    answer: identificationAnswer(result, SPEED_UNITS.kmh).sentence,
    inputs: result.inputs,
    output: { name: output, sha256: bytesToHex(sha256(utf8ToBytes(result.vehicle))) },
    given: result.given.map(({ name, value, unit, from, isDefault }) => ({
      name,
      value,
      unit,
      from,
      is_default: isDefault,
    })),
    ...coastDownJson(result),
    warnings: result.warnings.map(warningJson),
    files,
  });
}

/** Six digits are more than any log supports. */
const short = (value: number): number => (Number.isFinite(value) ? Number(value.toPrecision(6)) : value);

export const estimateJson = ({ value, standardError, low, high }: Estimate): Json => ({
  value: short(value),
  standard_error: short(standardError),
  low: short(low),
  high: short(high),
});
const orNull = (estimate: Estimate | null, factor = 1): Json =>
  estimate === null ? null : estimateJson(scaledEstimate(estimate, factor));

const formJson = ({ f0, f2, airDensity }: RoadLoadForm): Json => ({
  f0_n: estimateJson(f0),
  f1_n_per_kmh: 0,
  f2_n_per_kmh2: estimateJson(scaledEstimate(f2, toNPerKmh2(1))),
  air_density_kg_m3: short(airDensity),
});

function coastDownJson({ fit, air, measured, atReference }: CoastDownIdentification): Record<string, Json> {
  return {
    confidence_pct: 95,
    estimates: {
      cda_m2: estimateJson(fit.cda),
      crr: estimateJson(fit.crr),
      wind_m_s: orNull(fit.wind),
      grade_pct: orNull(fit.grade, toPct(1)),
      crr_v_s_per_m: orNull(fit.growth),
    },
    correlation_cda_crr: short(fit.correlation),
    degrees_of_freedom: fit.degrees,
    air: {
      density_kg_m3: short(air.density),
      temperature_c: air.temperature === null ? null : short(toCelsius(air.temperature)),
      pressure_hpa: air.pressure === null ? null : short(toHpa(air.pressure)),
    },
    road_load: formJson(measured),
    road_load_at_reference: formJson(atReference),
    rms_residual_n: short(fit.rmsForce),
    runs: fit.runs.map((run) => ({
      name: run.name,
      direction: run.direction,
      from_kmh: short(toKmh(run.from)),
      to_kmh: short(toKmh(run.to)),
      duration_s: short(run.duration),
      samples: run.samples,
      rms_residual_n: short(run.rmsForce),
      mean_residual_n: short(run.meanForce),
    })),
    residuals: residualsJson(fit),
  };
}

const residualsJson = ({ residuals, runs }: CoastDownFit): Json =>
  Array.from(residuals.run, (run, i) => ({
    run: runs[run]!.name,
    speed_kmh: short(toKmh(residuals.speed[i]!)),
    force_n: short(residuals.force[i]!),
    residual_n: short(residuals.residual[i]!),
  }));
