import { medianOf } from '../numeric/running-median.ts';
import type { Warning } from '../problems/warning.ts';
import { toKm, toPct } from '../units/convert.ts';
import type { DrivenTrack } from './driven-track.ts';
import type { RoadOptions } from './options.ts';
import type { Road } from './road.ts';
import { stretchWarnings } from './stretch-warnings.ts';

/** Repairs that run on for longer than this [m] are named. */
const LONG_REPAIR = 200;

/** What the points themselves give cause to say: too coarse for the grid, gaps bridged, too short for the smoothing. The file's track has `fileLength` [m]. */
export function dataWarnings(
  driven: DrivenTrack,
  road: Road,
  options: RoadOptions,
  fileLength: number,
): Warning[] {
  const warnings: Warning[] = [];
  const { distance, size } = driven;
  const steps = distance.slice(1).map((x, i) => x - distance[i]!);
  const usual = medianOf(steps);
  if (usual > 2 * road.grid)
    warnings.push({
      code: 'interpolated',
      message: `Points of the track are ${usual.toFixed(0)} m apart (median); between them the ${road.grid} m grid is interpolated and shows no real detail.`,
    });
  for (const { kind, from, to } of driven.repairs)
    if (kind === 'gap')
      warnings.push({
        code: 'gap-bridged',
        message: `No points for ${(to - from).toFixed(0)} m from km ${toKm(from).toFixed(2)}: bridged, ${gradeThere(road, from, to)}.`,
        from,
        to,
      });
  for (const { kind, from, to, points } of road.repairs)
    if (points > 0 && to - from > LONG_REPAIR)
      warnings.push({
        code: 'long-repair',
        message: `From km ${toKm(from).toFixed(2)} to km ${toKm(to).toFixed(2)} the track was repaired (${kind.replaceAll('_', ' ')}, ${points} points): the road there is made up more than measured.`,
        from,
        to,
      });
  warnings.push(...unusedInput(driven, options, fileLength));
  const length = distance[size - 1]!;
  const { smoothing } = road;
  if (smoothing === null) return warnings;
  if (length < 2 * smoothing.wavelength)
    warnings.push({
      code: 'short-for-smoothing',
      message: `The road is ${length.toFixed(0)} m long and its elevation is smoothed over ${smoothing.wavelength.toFixed(0)} m: little but one parabola is left of it.`,
    });
  if (smoothing.wavelength < 4 * road.grid)
    warnings.push({
      code: 'grid-coarse-for-smoothing',
      message: `The grid of ${road.grid} m is coarse for a smoothing wavelength of ${smoothing.wavelength.toFixed(0)} m; a quarter of it or less shows what the smoothing keeps.`,
    });
  return warnings;
}

/** How well the grade of a bridged stretch is known. */
function gradeThere(road: Road, from: number, to: number): string {
  const inside = road.gradeSd.filter((_, i) => road.distance[i]! >= from && road.distance[i]! <= to);
  const most = inside.reduce((a, b) => Math.max(a, b), 0);
  return most === 0
    ? 'and the grade there is that between its ends'
    : `and one standard deviation of the grade there reaches ${toPct(most).toFixed(1)} %`;
}

/** What was given and has no effect. */
function unusedInput(driven: DrivenTrack, options: RoadOptions, fileLength: number): Warning[] {
  const warnings: Warning[] = [];
  if (driven.headwind !== null && options.wind !== null)
    warnings.push({
      code: 'headwind-column-used',
      message: 'The file gives the headwind itself: it is used, and the wind of the case is not.',
    });
  if (driven.grade !== null && options.masks.length > 0)
    warnings.push({
      code: 'masks-unused',
      message: 'The file gives the grade itself: it is used as it is, and masks change nothing.',
    });
  for (const kind of ['mask', 'shelter'] as const) {
    const [given, used] = kind === 'mask' ? [options.masks, driven.masks] : [options.shelter, driven.shelter];
    warnings.push(...stretchWarnings({ kind, given, lost: given.length - used.length, length: fileLength }));
  }
  return warnings;
}
