import type { RunResult } from '../run/run-result.ts';
import { chartOnWhite } from './chart-on-white.ts';
import type { Canvas } from './charts/canvas.ts';
import { energyChart } from './charts/energy.ts';
import { forceSpeedChart } from './charts/force-speed.ts';
import { hillPicture } from './charts/hill-picture.ts';
import { histogramChart } from './charts/histogram.ts';
import { laneLooks } from './charts/lane-looks.ts';
import { laneChart } from './charts/lanes.ts';
import { planChart } from './charts/plan.ts';
import { profileChart } from './charts/profile.ts';
import { roadLanesChart } from './charts/road-lanes.ts';
import { segmentStrip } from './charts/segment-strip.ts';
import type { Html } from './html.ts';
import { errorBand, spreadsOf } from './model/histograms.ts';
import { planMap } from './model/plan-map.ts';
import { viewOf } from './model/view.ts';
import { FILE_PAINT } from './paint.ts';
import type { ReportOptions } from './render-report.ts';
import { loopPageOf } from './sections/loop-page.ts';
import { pageLoopChart } from './sections/loop-section.ts';

export interface ChartFile {
  /** File name, with its ending. */
  readonly name: string;
  readonly svg: string;
}

const WIDTH = 980;

/**
 * The charts of the report as files of their own: complete SVG with concrete colours on white, for slides and documents.
 * The plan is left out where the positions are unknown.
 */
export function chartFiles(result: RunResult, options: ReportOptions): readonly ChartFile[] {
  const view = viewOf(result, options.units);
  const canvas = (name: string, width = WIDTH, narrow = false): Canvas => ({
    id: name,
    paint: FILE_PAINT,
    width,
    narrow,
  });
  const file = (name: string, drawn: Html): ChartFile => ({ name: `${name}.svg`, svg: chartOnWhite(drawn) });
  const map = planMap(result.road);
  const design = view.candidates.find((candidate) => !candidate.locked) ?? view.candidates[0];
  return [
    file('profile', profileChart(view, canvas('profile'))),
    file('road-grade', roadLanesChart(result.road, view.speed, canvas('road-grade'))),
    file('force-speed', forceSpeedChart(view, canvas('force-speed'))),
    ...laneLooks(view).map((look) => {
      const name = `lane-${look.title.replaceAll(' ', '-')}`;
      return file(name, laneChart(view, canvas(name), look));
    }),
    ...spreadsOf(view).map((spread) => {
      const name = `histogram-${spread.quantity.chart}`;
      return file(name, histogramChart(spread, errorBand(view, spread), canvas(name, 480)));
    }),
    ...result.hills.map((hill) => {
      const name = `hill-${hill.number}`;
      return file(name, hillPicture(view, hill, canvas(name, 420, true)));
    }),
    ...(map === null || design === undefined
      ? []
      : [file('plan', planChart(view, design, map, canvas('plan')))]),
    file('segments', segmentStrip(view, canvas('segments'))),
    file('energy', energyChart(view, canvas('energy'))),
    ...result.loops.loops
      .filter(({ worst }) => worst !== null)
      .map((loop) => {
        const name = `loop-${loop.name}`;
        return file(name, pageLoopChart(loopPageOf(view), loop, canvas(name)));
      }),
  ];
}
