import { type Html, html } from '../html.ts';
import type { Verdict } from '../model/verdicts.ts';
import { STANDING } from './answer-section.ts';

/** A verdict as people see it: a mark and a word beside the colour. */
export function verdictMark(verdict: Verdict, word: string = verdict): Html {
  const { mark, look } = STANDING[verdict];
  return html`<span class="verdict ${look}"><span aria-hidden="true">${mark}</span> ${word}</span>`;
}
