import type { TunedCandidate, TuneResult } from '../../run/tune-result.ts';
import { isNone } from '../../study/findings.ts';
import type { OperatingPoint, PointMargins } from '../../study/operating-point.ts';
import { toDeg, toKm, toKmh, toPct, toPctPerKmh } from '../../units/convert.ts';
import { type Json, numbers, warningJson } from '../data/json-parts.ts';
import { jsonText } from '../data/json-text.ts';
import { requirementJson } from '../data/summary.ts';
import { tuneAnswer } from './tune-answer.ts';
import { tuneView } from './tune-view.ts';

/** Version of the shape of tune.json, by the rule of SCHEMA_VERSION. */
const TUNE_VERSION = '1.1';

/**
 * tune.json: what a tuning found, for programs. No clock and no absolute path is in it. Infinite margins, where nothing
 * makes a loop oscillate, are null under `..._reason`.
 *
 * @param files names of the other files beside it, which a later run may write over
 * @throws NotFiniteError for a number that is not finite
 */
export function tuneJson(result: TuneResult, files: readonly string[]): string {
  const { plan, sheet } = result;
  return jsonText({
    schema_version: TUNE_VERSION,
    tool: { name: 'ridgehold', version: result.toolVersion },
    status: result.status,
    title: result.title,
    case: result.caseName,
    answer: tuneAnswer(tuneView(result, 'kmh')).sentence,
    chosen: result.chosen,
    inputs: result.inputs.map(({ name, sha256, bytes }) => ({ name, sha256, bytes })),
    overrides: result.overrides,
    scheme: result.scheme,
    max_sensitivity: plan.sensitivity,
    cost: plan.cost.map(({ figure, where, weight }) => ({
      figure,
      where: typeof where === 'string' ? where : { from_km: toKm(where.from), to_km: toKm(where.to) },
      weight,
    })),
    operating_points: sheet.points.map(pointJson),
    not_held: sheet.notHeld.map(({ speed, gear, surroundings, load, reason, share, from }) => ({
      from,
      ...numbers({
        speed_kmh: toKmh(speed),
        grade_pct: toPct(surroundings.grade),
        headwind_m_s: surroundings.headwind,
        share_pct: toPct(share),
      }),
      gear: gear + 1,
      load: load ?? 'own',
      reason,
    })),
    candidates: result.tuned.filter(({ proposal }) => proposal === null).map(tunedJson),
    proposals: result.tuned.filter(({ proposal }) => proposal !== null).map(tunedJson),
    not_proposed: result.notProposed.map(({ design, reason }) => ({ design, reason })),
    trials: result.trials.map(({ kp, ki, cost }) => ({
      kp_pct_per_kmh: short(toPctPerKmh(kp)),
      ki_pct_per_kmh_s: short(toPctPerKmh(ki)),
      cost: Number.isFinite(cost) ? short(cost) : null,
    })),
    defaults: result.defaults.map(({ key, value, of, source }) => ({ key, value, of, source })),
    warnings: result.warnings.map(warningJson),
    files,
    given: result.given.map(({ key, value, of }) => ({ key, value, of })),
  });
}

const short = (value: number): number => Number(value.toPrecision(7));

const pointJson = (
  { speed, gear, surroundings, load, throttle, weight, from }: OperatingPoint,
  i: number,
): Json => ({
  point: i + 1,
  from,
  ...numbers({
    speed_kmh: toKmh(speed),
    grade_pct: toPct(surroundings.grade),
    headwind_m_s: surroundings.headwind,
    throttle_pct: toPct(throttle),
    share_pct: toPct(weight),
  }),
  gear: gear + 1,
  load: load ?? 'own',
});

function tunedJson({
  name,
  controller,
  proposal,
  loop,
  keeps,
  figures,
  requirements,
  cost,
  runStatus,
}: TunedCandidate): Json {
  return {
    name,
    kind: controller.kind,
    ...(proposal === null
      ? {}
      : { design: proposal.design, words: proposal.words, candidate: proposal.file as Json }),
    ...(controller.kind === 'locked'
      ? {}
      : {
          kp_pct_per_kmh: short(toPctPerKmh(controller.kp)),
          ki_pct_per_kmh_s: short(toPctPerKmh(controller.ki)),
        }),
    keeps_bound: keeps,
    ...(loop.notLinear === null ? {} : { not_linear: loop.notLinear }),
    worst_point: loop.order[0] === undefined ? null : loop.order[0] + 1,
    margins: loop.figures.map(({ margins }, i) => ({ point: i + 1, ...marginsJson(margins) })),
    run_status: runStatus,
    cost: isNone(cost) ? null : short(cost),
    ...(isNone(cost) ? { cost_reason: cost.none } : {}),
    requirements: requirements.map(requirementJson),
    figures: numbers(figures),
  };
}

function marginsJson(margins: PointMargins): Record<string, Json> {
  const figure = (value: number | null, factor = 1) =>
    value === null
      ? { none: 'the loop is unstable' }
      : Number.isFinite(value)
        ? factor * value
        : { none: 'no limit' };
  return {
    stable: margins.stable,
    ...numbers({
      sensitivity: figure(margins.sensitivity),
      gain_margin: figure(margins.gainMargin),
      phase_margin_deg: figure(margins.phaseMargin, toDeg(1)),
      delay_margin_s: figure(margins.delayMargin),
    }),
  };
}
