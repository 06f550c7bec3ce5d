import { html } from '../html.ts';
import type { Section } from '../sections/section.ts';
import { requirementWords } from './requirement-words.ts';
import { gainsText, type TuneAnswer, tuneAnswer, worstWords } from './tune-answer.ts';
import type { TunedView, TuneView } from './tune-view.ts';

const LOOKS: Readonly<Record<TuneAnswer['standing'], { mark: string; words: string; look: string }>> = {
  found: { mark: '✓', words: 'Gains that keep the bound', look: 'good' },
  kept: { mark: '✓', words: 'The case has them already', look: 'good' },
  misses: { mark: '✗', words: 'Gains that keep the bound, but miss requirements of the case', look: 'bad' },
  exceeded: { mark: '✗', words: 'A candidate of the case exceeds the bound', look: 'bad' },
  nothing: { mark: '✗', words: 'Nothing to propose', look: 'bad' },
};

/** 1: the answer in one sentence, then how the candidates of the case stand. */
export function answerPart(view: TuneView): Section {
  const { standing, sentence } = tuneAnswer(view);
  const { mark, words, look } = LOOKS[standing];
  const ofCase = view.tuned.filter(({ proposal, keeps }) => proposal === null && keeps !== null);
  const { chosen, result } = view;
  const body = html`<div class="answer ${look}"><p class="standing"><span aria-hidden="true">${mark}</span> ${words}</p><p class="sentence">${sentence}</p>${ofCase.length > 0 && html`<ul class="keys">${ofCase.map((one) => standingOf(one, view))}</ul>`}</div>
${chosen !== null && html`<p class="note"><code>ridgehold tune ${result.caseName}.yaml --add best</code> puts ${chosen.name} into the case as a candidate; no other byte of the file changes. <code>ridgehold run</code> then finds the figures and verdicts that stand here.</p>`}
<p class="caution"><strong>A simulation is no approval to ride.</strong> Margins are those of a linear loop with the vehicle as its file has it: noise, slack, limits and a vehicle that differs take from them. Local rules, type approval and qualified people come first: <a href="#method-cautions">all cautions</a>.</p>`;
  return { id: 'answer', number: 1, title: 'The answer', body };
}

function standingOf(one: TunedView, view: TuneView) {
  const kept = one.keeps === true;
  return html`<li><span class="verdict ${kept ? 'good' : 'bad'}"><span aria-hidden="true">${kept ? '✓' : '✗'}</span> ${one.name}</span> ${gainsText(one, view.speed)}: ${worstWords(one, view)}${one.requirements.length > 0 && `; ${requirementWords(one.requirements, 'requirement')}`}</li>`;
}
