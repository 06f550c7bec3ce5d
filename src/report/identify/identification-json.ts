import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex, utf8ToBytes } from '@noble/hashes/utils.js';
import type { CoastDownFit } from '../../identify/coast-down.ts';
import { type Estimate, scaledEstimate } from '../../identify/estimate.ts';
import type { RoadLoadForm } from '../../identify/reference-conditions.ts';
import type { StepNumbers } from '../../identify/step-test.ts';
import type {
  CoastDownIdentification,
  Identification,
  RideIdentification,
  StepIdentification,
} from '../../run/identification.ts';
import { TOOL_VERSION } from '../../run/tool-version.ts';
import {
  toCelsius,
  toHpa,
  toKm,
  toKmh,
  toKmhPerPct,
  toNPerKmh,
  toNPerKmh2,
  toPct,
  toPctPerKmh,
  toWh,
} from '../../units/convert.ts';
import { type Json, warningJson } from '../data/json-parts.ts';
import { jsonText } from '../data/json-text.ts';
import { identificationAnswer } from './identification-answer.ts';

/** Version of the shape of identify.json, by the rule of SCHEMA_VERSION. */
const IDENTIFICATION_VERSION = '1.1';

/**
 * identify.json: what logs told, for programs. No clock and no absolute path is in it.
 *
 * @param output name of the file beside it that was asked for; its SHA-256 tells whether anybody changed it since
 * @param files names of the other files beside it, which a later run may write over
 */
export function identificationJson(result: Identification, output: string, files: readonly string[]): string {
  return jsonText({
    schema_version: IDENTIFICATION_VERSION,
    tool: { name: 'ridgehold', version: TOOL_VERSION },
    kind: result.kind,
    answer: identificationAnswer(result).sentence,
    inputs: result.inputs,
    output: { name: output, sha256: bytesToHex(sha256(utf8ToBytes(result.text))) },
    given: result.given.map(({ name, value, unit, from, isDefault }) => ({
      name,
      value,
      unit,
      from,
      is_default: isDefault,
    })),
    confidence_pct: 95,
    ...bodyOf(result),
    warnings: result.warnings.map(warningJson),
    files,
  });
}

function bodyOf(result: Identification): Record<string, Json> {
  switch (result.kind) {
    case 'coast-down':
      return coastDownJson(result);
    case 'step':
      return stepJson(result);
    case 'ride':
      return rideJson(result);
  }
}

/** Six digits are more than any log supports. */
const short = (value: number): number => (Number.isFinite(value) ? Number(value.toPrecision(6)) : value);

const estimateJson = ({ value, standardError, low, high }: Estimate): Json => ({
  value: short(value),
  standard_error: short(standardError),
  low: short(low),
  high: short(high),
});
const orNull = (estimate: Estimate | null, factor = 1): Json =>
  estimate === null ? null : estimateJson(scaledEstimate(estimate, factor));

const formJson = ({ f0, f1, f2, airDensity }: RoadLoadForm): Json => ({
  f0_n: estimateJson(f0),
  f1_n_per_kmh: f1 === null ? 0 : estimateJson(scaledEstimate(f1, toNPerKmh(1))),
  f2_n_per_kmh2: estimateJson(scaledEstimate(f2, toNPerKmh2(1))),
  air_density_kg_m3: short(airDensity),
});

function coastDownJson({
  fit,
  air,
  measured,
  atReference,
  withThreeTerms,
}: CoastDownIdentification): Record<string, Json> {
  return {
    estimates: {
      cda_m2: estimateJson(fit.cda),
      crr: estimateJson(fit.crr),
      wind_m_s: orNull(fit.wind),
      grade_pct: orNull(fit.grade, toPct(1)),
      crr_v_s_per_m: orNull(fit.threeTerms?.growth ?? null),
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
    road_load_three_terms: withThreeTerms === null ? null : formJson(withThreeTerms.measured),
    road_load_three_terms_at_reference: withThreeTerms === null ? null : formJson(withThreeTerms.atReference),
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

const numbersJson = (numbers: StepNumbers<Estimate> | null): Json =>
  numbers === null
    ? null
    : {
        gain_kmh_per_pct: estimateJson(scaledEstimate(numbers.gain, toKmhPerPct(1))),
        time_constant_s: estimateJson(numbers.timeConstant),
        delay_s: estimateJson(numbers.delay),
      };

function stepJson({ fit, designs }: StepIdentification): Record<string, Json> {
  return {
    estimates: numbersJson(fit.all),
    steps_up: numbersJson(fit.up),
    steps_down: numbersJson(fit.down),
    steps: fit.steps.map((step) => ({
      name: step.record.name,
      at_s: short(step.record.at),
      from_pct: short(toPct(step.record.from)),
      to_pct: short(toPct(step.record.to)),
      from_kmh: short(toKmh(step.before)),
      towards_kmh: short(toKmh(step.settled)),
      estimates: numbersJson(step.fit),
      by_two_points: {
        gain_kmh_per_pct: short(toKmhPerPct(step.twoPoint.gain)),
        time_constant_s: short(step.twoPoint.timeConstant),
        delay_s: short(step.twoPoint.delay),
      },
      rms_residual_kmh: short(toKmh(step.rmsSpeed)),
    })),
    candidates: designs.map(({ name, closedLoop, kp, integralTime }) => ({
      name,
      closed_loop_s: short(closedLoop),
      kp_pct_per_kmh: short(toPctPerKmh(kp)),
      ti_s: short(integralTime),
    })),
  };
}

function rideJson({ fit, vehicleName, roadWords, driveWords }: RideIdentification): Record<string, Json> {
  const { closure } = fit;
  return {
    vehicle: vehicleName,
    road: roadWords,
    drive: driveWords,
    estimates: Object.fromEntries(
      fit.unknowns.map(({ name, was, estimate }) => [
        name,
        { ...(estimateJson(estimate) as Record<string, Json>), before: short(was) },
      ]),
    ),
    correlation: fit.correlation === null ? null : short(fit.correlation),
    degrees_of_freedom: fit.degrees,
    elevation_closure:
      closure === null
        ? null
        : {
            cda_m2: estimateJson(closure.cda),
            crr: estimateJson(closure.crr),
            rms_before_m: short(closure.before),
            rms_after_m: short(closure.after),
          },
    fitted_km: short(toKm(fit.fitted)),
    length_km: short(toKm(fit.length)),
    rms_residual_before_n: short(fit.rmsForceBefore),
    rms_residual_n: short(fit.rmsForce),
    segments: fit.segments.map((one) => ({
      from_km: short(toKm(one.from)),
      to_km: short(toKm(one.to)),
      duration_s: short(one.duration),
      mean_speed_kmh: short(toKmh(one.meanSpeed)),
      mean_grade_pct: short(toPct(one.meanGrade)),
      given_wh: short(toWh(one.given)),
      needed_before_wh: short(toWh(one.needed)),
      needed_wh: short(toWh(one.neededAfter)),
      end_speed_before_kmh: short(toKmh(one.endSpeed)),
      rms_speed_before_kmh: short(toKmh(one.rmsSpeed)),
      rms_speed_kmh: short(toKmh(one.rmsSpeedAfter)),
      drive_closed_pct: short(toPct(one.closed)),
    })),
  };
}
