import { byChoice, firstChoice, missedBy } from '../../run/tune-choice.ts';
import type { TuneResult } from '../../run/tune-result.ts';
import { isNone } from '../../study/findings.ts';
import { placeOfPoint, sensitivityText } from '../model/point-words.ts';
import { type SpeedUnit, significant, withUnit } from '../quantity.ts';
import { missedIds, requirementWords } from './requirement-words.ts';
import type { TunedView, TuneView } from './tune-view.ts';

export interface TuneAnswer {
  /** `exceeded`: there are gains to take, and a candidate of the case exceeds the bound; `misses`: those to take miss a requirement. */
  readonly standing: 'found' | 'kept' | 'misses' | 'exceeded' | 'nothing';
  readonly sentence: string;
}

/** Which gains to take, and why, in one sentence. */
export function tuneAnswer(view: TuneView): TuneAnswer {
  const { result, chosen, tuned } = view;
  const ofCase = tuned.filter(({ proposal }) => proposal === null);
  const exceeds = ofCase.filter(({ keeps }) => keeps === false);
  const others =
    exceeds.length === 0
      ? ''
      : ` ${exceeds.map(({ name }) => name).join(' and ')} of the case ${exceeds.length === 1 ? 'exceeds' : 'exceed'} the bound: ${exceeds.map((one) => `${worstWords(one, view)}${costWords(one)}`).join('; ')}.`;
  if (chosen === null)
    return {
      standing: 'nothing',
      sentence: `Nothing can be proposed under the bound of ${bound(result)}: ${reasons(result)}.${keptWords(ofCase)}${others}`,
    };
  const best = firstChoice(ofCase.filter(({ keeps }) => keeps === true));
  const points = result.sheet.points.length;
  const cost = costOf(chosen);
  const keeping =
    points === 1
      ? 'at the one operating point'
      : `at all ${points} operating points, the worst being ${worstWords(chosen, view)}`;
  const standing = (one: TunedView, kept: 'found' | 'kept'): TuneAnswer['standing'] =>
    exceeds.length > 0 ? 'exceeded' : missedBy(one) > 0 ? 'misses' : kept;
  if (best !== null && byChoice(best, chosen) <= 0)
    return {
      standing: standing(best, 'kept'),
      sentence: `Keep ${best.name}${judgedWords(best)}: ${missedBy(best) < missedBy(chosen) ? `every proposal misses more requirements (the best, ${chosen.name}, ${missedIds(chosen.requirements).join(', ')})` : `no proposal costs less on this road (${significant(costOf(best))} against ${significant(cost)} of ${chosen.name})`}, and it keeps the bound of ${bound(result)} everywhere.${others}`,
    };
  const against =
    best === null
      ? ''
      : `, against ${significant(costOf(best))} of ${best.name}, the best of the case under the bound${missedBy(best) > missedBy(chosen) ? `, which misses ${missedIds(best.requirements).join(', ')}` : ''}`;
  return {
    standing: standing(chosen, 'found'),
    sentence: `Take ${chosen.name}, ${gainsText(chosen, view.speed)}${judgedWords(chosen)}: ${chosenWords(chosen, view)} (${significant(cost)}${against}), and its sensitivity keeps the bound of ${bound(result)} ${keeping}.${others}`,
  };
}

const judgedWords = ({ requirements }: TunedView): string =>
  requirements.length === 0 ? '' : ` (${requirementWords(requirements, 'requirement')})`;

/** Why that one of the proposals: the cost, where it is the least; else that fewer requirements are missed. */
function chosenWords(chosen: TunedView, view: TuneView): string {
  const least = view.tuned.every(
    ({ proposal, cost }) => proposal === null || isNone(cost) || cost >= costOf(chosen),
  );
  return least
    ? `of ${proposals(view)} it costs least on this road`
    : `none of ${proposals(view)} misses fewer requirements, and of those that miss as many it costs least on this road`;
}

const costWords = ({ cost }: TunedView): string =>
  isNone(cost) ? `, ${cost.none}` : `, at a cost of ${significant(cost)}`;

function keptWords(ofCase: readonly TunedView[]): string {
  const kept = ofCase.filter(({ keeps }) => keeps === true).map(({ name }) => name);
  return kept.length === 0
    ? ''
    : ` ${kept.join(' and ')} of the case ${kept.length === 1 ? 'keeps' : 'keep'} it.`;
}

const bound = ({ plan }: TuneResult): string => significant(plan.sensitivity);
const costOf = ({ cost }: TunedView): number => (isNone(cost) ? Number.POSITIVE_INFINITY : cost);
const reasons = ({ notProposed }: TuneResult): string =>
  [...new Set(notProposed.map(({ reason }) => reason))].join('; ');

function proposals({ tuned }: TuneView): string {
  const count = tuned.filter(({ proposal }) => proposal !== null).length;
  return count === 1 ? 'one proposal' : `${count} proposals`;
}

/** Greatest sensitivity and where: `1.68 at 60 km/h, level`; or that the loop is unstable there. */
export function worstWords({ loop }: Pick<TunedView, 'loop'>, { result, speed }: TuneView): string {
  const [worst] = loop.order;
  if (worst === undefined) return '';
  const { margins } = loop.figures[worst]!;
  const place = placeOfPoint(result.sheet.points[worst]!, speed);
  return margins.stable ? `${sensitivityText(margins.sensitivity)} at ${place}` : `unstable at ${place}`;
}

/** `Kp 12.1 % per km/h, Ti 4.1 s`. */
export function gainsText({ controller }: Pick<TunedView, 'controller'>, speed: SpeedUnit): string {
  if (controller.kind === 'locked') return 'locked';
  const kp = withUnit(significant((100 * controller.kp) / speed.of(1)), `% per ${speed.name}`);
  if (!(controller.ki > 0)) return `Kp ${kp}, no integral`;
  const scheduled = controller.kind === 'pid' && controller.schedule !== null ? ', scheduled' : '';
  return `Kp ${kp}, Ti ${withUnit(significant(controller.kp / controller.ki), 's')}${scheduled}`;
}
