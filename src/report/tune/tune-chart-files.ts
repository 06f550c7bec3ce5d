import type { TuneResult } from '../../run/tune-result.ts';
import { type ChartFile, chartFile } from '../chart-file.ts';
import { pageLoopChart } from '../sections/loop-section.ts';
import { gainMapOf } from './gain-map-part.ts';
import type { TuneOptions } from './render-tune.ts';
import { tuneLoopPage } from './tune-loop-page.ts';
import { tuneView } from './tune-view.ts';

/** The charts of a tuning as files of their own, as those of a report. */
export function tuneChartFiles(result: TuneResult, { units }: TuneOptions): readonly ChartFile[] {
  const view = tuneView(result, units);
  const page = tuneLoopPage(view);
  return [
    ...(result.border.length === 0 ? [] : [chartFile('gain-map', (canvas) => gainMapOf(view, canvas))]),
    ...page.sheet.loops
      .filter(({ worst }) => worst !== null)
      .map((loop) => chartFile(`loop-${loop.name}`, (canvas) => pageLoopChart(page, loop, canvas))),
  ];
}
