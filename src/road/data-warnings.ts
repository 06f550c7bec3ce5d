import { medianOf } from '../numeric/running-median.ts';
import type { Warning } from '../problems/warning.ts';
import { toKm } from '../units/convert.ts';
import type { DrivenTrack } from './driven-track.ts';
import type { RoadOptions } from './options.ts';
import type { Road } from './road.ts';

/** A gap is this many usual spacings wide, and at least this long [m]. */
const GAP_SPACINGS = 5;
const GAP_LENGTH = 50;
/** Repairs that run on for longer than this [m] are named. */
const LONG_REPAIR = 200;

/** What the points themselves give cause to say: too coarse for the grid, gaps bridged, too short for the smoothing. */
export function dataWarnings(driven: DrivenTrack, road: Road, options: RoadOptions): Warning[] {
  const warnings: Warning[] = [];
  const { distance, size } = driven;
  const steps = distance.slice(1).map((x, i) => x - distance[i]!);
  const usual = medianOf(steps);
  if (usual > 2 * road.grid)
    warnings.push({
      code: 'interpolated',
      message: `Points of the track are ${usual.toFixed(0)} m apart (median); between them the ${road.grid} m grid is interpolated and shows no real detail.`,
    });
  const least = Math.max(GAP_SPACINGS * usual, GAP_LENGTH);
  for (let i = 1; i < size; i++) {
    if (steps[i - 1]! <= least) continue;
    warnings.push({
      code: 'gap-bridged',
      message: `No points for ${steps[i - 1]!.toFixed(0)} m from km ${toKm(distance[i - 1]!).toFixed(2)}: bridged, and the grade there is little more than a guess.`,
      from: distance[i - 1]!,
      to: distance[i]!,
    });
  }
  for (const { kind, from, to, points } of road.repairs)
    if (points > 0 && to - from > LONG_REPAIR)
      warnings.push({
        code: 'long-repair',
        message: `From km ${toKm(from).toFixed(2)} to km ${toKm(to).toFixed(2)} the track was repaired (${kind.replaceAll('_', ' ')}, ${points} points): the road there is made up more than measured.`,
        from,
        to,
      });
  warnings.push(...unusedInput(driven, options));
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

/** What was given and has no effect. */
function unusedInput(driven: DrivenTrack, options: RoadOptions): Warning[] {
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
  const lost = options.masks.length - driven.masks.length;
  if (lost > 0)
    warnings.push({
      code: 'mask-outside-road',
      message: `${lost === 1 ? '1 mask lies' : `${lost} masks lie`} outside of the driven part of the track and ${lost === 1 ? 'changes' : 'change'} nothing.`,
    });
  return warnings;
}
