import type { CoastDownIdentification } from '../../run/identification.ts';
import { STANDARD_GRAVITY } from '../../units/constants.ts';
import type { XySeries } from '../charts/xy-chart.ts';
import { fixed, type SpeedUnit, speedText } from '../quantity.ts';
import type { XyFigure } from './xy-figures.ts';

/** Charts of a coast-down: the road load over speed, and what the fit leaves of it. */
export function coastDownCharts({ fit }: CoastDownIdentification, speed: SpeedUnit): readonly XyFigure[] {
  const { residuals, runs, setting } = fit;
  const pointsOf = (direction: string, of: Float64Array) =>
    Array.from(of, (force, i) => [speed.of(residuals.speed[i]!), force] as const).filter(
      (_, i) => runs[residuals.run[i]!]!.direction === direction,
    );
  const measured = (of: Float64Array): XySeries[] => [
    { name: 'there', mark: 'dot', colour: 1, points: pointsOf('there', of) },
    { name: 'back', mark: 'ring', colour: 2, points: pointsOf('back', of) },
  ];
  const fastest = residuals.speed.reduce((a, b) => Math.max(a, b), 0);
  const slowest = residuals.speed.reduce((a, b) => Math.min(a, b), fastest);
  const line: XySeries = {
    name: 'fitted: m g Crr + ½ ρ CdA v²',
    mark: 'line',
    colour: 0,
    points: Array.from({ length: 41 }, (_, i) => {
      const v = slowest + ((fastest - slowest) * i) / 40;
      const air = (setting.airDensity / 2) * fit.cda.value * v * v;
      return [speed.of(v), fit.crr.value * setting.mass * STANDARD_GRAVITY + air] as const;
    }),
  };
  const x = `speed / ${speed.axis}`;
  return [
    {
      id: 'force',
      words: {
        title: 'Road load over speed: measured and fitted',
        desc: `${residuals.force.length} measured forces between ${speedText(slowest, speed, 0)} and ${speedText(fastest, speed, 0)}, with the fitted curve.`,
      },
      plot: {
        x,
        y: 'road load / N',
        series: [line, ...measured(residuals.force)],
        height: 240,
        fromZero: true,
      },
      caption:
        'Mean force that slowed the vehicle over each piece of a run, in still air on the level: what was measured, less the wind and the slope.',
    },
    {
      id: 'residuals',
      words: {
        title: 'Residuals over speed',
        desc: `Measured less fitted force, root mean square ${fixed(fit.rmsForce, 1)} N.`,
      },
      plot: {
        x,
        y: 'measured less fitted / N',
        series: measured(residuals.residual),
        height: 170,
        fromZero: true,
      },
      caption: `A cloud around zero without a bend is what should be here; root mean square ${fixed(fit.rmsForce, 1)} N. One way above the other means a wind or a slope that changed.`,
    },
  ];
}
