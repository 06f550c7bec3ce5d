import { TOOL_VERSION } from '../../run/tool-version.ts';
import { type Figure, isNone } from '../../study/findings.ts';
import { rounded } from '../data/fixed.ts';
import { type Json, numbers } from '../data/json-parts.ts';
import { jsonText } from '../data/json-text.ts';
import { SPEED_UNITS } from '../quantity.ts';
import type { CandidateChange, Comparison } from './compare-results.ts';
import { comparisonAnswer } from './comparison-answer.ts';
import type { FigureChange } from './figure-changes.ts';
import type { HillChange, HillOutcome, HillPlace } from './hill-changes.ts';
import type { ResultSummary, SummaryRequirement } from './read-summary.ts';
import type { RequirementChange } from './requirement-changes.ts';

/** Version of the shape of compare.json, by the rule of SCHEMA_VERSION. */
const COMPARISON_VERSION = '1.0';

/** Names of the two folders, without what stands before them. */
export interface Folders {
  readonly before: string;
  readonly after: string;
}

/**
 * compare.json: a comparison for programs. No clock and no absolute path is in it; a figure that does not exist is
 * null, with its reason under `<key>_reason`.
 *
 * @param files names of the other files written beside it
 */
export function comparisonJson(comparison: Comparison, folders: Folders, files: readonly string[]): string {
  const { before, after, inputs, candidates, requirements, hills } = comparison;
  const { standing, sentence } = comparisonAnswer(comparison, SPEED_UNITS.kmh);
  return jsonText({
    schema_version: COMPARISON_VERSION,
    tool: { name: 'ridgehold', version: TOOL_VERSION },
    standing,
    answer: sentence,
    before: sideJson(before, folders.before),
    after: sideJson(after, folders.after),
    inputs: {
      files: inputs.files,
      overrides: inputs.overrides,
      values:
        inputs.values?.map((one) => ({
          of: one.of,
          key: one.key,
          before: one.before?.value ?? null,
          before_is_default: one.before?.isDefault ?? false,
          after: one.after?.value ?? null,
          after_is_default: one.after?.isDefault ?? false,
        })) ?? null,
      ...(inputs.values === null ? { values_reason: 'a summary of schema 1.0 does not tell them' } : {}),
    },
    candidates_only_before: comparison.onlyBefore,
    candidates_only_after: comparison.onlyAfter,
    candidates: candidates.map(candidateJson),
    requirements: requirements.map(requirementJson),
    matrix:
      comparison.matrix === null
        ? null
        : { ...comparison.matrix, changes: comparison.matrix.changes.map((change) => ({ ...change })) },
    hills: hills.hills.map(hillJson),
    ...(hills.unmatched === null ? {} : { hills_reason: hills.unmatched }),
    files,
  });
}

const sideJson = (result: ResultSummary, folder: string): Json => ({
  folder,
  schema_version: result.schema_version,
  tool_version: result.tool.version,
  status: result.status,
  title: result.title,
  case: result.case,
  scheme: result.scheme,
  route: result.route,
  vehicle: result.vehicle,
  hold: result.hold,
});

const candidateJson = ({ name, before, after, figures, gains }: CandidateChange): Json => ({
  name,
  before: { status: before.status, end_m: before.end_m },
  after: { status: after.status, end_m: after.end_m },
  figures: figures.map(figureJson),
  gains: gains.map((gain) => ({ ...gain })),
});

const figureJson = ({ figure, unit, before, after, difference, change }: FigureChange): Json => ({
  figure,
  unit,
  ...told('before', before),
  ...told('after', after),
  ...told('difference', difference),
  change,
});

/** Summaries are rounded already: of their difference nothing is left but the dust of binary fractions. */
function told(name: string, value: Figure): Record<string, Json> {
  return isNone(value) ? { [name]: null, [`${name}_reason`]: value.none } : { [name]: dusted(value, name) };
}

const dusted = (value: number, what: string): number =>
  value !== 0 && rounded(value, 6, what) === 0 ? Number(value.toPrecision(3)) : rounded(value, 6, what);

function requirementJson({ id, candidate, fate, askedDifferently, before, after }: RequirementChange): Json {
  const side = (asked: SummaryRequirement | null): Json =>
    asked === null
      ? null
      : {
          figure: asked.figure,
          ...(asked.band_kmh === undefined ? {} : { band_kmh: asked.band_kmh }),
          where: asked.where,
          sense: asked.sense,
          limit: asked.limit,
          measured: asked.measured,
          margin: asked.margin,
          worst_at_km: asked.worst_at_km,
          verdict: asked.verdict,
          words: asked.words,
        };
  return {
    id,
    candidate,
    fate,
    asked_differently: askedDifferently,
    before: side(before),
    after: side(after),
  };
}

const hillJson = ({ before, after, outcomes }: HillChange): Json => ({
  before: before.map(placeJson),
  after: after.map(placeJson),
  candidates: outcomes.map(({ candidate, before: was, after: is, change }) => ({
    candidate,
    before: outcomeJson(was),
    after: outcomeJson(is),
    ...numbers({ difference_kmh: Math.abs(is.speedChangeKmh) - Math.abs(was.speedChangeKmh) }),
    change,
  })),
});

const placeJson = ({ hill, kind, fromKm, toKm, meanGradePct }: HillPlace): Json => ({
  hill,
  kind,
  from_km: fromKm,
  to_km: toKm,
  mean_grade_pct: meanGradePct,
});

const outcomeJson = ({ speedChangeKmh, recovery, timeAtLimit, cause, derating }: HillOutcome): Json => ({
  ...numbers({ speed_change_kmh: speedChangeKmh, time_at_limit_s: timeAtLimit }),
  recovery_s: recovery,
  cause,
  derating,
});
