import { USUAL_GAIN_MARGIN, USUAL_PHASE_MARGIN } from '../../control/loop-stability.ts';
import { toDeg } from '../../units/convert.ts';
import { type HtmlValue, html } from '../html.ts';
import type { CandidateView } from '../model/view.ts';
import { NO_VALUE } from '../quantity.ts';

/** How far each linear loop is from oscillating: two rows of the candidates' table; none without a feedback. */
export function loopMarginRows(candidates: readonly CandidateView[]): readonly HtmlValue[][] {
  if (candidates.every(({ loop }) => loop === null)) return [];
  const row = (
    head: string,
    usual: string,
    cell: (margins: { readonly gain: number; readonly phase: number }) => HtmlValue,
  ): HtmlValue[] => [
    html`<span class="wrap">${head} <span class="small">on the level, usual ${usual} and more</span></span>`,
    ...candidates.map(({ loop }): HtmlValue => {
      if (loop === null) return NO_VALUE;
      if (loop.gainMargin === null || loop.phaseMargin === null)
        return html`<span class="flag">unstable</span>`;
      return cell({ gain: loop.gainMargin, phase: loop.phaseMargin });
    }),
  ];
  const told = (text: string, thin: boolean): HtmlValue =>
    thin ? html`<span class="flag">${text}</span>` : text;
  return [
    row('Gain margin', USUAL_GAIN_MARGIN.toFixed(0), ({ gain }) =>
      Number.isFinite(gain) ? told(gain.toFixed(gain < 100 ? 1 : 0), gain < USUAL_GAIN_MARGIN) : 'no limit',
    ),
    row('Phase margin', `${toDeg(USUAL_PHASE_MARGIN).toFixed(0)}\u00a0°`, ({ phase }) =>
      Number.isFinite(phase)
        ? told(`${toDeg(phase).toFixed(0)}\u00a0°`, Math.abs(phase) < USUAL_PHASE_MARGIN)
        : 'no limit',
    ),
  ];
}
