import { scaledEstimate } from '../../identify/estimate.ts';
import type {
  CoastDownIdentification,
  Identification,
  RideIdentification,
  StepIdentification,
} from '../../run/identification.ts';
import { toKm, toKmhPerPct } from '../../units/convert.ts';
import { plusMinus } from '../model/estimate-words.ts';
import { UNKNOWN_WORDS } from '../model/unknown-words.ts';
import { fixed } from '../quantity.ts';

/** The answer in one sentence, and how it looks. */
export interface IdentificationAnswer {
  readonly standing: 'good' | 'open';
  readonly words: string;
  readonly sentence: string;
}

/** Warnings that leave the numbers as they are. */
const HARMLESS: ReadonlySet<string> = new Set(['few-runs', 'few-steps', 'drive-in-the-fit']);

/** What the logs told, in one sentence. */
export function identificationAnswer(result: Identification): IdentificationAnswer {
  const open = result.warnings.some(({ code }) => !HARMLESS.has(code));
  return {
    standing: open ? 'open' : 'good',
    words: open ? 'Identified, with reservations' : 'Identified',
    sentence: sentenceOf(result),
  };
}

function sentenceOf(result: Identification): string {
  switch (result.kind) {
    case 'coast-down':
      return coastDownSentence(result);
    case 'step':
      return stepSentence(result);
    case 'ride':
      return rideSentence(result);
  }
}

function coastDownSentence({ fit }: CoastDownIdentification): string {
  const count = fit.runs.length;
  return `CdA ${plusMinus(fit.cda, 'm²')} and Crr ${plusMinus(fit.crr, '')} from ${count} runs (95 % intervals), correlation ${fixed(fit.correlation, 2)}.`;
}

function stepSentence({ fit }: StepIdentification): string {
  const { gain, timeConstant, delay } = fit.all;
  const count = fit.steps.length;
  return `The speed answers the throttle with a gain of ${plusMinus(scaledEstimate(gain, toKmhPerPct(1)), 'km/h per %')}, a time constant of ${plusMinus(timeConstant, 's')} and a delay of ${plusMinus(delay, 's')}, from ${count} step${count === 1 ? '' : 's'} (95 % intervals).`;
}

function rideSentence({ fit }: RideIdentification): string {
  const told = fit.unknowns.filter(({ estimate }) => estimate.low > 0);
  const names = fit.unknowns.filter((one) => !told.includes(one)).map(({ name }) => UNKNOWN_WORDS[name].name);
  const numbers = told.map(
    ({ name, estimate }) => `${UNKNOWN_WORDS[name].name} ${plusMinus(estimate, UNKNOWN_WORDS[name].unit)}`,
  );
  const length = `${fixed(toKm(fit.fitted), 1)} km of the ride`;
  const before = `${fixed(fit.rmsForceBefore, 1)} N`;
  const untold = `${listed(names)} ${names.length === 1 ? 'is' : 'are'} not told by it`;
  const sentence =
    numbers.length === 0
      ? `over ${length} what its drive gave and what the vehicle needs are ${before} apart, and ${untold}.`
      : `${listed(numbers)} ${numbers.length === 1 ? 'makes' : 'make'} ${length} agree with the vehicle to ${fixed(fit.rmsForce, 1)} N, where it was ${before} off (95 % intervals)${names.length === 0 ? '' : `; ${untold}`}.`;
  return sentence.replace(/^./, (first) => first.toUpperCase());
}

const listed = (words: readonly string[]): string =>
  words.length < 2 ? (words[0] ?? '') : `${words.slice(0, -1).join(', ')} and ${words.at(-1)!}`;
