import { join } from 'node:path';
import { medianOf } from '../numeric/running-median.ts';
import { roadFiles } from '../report/data/data-files.ts';
import { roadJson } from '../report/data/road-json.ts';
import { roadPicture } from '../report/road-picture.ts';
import { roadOf } from '../run/road-of.ts';
import type { RoadResult } from '../run/road-result.ts';
import type { Repair, RepairKind } from '../track/track.ts';
import { toKm, toPct } from '../units/convert.ts';
import { readerOf } from './case-reader.ts';
import type { Invocation } from './commands.ts';
import { defaultFolder } from './default-folder.ts';
import { DONE } from './exit-status.ts';
import { pngRenderer, pngWidthOf } from './png-renderer.ts';
import { checkFolder, type ResultFile, writeResult } from './result-folder.ts';
import { say, tellWarnings } from './tell.ts';

/** `ridgehold road TRACK|CASE`: writes the disturbances along a road, tells people what was repaired. */
export async function roadCommand({ operands: [path], values }: Invocation<'road'>): Promise<number> {
  const width = pngWidthOf(values);
  const folder = values.out ?? defaultFolder(path);
  checkFolder(folder, ['disturbance.csv', 'road.svg', 'road.json']);
  const draw = width === null ? null : await pngRenderer(width);
  const reader = readerOf(path);
  const result = reader.telling(() =>
    roadOf({ file: reader.file, read: reader.read, overrides: values.set }),
  );
  const picture = roadPicture(result.road, { units: values.units ?? 'kmh' });
  const files: ResultFile[] = [
    ...roadFiles(result.road),
    { name: 'road.svg', text: picture },
    ...(draw === null ? [] : [{ name: 'road.png', bytes: draw(picture) }]),
  ];
  const mark = roadJson(
    result,
    files.map(({ name }) => name),
  );
  writeResult(folder, [...files, { name: 'road.json', text: mark }]);
  if (!values.quiet) {
    tellRoad(result);
    tellWarnings(result.warnings, reader.seen);
    say(`The road is at ${join(folder, 'disturbance.csv')}`);
  }
  if (values.json) process.stdout.write(mark);
  return DONE;
}

function tellRoad({ road, defaults }: RoadResult): void {
  const length = road.distance[road.size - 1] ?? 0;
  const what =
    road.points === null ? `${road.size} knots` : `${road.points} points of the track, ${road.size} knots`;
  say(`${road.name}: ${toKm(length).toFixed(2)} km, ${what}`);
  if (road.smoothing !== null) {
    const { source, wavelength, residualSd, shortestHill } = road.smoothing;
    const assumed = defaults.some(({ key }) => key === 'road.elevation_source') ? ' (assumed)' : '';
    say(
      `Elevation: ${source}${assumed}, smoothed over ${wavelength.toFixed(0)} m, noise ${residualSd.toFixed(2)} m; hills shorter than ${shortestHill.toFixed(0)} m lose more than a tenth of their height`,
    );
  }
  const most = road.gradeSd.reduce((a, b) => Math.max(a, b), 0);
  say(
    most === 0
      ? 'Grade: as given, without uncertainty'
      : `Grade: one standard deviation ${toPct(medianOf(road.gradeSd)).toFixed(2)} % at the median, ${toPct(most).toFixed(2)} % at most`,
  );
  tellRepairs(road.repairs);
}

/** One and several of each kind. */
const REPAIR_WORDS: Readonly<Record<RepairKind, readonly [string, string]>> = {
  doubled_point: ['doubled point', 'doubled points'],
  missing_elevation: ['missing elevation', 'missing elevations'],
  position_jump: ['jump of position', 'jumps of position'],
  reversal: ['reversal', 'reversals'],
  gap: ['gap', 'gaps'],
  segment_joined: ['joint of segments', 'joints of segments'],
  elevation_spike: ['elevation spike', 'elevation spikes'],
  non_finite: ['missing number', 'missing numbers'],
};

function tellRepairs(repairs: readonly Repair[]): void {
  const counts = new Map<RepairKind, number>();
  for (const { kind } of repairs) counts.set(kind, (counts.get(kind) ?? 0) + 1);
  const words = [...counts]
    .map(([kind, count]) => `${count} ${REPAIR_WORDS[kind][count === 1 ? 0 : 1]}`)
    .join(', ');
  say(`Repairs: ${words === '' ? 'none' : words}`);
  for (const { message } of repairs.slice(0, 12)) say(`  ${message}`);
  if (repairs.length > 12) say(`  and ${repairs.length - 12} more, which road.json lists`);
}
