import type { ResultSummary, SummaryRequirement } from './read-summary.ts';

/**
 * `lost`: met before, and no longer, or no longer asked of a candidate that is still there. `gained`: met, and not
 * before. `changed`: another verdict, met in neither. `new` and `dropped`: in one run only.
 */
export type RequirementFate = 'lost' | 'gained' | 'changed' | 'same' | 'new' | 'dropped';

/** One requirement of one candidate in two runs. */
export interface RequirementChange {
  readonly id: string;
  readonly candidate: string;
  readonly fate: RequirementFate;
  /** The figure, its limit, its band or its place is another one. */
  readonly askedDifferently: boolean;
  readonly before: SummaryRequirement | null;
  readonly after: SummaryRequirement | null;
}

/** In the order of the run after, then what only the one before has. */
export function requirementChanges(before: ResultSummary, after: ResultSummary): RequirementChange[] {
  const idOf = ({ id, candidate }: SummaryRequirement) => `${id}\n${candidate}`;
  const was = new Map(before.requirements.map((one) => [idOf(one), one]));
  const is = new Map(after.requirements.map((one) => [idOf(one), one]));
  const isThere = (name: string) => after.candidates.some((candidate) => candidate.name === name);
  return [...new Set([...is.keys(), ...was.keys()])].map((key) => {
    const pair = { before: was.get(key) ?? null, after: is.get(key) ?? null };
    const { id, candidate } = (pair.after ?? pair.before)!;
    return {
      id,
      candidate,
      fate: fateOf(pair, isThere(candidate)),
      askedDifferently: isOther(pair),
      ...pair,
    };
  });
}

type Pair = Pick<RequirementChange, 'before' | 'after'>;

function fateOf({ before, after }: Pair, isThere: boolean): RequirementFate {
  if (before?.verdict === 'met' && after?.verdict !== 'met' && isThere) return 'lost';
  if (before === null) return 'new';
  if (after === null) return 'dropped';
  if (before.verdict === after.verdict) return 'same';
  return after.verdict === 'met' ? 'gained' : 'changed';
}

function isOther({ before, after }: Pair): boolean {
  if (before === null || after === null) return false;
  return (['figure', 'limit', 'sense', 'band_kmh', 'where'] as const).some(
    (key) => before[key] !== after[key],
  );
}
