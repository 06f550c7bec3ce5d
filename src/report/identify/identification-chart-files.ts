import type { Identification } from '../../run/identification.ts';
import { type ChartFile, chartFile } from '../chart-file.ts';
import { xyChart } from '../charts/xy-chart.ts';
import { SPEED_UNITS, type SpeedUnit, type Units } from '../quantity.ts';
import { coastDownCharts } from './coast-down-charts.ts';
import { rideCharts } from './ride-charts.ts';
import { stepCharts } from './step-charts.ts';
import type { XyFigure } from './xy-figures.ts';

function chartsOf(result: Identification, speed: SpeedUnit): readonly XyFigure[] {
  switch (result.kind) {
    case 'coast-down':
      return coastDownCharts(result, speed);
    case 'step':
      return stepCharts(result, speed);
    case 'ride':
      return rideCharts(result, speed);
  }
}

/**
 * The charts of an identification as files of their own, each with its key. All names begin with `identify-`: the folder
 * may be that of a run, whose charts have other names.
 */
export const identificationChartFiles = (
  result: Identification,
  { units }: { readonly units: Units },
): readonly ChartFile[] =>
  chartsOf(result, SPEED_UNITS[units]).map(({ id, words, plot }) =>
    chartFile(`identify-${id}`, (canvas) => xyChart(words, { ...plot, keyed: true }, canvas)),
  );
