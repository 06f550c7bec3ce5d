import { lanesChart } from '../charts/lanes.ts';
import { candidateKey } from '../charts/line-key.ts';
import { html } from '../html.ts';
import { statusWords } from '../model/answer.ts';
import type { View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { chartFigure } from './chart-figure.ts';
import type { Section } from './section.ts';

/** 5: what every candidate did, over the same distance. */
export function lanesSection(view: View): Section {
  const early = view.candidates.filter((candidate) => candidate.result.status !== 'completed');
  const body = html`${candidateKey(view.candidates, PAGE_PAINT)}
${chartFigure(
  'lanes',
  (canvas) => lanesChart(view, canvas),
  html`Lines: mean of each stretch that is one line of the picture wide; shade around them: least to greatest in it, so that no peak is lost.${
    view.result.demand.settling.length > 0 &&
    ' Brackets: a change of set speed is being followed, and the error there is planned.'
  }${
    early.length > 0 &&
    ` ${early.map((candidate) => `${candidate.name} ${statusWords(candidate)}`).join('; ')}.`
  }`,
)}`;
  return { id: 'lanes', number: 5, title: 'Along the road', body };
}
