import type { CoastDownIdentification, Identification } from '../../run/identification.ts';
import { plusMinus } from '../model/estimate-words.ts';
import { fixed, type SpeedUnit } from '../quantity.ts';

/** The answer in one sentence, and how it looks. */
export interface IdentificationAnswer {
  readonly standing: 'good' | 'open';
  readonly words: string;
  readonly sentence: string;
}

/** Warnings that leave the numbers as they are. */
const HARMLESS: ReadonlySet<string> = new Set(['few-runs']);

/** What the logs told, in one sentence. */
export function identificationAnswer(result: Identification, _speed: SpeedUnit): IdentificationAnswer {
  const open = result.warnings.some(({ code }) => !HARMLESS.has(code));
  return {
    standing: open ? 'open' : 'good',
    words: open ? 'Identified, with reservations' : 'Identified',
    sentence: coastDownSentence(result),
  };
}

function coastDownSentence({ fit }: CoastDownIdentification): string {
  const count = fit.runs.length;
  return `CdA ${plusMinus(fit.cda, 'm²')} and Crr ${plusMinus(fit.crr, '')} from ${count} runs (95 % intervals), correlation ${fixed(fit.correlation, 2)}.`;
}
