import type { Road } from '../../road/road.ts';
import type { RunResult } from '../../run/run-result.ts';
import { asksOfHold } from '../model/hold-away.ts';
import { bendsCsv } from './bend-table.ts';
import { binSeriesCsv } from './bin-series.ts';
import { cyclesCsv } from './cycle-table.ts';
import { disturbanceCsv } from './disturbance.ts';
import { fullSeriesCsv } from './full-series.ts';
import { hillsCsv } from './hill-table.ts';
import { histogramsCsv } from './histogram-table.ts';
import { holdEventsCsv } from './hold-event-table.ts';
import { marginsCsv } from './margin-table.ts';
import { matrixCsv } from './matrix-table.ts';
import { rideCsv } from './ride-series.ts';
import { routeGeoJson } from './route.ts';
import { segmentsCsv } from './segment-table.ts';

/** A file to be written: its name below the folder of results, with `/`, and its text. */
export interface TextFile {
  readonly name: string;
  readonly text: string;
}

/**
 * The data files of a run, but for summary.json, which lists them and comes last.
 *
 * @throws NotFiniteError for a number that is not finite
 */
export function dataFiles(run: RunResult): readonly TextFile[] {
  return [
    ...roadFiles(run.road, run),
    { name: 'segments.csv', text: segmentsCsv(run.segments) },
    { name: 'hills.csv', text: hillsCsv(run.hills) },
    { name: 'cycles.csv', text: cyclesCsv(run.cycles) },
    { name: 'margins.csv', text: marginsCsv(run.loops) },
    { name: 'histograms.csv', text: histogramsCsv(run.candidates) },
    ...(asksOfHold(run) ? [{ name: 'hold-events.csv', text: holdEventsCsv(run) }] : []),
    ...(run.bends === null ? [] : [{ name: 'bends.csv', text: bendsCsv(run.bends) }]),
    ...(run.matrix === null ? [] : [{ name: 'matrix.csv', text: matrixCsv(run.matrix) }]),
    ...run.loggedRides.map((ride) => ({ name: `ride-${ride.name}.csv`, text: rideCsv(ride) })),
    ...run.candidates.map((candidate) => ({
      name: `series-${candidate.name}.csv`,
      text:
        candidate.full === null
          ? binSeriesCsv(run, candidate)
          : fullSeriesCsv(run, candidate, candidate.full),
    })),
  ];
}

/** The data files of a road alone: disturbance.csv and route.geojson. */
export function roadFiles(
  road: Road,
  { hills, bends }: Pick<RunResult, 'hills' | 'bends'> = { hills: [], bends: null },
): readonly TextFile[] {
  return [
    { name: 'disturbance.csv', text: disturbanceCsv(road) },
    { name: 'route.geojson', text: routeGeoJson(road, hills, bends?.unfit) },
  ];
}
