import type { RequirementFinding } from '../../study/findings.ts';
import { whereMeasured } from '../../study/where-measured.ts';
import { toPct } from '../../units/convert.ts';
import { fixed, placeText, type SpeedUnit, withUnit } from '../quantity.ts';
import { emptyWords } from './battery-words.ts';
import { figureText } from './figure-text.ts';
import { isUnstable } from './loop-words.ts';
import { VERDICTS, type Verdict } from './verdicts.ts';
import type { CandidateView, View } from './view.ts';

/** `met in part`: met where the drive can hold, and a hill where it cannot, of which nothing was asked, defeats the design. */
export type Standing = Verdict | 'met in part' | 'unstable' | 'none asked' | 'incomplete';

export interface DesignStanding {
  readonly name: string;
  readonly standing: Standing;
  readonly words: string;
}

const STATUS_WORDS = {
  completed: 'reached the end',
  stalled: 'stalled',
  stopped: 'came to a stop',
  time_limit: 'ran out of time',
  non_finite: 'failed numerically',
} as const;

/** How a run ended, in words. */
export const statusWords = (candidate: CandidateView): string =>
  candidate.result.status === 'completed'
    ? STATUS_WORDS.completed
    : `${emptyWords(candidate)}${STATUS_WORDS[candidate.result.status]} at ${placeText(candidate.result.endDistance)}`;

/** What was found of a candidate. */
export function findingsOf(view: View, name: string): readonly RequirementFinding[] {
  return view.result.requirements.filter((finding) => finding.candidate === name);
}

/** Whole per cent; as the table says it where that would make 100 % of a little less, or 0 % of a little more. */
export const percent = (value: number, speed: SpeedUnit): string =>
  (value > 99 && value < 100) || (value > 0 && value < 1)
    ? figureText(value, '%', speed)
    : withUnit(fixed(value), '%');

/** `both requirements`, `all 3 requirements`. */
const allOf = (count: number): string =>
  count === 1 ? 'its one requirement' : count === 2 ? 'both requirements' : `all ${count} requirements`;

/** A hill beyond the drive takes it out of its band. */
const isDefeated = ({ result: { band, hills } }: View, name: string): boolean =>
  hills.some(
    ({ share, outcomes }) =>
      Math.abs(share) > 1 &&
      outcomes.some((one) => one.candidate === name && one.affected && Math.abs(one.speedChange) > band),
  );

/** Of findings asked of no more than the holdable road. */
interface HoldableScope {
  /** `on the holdable 74 % of the road`. */
  readonly road: string;
  /** How many of them are taken there and not over the whole road: `2 of them`; null: all. */
  readonly some: string | null;
}

/** What of the findings is of the holdable road alone; null where something was asked beyond it, nothing of it, or all of it can be held. */
function holdableOnly(
  { result: { demand }, speed }: View,
  findings: readonly RequirementFinding[],
): HoldableScope | null {
  const beyond = findings.some(({ requirement }) => requirement.where !== 'holdable');
  const { length } = findings.filter(
    ({ requirement: { figure, where } }) => whereMeasured(figure, where) === 'holdable',
  );
  if (demand.holdableShare >= 1 || beyond || length === 0) return null;
  return {
    road: `on the holdable ${percent(toPct(demand.holdableShare), speed)} of the road`,
    some: length === findings.length ? null : `${length === 1 ? 'one' : length} of them`,
  };
}

/** `both met where it can be held`, `both met, one of them where it can be held`. */
const withSome = (words: string, { some }: HoldableScope, where: string): string =>
  some === null ? `${words} ${where}` : `${words}, ${some} ${where}`;

export function requirementClause(
  view: View,
  findings: readonly RequirementFinding[],
): { words: string; standing: Standing } {
  if (findings.length === 0) return { words: '', standing: 'none asked' };
  const standing = VERDICTS.find((verdict) => findings.some((one) => one.verdict === verdict))!;
  const some = findings.filter((one) => one.verdict === standing);
  const ids = [...new Set(some.map((one) => one.requirement.id))].join(', ');
  const are = some.length === 1 ? 'is' : 'are';
  switch (standing) {
    case 'not met':
      return { standing, words: `but misses ${missed(some.length, findings.length)} (${ids})` };
    case 'too close to call':
      return { standing, words: `and misses no requirement, but ${ids} ${are} too close to call` };
    case 'not judged':
      return { standing, words: `and misses no requirement, but ${ids} cannot be judged on this road` };
    case 'met': {
      const where = holdableOnly(view, findings);
      if (where === null) return { standing, words: `and meets ${allOf(findings.length)}` };
      const lost = findings.some(({ candidate }) => isDefeated(view, candidate));
      return {
        standing: lost ? 'met in part' : standing,
        words: withSome(`and meets ${allOf(findings.length)}`, where, where.road),
      };
    }
  }
}

/** `its one requirement`, `1 of 2 requirements`. */
const missed = (count: number, of: number): string =>
  of === 1 ? allOf(1) : `${count} of ${of} requirements`;

/** How a design stands against what was asked of it. */
export function designStanding(view: View, design: CandidateView): DesignStanding {
  const findings = findingsOf(view, design.name);
  const { name } = design;
  if (design.result.status !== 'completed')
    return { name, standing: 'incomplete', words: statusWords(design) };
  const { standing } = requirementClause(view, findings);
  const unstable = isUnstable(design);
  const told = (words: string): DesignStanding => ({
    name,
    standing: standingOf(standing, unstable),
    words: unstable ? `${words}; its linear loop is unstable` : words,
  });
  if (standing === 'none asked') return told('nothing asked');
  const { length } = findings;
  if (standing === 'met' || standing === 'met in part') {
    const all = length === 1 ? 'its one met' : length === 2 ? 'both met' : `all ${length} met`;
    const where = standing === 'met' ? null : holdableOnly(view, findings);
    return told(where === null ? all : withSome(all, where, 'where it can be held'));
  }
  return told(`${findings.filter((one) => one.verdict === standing).length} of ${length} ${standing}`);
}

/** Nothing that an unstable loop meets is a reason to be pleased. */
export const standingOf = (standing: Standing, unstable: boolean): Standing =>
  unstable && standing !== 'not met' ? 'unstable' : standing;
