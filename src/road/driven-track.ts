import { InputError } from '../problems/input-error.ts';
import type { Repair, Track } from '../track/track.ts';
import type { RoadOptions, ShelteredStretch } from './options.ts';
import type { MaskedStretch } from './road.ts';

/** A track as it is driven: ends cut off, turned round where it is driven back, distances from the driven start. */
export interface DrivenTrack extends Omit<Track, 'name' | 'format'> {
  readonly masks: readonly MaskedStretch[];
  readonly shelter: readonly ShelteredStretch[];
}

/**
 * Cuts `trimEnds` from both ends and turns the track round for `direction: 'back'`; stretches and repairs are carried
 * over to driven distance. Nothing of the cut ends is left: points there are gone, repairs that touch them are dropped,
 * masks and shelter are clipped.
 *
 * @throws InputError `road-too-short` when fewer than two points or less than two grid spacings are left
 */
export function driveTrack(track: Track, options: RoadOptions): DrivenTrack {
  const whole = track.distance[track.size - 1] ?? 0;
  const low = options.trimEnds;
  const high = whole - options.trimEnds;
  let first = 0;
  while (first < track.size && track.distance[first]! < low) first++;
  let end = track.size;
  while (end > first && track.distance[end - 1]! > high) end--;
  const size = end - first;
  const start = size > 0 ? track.distance[first]! : 0;
  const length = size > 0 ? track.distance[end - 1]! - start : 0;
  if (size < 2 || length < 2 * options.grid)
    throw new InputError({
      code: 'road-too-short',
      place: { key: options.trimEnds > 0 ? 'track.trim_ends_m' : 'track' },
      message:
        options.trimEnds > 0 ? 'too little is left between the trimmed ends' : 'the track is too short',
      found: `${size} points over ${length.toFixed(1)} m`,
      allowed: `at least 2 points over two grid spacings, ${2 * options.grid} m`,
    });
  const back = options.direction === 'back';
  const column = (
    values: Float64Array | null,
    map = (value: number): number => value,
  ): Float64Array | null => {
    if (values === null) return null;
    const cut = values.slice(first, end);
    return back ? cut.reverse().map(map) : cut;
  };
  const along = (x: number): number => (back ? length - (x - start) : x - start);
  const last = track.distance[end - 1]!;
  const time = column(track.time);
  const stretch = <T extends { readonly from: number; readonly to: number }>(part: T): T => {
    const from = Math.max(part.from, start);
    const to = Math.min(part.to, last);
    return { ...part, from: along(back ? to : from), to: along(back ? from : to) };
  };
  const inside = (part: { readonly from: number; readonly to: number }): boolean =>
    part.to > start && part.from < last;
  const kept = (repair: Repair): boolean =>
    options.trimEnds === 0 || (repair.from >= start && repair.to <= last);
  const inOrder = <T extends { readonly from: number }>(parts: T[]): T[] =>
    parts.sort((a, b) => a.from - b.from);
  return {
    size,
    distance: track.distance.slice(first, end).map(along).sort(),
    latitudeDeg: column(track.latitudeDeg),
    longitudeDeg: column(track.longitudeDeg),
    elevation: column(track.elevation),
    grade: column(track.grade, (g) => -g),
    heading: column(track.heading, (psi) => psi + Math.PI),
    headwind: column(track.headwind, (w) => -w),
    time: time === null ? null : time.map((t) => (back ? time[0]! - t : t - time[0]!)),
    speed: column(track.speed),
    repairs: inOrder(track.repairs.filter(kept).map(stretch)),
    masks: inOrder(options.masks.filter(inside).map(stretch)),
    shelter: inOrder(options.shelter.filter(inside).map(stretch)),
  };
}
