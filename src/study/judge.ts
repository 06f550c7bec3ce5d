import { InputError } from '../problems/input-error.ts';
import { candidatesOf, type FigureSpread, figureSpread } from './figure-spread.ts';
import { FIGURES, type FigureRow, figureRow } from './figure-table.ts';
import type { Figure, RecoveredHill, Replayed, Requirement, RequirementFinding } from './findings.ts';
import { endedEarly, type FigureContext, measureFigure } from './measure-figure.ts';
import { NOT_RECOVERED } from './recovery.ts';
import { whereMeasured } from './where-measured.ts';
import { atKm, withUnit } from './wording.ts';

/** A limit within this many standard deviations of the measured figure cannot be told apart from it. */
const TOO_CLOSE = 2;

/**
 * Judges each requirement for each candidate that it speaks of: the measured figure, its margin to the limit, where it
 * was worst, and `met`, `not met`, or `too close to call` when the limit lies within two standard deviations (from the
 * grade's uncertainty) of the figure.
 *
 * A run that did not get to the end of what the requirement is about does not meet it, and has no margin. A figure that
 * does not exist is `not judged`, with its reason, except a recovery that never came, which is `not met`. Too close to
 * call is also a figure inside its limit that may be greater than what is known of it, or that failed on any of the
 * drawn roads.
 *
 * @param requirements as written; where both limits are given both count, and the nearer one makes the margin
 * @param replayed all candidates after their runs
 * @param context road, demand and hills of the same runs
 * @param spread of the figures; made here, with its defaults, where it is left out
 * @throws InputError `unknown-figure`
 */
export function judge(
  requirements: readonly Requirement[],
  replayed: readonly Replayed[],
  context: FigureContext,
  spread: FigureSpread = figureSpread(requirements, replayed, context),
): RequirementFinding[] {
  return requirements.flatMap((requirement) => {
    const row = figureRow(requirement.figure);
    if (row === undefined) throw unknownFigure(requirement);
    return candidatesOf(requirement, replayed).map((candidate) => {
      const { sd, failed } = spread.rows.find(
        (r) => r.requirement === requirement.id && r.candidate === candidate.name,
      ) ?? { sd: 0, failed: 0 };
      const draws =
        failed === 0 ? null : `${failed} of ${spread.roads} drawn roads ended early or gave no figure`;
      return judgeOne(requirement, row, candidate, context, sd, draws);
    });
  });
}

function judgeOne(
  requirement: Requirement,
  row: FigureRow,
  candidate: Replayed,
  context: FigureContext,
  spread: number,
  failedDraws: string | null,
): RequirementFinding {
  const measure = measureFigure(row, candidate, context, requirement.where, requirement.band);
  const measured =
    whereMeasured(row.name, requirement.where) === 'holdable' &&
    typeof measure.value !== 'number' &&
    context.demand.holdableShare === 0
      ? { none: 'the drive can hold the set speed on no part of the road' }
      : measure.value;
  const ended = endedEarly(candidate, requirement.where)
    ? `the run ended at ${atKm(candidate.result.endDistance)} (${candidate.result.status})`
    : null;
  const margin = ended === null ? marginOf(requirement, measured) : { none: ended };
  const hill = row.name === 'recovery_s' ? hillFrom(context, measure.at) : undefined;
  const doubt = measure.open ?? failedDraws;
  const verdict = ended === null ? verdictOf(measured, margin, spread, doubt !== null) : 'not met';
  return {
    requirement,
    candidate: candidate.name,
    measured,
    margin,
    spread,
    worstAt: hill?.to ?? measure.at,
    ...(hill === undefined ? {} : { afterHill: hill.number }),
    verdict,
    words: wordsOf(
      requirement,
      row,
      candidate,
      { measured, margin, spread, place: placeWords(measure.at, hill), ended, doubt },
      verdict,
    ),
  };
}

const hillFrom = ({ hills }: FigureContext, at: number | null): RecoveredHill | undefined =>
  hills.find((hill) => hill.from === at);

function placeWords(at: number | null, hill: RecoveredHill | undefined): string {
  if (hill !== undefined) return `, after hill ${hill.number}`;
  return at === null ? '' : `, worst at ${atKm(at)}`;
}

function marginOf({ atLeast, atMost }: Requirement, measured: Figure): Figure {
  if (typeof measured !== 'number') return measured;
  const low = atLeast === null ? Number.POSITIVE_INFINITY : measured - atLeast;
  const high = atMost === null ? Number.POSITIVE_INFINITY : atMost - measured;
  const margin = Math.min(low, high);
  return Number.isFinite(margin) ? margin : { none: 'the requirement has no limit' };
}

function verdictOf(
  measured: Figure,
  margin: Figure,
  spread: number,
  doubtful: boolean,
): RequirementFinding['verdict'] {
  if (typeof measured !== 'number') return measured.none === NOT_RECOVERED ? 'not met' : 'not judged';
  if (typeof margin !== 'number') return 'not judged';
  // A figure that came out right on its limit, to rounding, is met; with a spread that is too close.
  if (spread > 0 && Math.abs(margin) <= TOO_CLOSE * spread) return 'too close to call';
  if (margin < 0) return 'not met';
  return doubtful ? 'too close to call' : 'met';
}

interface Numbers {
  readonly measured: Figure;
  readonly margin: Figure;
  readonly spread: number;
  /** Where it was worst. */
  readonly place: string;
  /** That and where the run ended before the end of what is asked about. */
  readonly ended: string | null;
  /** Why the figure may be worse than what is known of it. */
  readonly doubt: string | null;
}

function wordsOf(
  requirement: Requirement,
  row: FigureRow,
  { name }: Replayed,
  { measured, margin, spread, place, ended, doubt }: Numbers,
  verdict: RequirementFinding['verdict'],
): string {
  const subject = `${name}: ${row.label.toLowerCase()}`;
  if (ended !== null) return `${subject}: ${verdict}, ${ended}.`;
  if (typeof measured !== 'number') return `${subject}: ${verdict}, ${measured.none}${place}.`;
  const around = spread > 0 ? ` (s.d. ${withUnit(spread, row.unit)})` : '';
  const side =
    typeof margin !== 'number'
      ? ''
      : `, ${withUnit(Math.abs(margin), row.unit)} ${margin >= 0 ? 'to spare' : 'short'}`;
  return `${subject} ${withUnit(measured, row.unit)}${around} against ${limitWords(requirement, row)}: ${verdict}${side}${place}${doubt === null ? '' : `; ${doubt}`}.`;
}

function limitWords({ atLeast, atMost }: Requirement, row: FigureRow): string {
  const limits = [
    atLeast === null ? '' : `at least ${withUnit(atLeast, row.unit)}`,
    atMost === null ? '' : `at most ${withUnit(atMost, row.unit)}`,
  ];
  return limits.filter((limit) => limit !== '').join(' and ');
}

function unknownFigure({ id, figure }: Requirement): InputError {
  return new InputError({
    code: 'unknown-figure',
    place: { key: `requirements.${id}.figure` },
    message: 'the table has no such figure',
    found: figure,
    allowed: FIGURES.map((row) => row.name).join(', '),
  });
}
