import type { RunResult } from '../run/run-result.ts';
import { type ChartFile, chartFile } from './chart-file.ts';
import { energyChart } from './charts/energy.ts';
import { forceSpeedChart } from './charts/force-speed.ts';
import { hillPicture } from './charts/hill-picture.ts';
import { histogramChart } from './charts/histogram.ts';
import { holdPicture } from './charts/hold-picture.ts';
import { holdStrip } from './charts/hold-strip.ts';
import { laneLooks } from './charts/lane-looks.ts';
import { laneChart } from './charts/lanes.ts';
import { planChart } from './charts/plan.ts';
import { profileChart } from './charts/profile.ts';
import { roadLanesChart } from './charts/road-lanes.ts';
import { segmentStrip } from './charts/segment-strip.ts';
import { errorBand, spreadsOf } from './model/histograms.ts';
import { asksOfHold } from './model/hold-away.ts';
import { MOMENT_KINDS, shownMoments } from './model/hold-moments.ts';
import { planMap } from './model/plan-map.ts';
import { type View, viewOf } from './model/view.ts';
import type { ReportOptions } from './render-report.ts';
import { loopPageOf } from './sections/loop-page.ts';
import { pageLoopChart } from './sections/loop-section.ts';

/**
 * The charts of the report as files of their own: complete SVG with concrete colours on white, for slides and documents.
 * The plan is left out where the positions are unknown.
 */
export function chartFiles(result: RunResult, options: ReportOptions): readonly ChartFile[] {
  const view = viewOf(result, options.units);
  const map = planMap(result.road);
  const design = view.candidates.find((candidate) => !candidate.locked) ?? view.candidates[0];
  return [
    chartFile('profile', (canvas) => profileChart(view, canvas)),
    chartFile('road-grade', (canvas) => roadLanesChart(result.road, view.speed, canvas)),
    chartFile('force-speed', (canvas) => forceSpeedChart(view, canvas)),
    ...laneLooks(view).map((look) =>
      chartFile(`lane-${look.title.replaceAll(' ', '-')}`, (canvas) => laneChart(view, canvas, look)),
    ),
    ...spreadsOf(view).map((spread) =>
      chartFile(
        `histogram-${spread.quantity.chart}`,
        (canvas) => histogramChart(spread, errorBand(view, spread), canvas),
        { width: 480 },
      ),
    ),
    ...result.hills.map((hill) =>
      chartFile(`hill-${hill.number}`, (canvas) => hillPicture(view, hill, canvas), {
        width: 420,
        narrow: true,
      }),
    ),
    ...(asksOfHold(result) ? holdFiles(view) : []),
    ...(map === null || design === undefined
      ? []
      : [chartFile('plan', (canvas) => planChart(view, design, map, canvas))]),
    chartFile('segments', (canvas) => segmentStrip(view, canvas)),
    chartFile('energy', (canvas) => energyChart(view, canvas)),
    ...result.loops.loops
      .filter(({ worst }) => worst !== null)
      .map((loop) =>
        chartFile(`loop-${loop.name}`, (canvas) => pageLoopChart(loopPageOf(view), loop, canvas)),
      ),
  ];
}

/** Where hold was on, and what followed its events: the pictures of the page, numbered by kind. */
const holdFiles = (view: View): ChartFile[] => [
  chartFile('hold', (canvas) => holdStrip(view, canvas)),
  ...MOMENT_KINDS.flatMap((kind) =>
    shownMoments(view, kind).map((moment, i) =>
      chartFile(`hold-${kind.replaceAll('_', '-')}-${i + 1}`, (canvas) => holdPicture(view, moment, canvas), {
        width: 420,
        narrow: true,
      }),
    ),
  ),
];
