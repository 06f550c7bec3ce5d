import type { FittedStep } from '../../identify/step-test.ts';
import { exp } from '../../numeric/elementary.ts';
import type { StepIdentification } from '../../run/identification.ts';
import { toPct } from '../../units/convert.ts';
import type { XySeries } from '../charts/xy-chart.ts';
import { fixed, type SpeedUnit, signed, speedText } from '../quantity.ts';
import type { XyFigure } from './xy-figures.ts';

/** More steps than this are in the table alone. */
const MOST_FIGURES = 8;
/** More marks than this run into each other. */
const MOST_MARKS = 300;

/** Charts of a step test: the speed after each of the first steps, measured and fitted. */
export const stepCharts = ({ fit }: StepIdentification, speed: SpeedUnit): readonly XyFigure[] =>
  fit.steps.slice(0, MOST_FIGURES).map((step, i) => stepChart(step, `step-${i + 1}`, speed));

function stepChart({ record, before, settled, fit }: FittedStep, id: string, speed: SpeedUnit): XyFigure {
  const end = record.time[record.time.length - 1]!;
  const curve: XySeries = {
    name: 'fitted',
    mark: 'line',
    colour: 2,
    points: Array.from({ length: 161 }, (_, k) => {
      const t = record.time[0]! + ((end - record.time[0]!) * k) / 160;
      const since = Math.max(0, t - fit.delay.value);
      return [t, speed.of(before + (settled - before) * (1 - exp(-since / fit.timeConstant.value)))] as const;
    }),
  };
  const measured: XySeries = {
    name: 'measured',
    mark: 'dot',
    colour: 1,
    points: Array.from(record.time, (t, k) => [t, speed.of(record.speed[k]!)] as const).filter(
      (_, k) => k % Math.ceil(record.time.length / MOST_MARKS) === 0,
    ),
  };
  const change = signed(toPct(record.to - record.from), 1);
  return {
    id,
    words: {
      title: `Answer to a step of ${change} %`,
      desc: `From ${speedText(before, speed)} towards ${speedText(settled, speed)}, time constant ${fixed(fit.timeConstant.value, 1)} s, delay ${fixed(fit.delay.value, 2)} s.`,
    },
    plot: {
      x: 'time from the step / s',
      y: `speed / ${speed.axis}`,
      series: [measured, curve],
      height: 150,
      fromZero: false,
    },
    caption: `Step of ${change} % at ${fixed(record.at, 1)} s.`,
  };
}
