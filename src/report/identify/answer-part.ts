import type { Identification } from '../../run/identification.ts';
import { html } from '../html.ts';
import type { Section } from '../sections/section.ts';
import { identificationAnswer } from './identification-answer.ts';

/** 1: the answer in one sentence, and what stands against it. */
export function answerSection(result: Identification): Section {
  const { standing, words, sentence } = identificationAnswer(result);
  const { warnings } = result;
  const body = html`<div class="answer ${standing}"><p class="standing"><span aria-hidden="true">${standing === 'good' ? '✓' : '○'}</span> ${words}</p><p class="sentence">${sentence}</p></div>
${warnings.length > 0 && html`<h3>Reservations</h3><ul>${warnings.map(({ message }) => html`<li>${message}</li>`)}</ul>`}
<p class="caution"><strong>Numbers of one vehicle on one day.</strong> Load, posture, tyres, weather and wear change them by more than an interval says; a road test needs a closed or a quiet road, local rules and qualified people: <a href="#method">how it was computed</a>.</p>`;
  return { id: 'answer', number: 1, title: 'The answer', body };
}
