import type { RideIdentification } from '../../run/identification.ts';
import { toKm } from '../../units/convert.ts';
import type { XySeries } from '../charts/xy-chart.ts';
import { fixed, type SpeedUnit } from '../quantity.ts';
import type { XyFigure } from './xy-figures.ts';

/** Charts of a ride beside its vehicle, by segment: the residual of energy, and that of speed. */
export function rideCharts({ fit }: RideIdentification, speed: SpeedUnit): readonly XyFigure[] {
  const middle = (from: number, to: number): number => toKm((from + to) / 2);
  const force = (name: string, mark: XySeries['mark'], colour: number, after: boolean): XySeries => ({
    name,
    mark,
    colour,
    points: fit.segments.map((one) => [
      middle(one.from, one.to),
      (one.given - (after ? one.neededAfter : one.needed)) / (one.to - one.from),
    ]),
  });
  const forces = [force('vehicle as it was', 'ring', 2, false), force('as fitted', 'dot', 1, true)];
  const speeds: XySeries[] = [
    {
      name: 'vehicle as it was',
      mark: 'ring',
      colour: 2,
      points: fit.segments.map((one) => [middle(one.from, one.to), speed.of(one.rmsSpeed)]),
    },
    {
      name: 'as fitted',
      mark: 'dot',
      colour: 1,
      points: fit.segments.map((one) => [middle(one.from, one.to), speed.of(one.rmsSpeedAfter)]),
    },
  ];
  return [
    {
      id: 'energy',
      words: {
        title: 'Work that the log gave over what the vehicle needs, by segment',
        desc: `Root mean square of the pieces ${fixed(fit.rmsForceBefore, 1)} N before the fit, ${fixed(fit.rmsForce, 1)} N after it.`,
      },
      plot: { x: 'distance / km', y: 'given less needed / N', series: forces, height: 190, fromZero: true },
      caption: `Energy residual of each segment over its length: above zero the log gave more than the vehicle needs. Over the fitted pieces of 20 s, root mean square ${fixed(fit.rmsForceBefore, 1)} N before the fit and ${fixed(fit.rmsForce, 1)} N after it.`,
    },
    {
      id: 'speed',
      words: {
        title: 'Speed of the simulation beside the ride, by segment',
        desc: 'Root mean square difference of simulated and logged speed.',
      },
      plot: {
        x: 'distance / km',
        y: `rms of speed / ${speed.axis}`,
        series: speeds,
        height: 150,
        fromZero: true,
      },
      caption:
        'Speed residual of each segment: simulated from the logged speed at its start, with the logged drive, against what was ridden.',
    },
  ];
}
