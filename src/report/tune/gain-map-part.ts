import { linearController } from '../../control/linear-controller.ts';
import type { Gains } from '../../control/sampled-loop.ts';
import type { Canvas } from '../charts/canvas.ts';
import { gainMap, type MarkedGains } from '../charts/gain-map.ts';
import { type Html, html } from '../html.ts';
import { significant } from '../quantity.ts';
import { chartFigure } from '../sections/chart-figure.ts';
import type { Section } from '../sections/section.ts';
import type { TuneView } from './tune-view.ts';

/** 3: where the gains lie, and which keep the bound. */
export function gainMapPart(view: TuneView): Section {
  const { result } = view;
  const tried =
    result.trials.length === 0
      ? ''
      : ` Dots: the ${result.trials.length} gains that were tried on the road, the cheaper the larger.`;
  const sampling =
    ' The curve is that of the sampling of the proposals; a schedule is drawn by its gains at the set speed.';
  const body = html`<p>Under the curve every loop keeps a greatest sensitivity of ${significant(result.plan.sensitivity)} at all ${result.sheet.points.length} operating points; above it, or to the right, one of them does not.</p>
${chartFigure('gain-map', (canvas) => gainMapOf(view, canvas), `Squares: candidates of the case; diamonds: proposals; ringed: the one to take.${tried}${sampling}`)}`;
  return { id: 'gains', number: 3, title: 'Where the gains lie', body };
}

/** The map of a tuning, in the reader's unit of speed. */
export function gainMapOf({ result, speed, tuned }: TuneView, canvas: Canvas): Html {
  // Per cent of throttle per unit of the reader's speed.
  const inUnit = ({ kp, ki }: Gains): Gains => ({
    kp: (100 * kp) / speed.of(1),
    ki: (100 * ki) / speed.of(1),
  });
  const marked = tuned.flatMap((one): MarkedGains[] => {
    if (one.controller.kind === 'locked' || 'none' in linearController(one.controller)) return [];
    const { kp, ki } = inUnit(one.controller);
    if (!(kp > 0 && ki > 0)) return [];
    return [
      {
        kp,
        ki,
        name: one.name,
        colour: one.colour,
        proposed: one.proposal !== null,
        chosen: one.name === result.chosen,
      },
    ];
  });
  const map = {
    border: result.border.map(inUnit),
    trials: result.trials.map((trial) => ({ ...inUnit(trial), cost: trial.cost })),
    marked,
    axes: { kp: `kp / (% per ${speed.name})`, ki: `ki / (% per ${speed.name} s)` },
  };
  const words = {
    title: 'Gains that keep the bound, and those of candidates and proposals',
    desc: marked
      .map(({ name, kp, ki }) => `${name}: kp ${significant(kp)}, ki ${significant(ki)}`)
      .join('; '),
  };
  return gainMap(map, words, canvas);
}
