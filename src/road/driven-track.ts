import { InputError } from '../problems/input-error.ts';
import type { Repair, Track } from '../track/track.ts';
import { toKm } from '../units/convert.ts';
import type { RoadOptions, ShelteredStretch } from './options.ts';
import type { MaskedStretch } from './road.ts';

/** A track as it is driven: ends cut off, turned round where it is driven back, distances from the driven start. */
export interface DrivenTrack extends Omit<Track, 'name' | 'format'> {
  readonly masks: readonly MaskedStretch[];
  readonly shelter: readonly ShelteredStretch[];
  /** 1 where the elevation is the file's own and outside of the masks, else 0. */
  readonly measured: Uint8Array;
}

/** Which way a place of the file's track goes on the driven road. */
type Along = (x: number) => number;

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
  if (options.trimEnds > 0) [first, end] = withoutFilledEnds(track, first, end);
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
  const along: Along = (x) => (back ? length - (x - start) : x - start);
  const last = track.distance[end - 1]!;
  const time = column(track.time);
  const stretch = <T extends { readonly from: number; readonly to: number }>(part: T): T => {
    const from = Math.max(part.from, start);
    const to = Math.min(part.to, last);
    return { ...part, from: along(back ? to : from), to: along(back ? from : to) };
  };
  const inside = (part: { readonly from: number; readonly to: number }): boolean =>
    part.to > start && part.from < last;
  const inOrder = <T extends { readonly from: number }>(parts: T[]): T[] =>
    parts.sort((a, b) => a.from - b.from);
  const kept = (repair: Repair): boolean =>
    options.trimEnds === 0 || (repair.from >= start && repair.to <= last);
  const moved = back || start > 0;
  const distance = track.distance.slice(first, end).map(along).sort();
  const repairs = inOrder(track.repairs.filter(kept).map(stretch));
  const masks = inOrder(options.masks.filter(inside).map(stretch));
  return {
    size,
    distance,
    latitudeDeg: column(track.latitudeDeg),
    longitudeDeg: column(track.longitudeDeg),
    elevation: column(track.elevation),
    grade: column(track.grade, (g) => -g),
    heading: column(track.heading, (psi) => psi + Math.PI),
    headwind: column(track.headwind, (w) => -w),
    time: time === null ? null : time.map((t) => (back ? time[0]! - t : t - time[0]!)),
    speed: column(track.speed),
    repairs: moved ? repairs.map(placedAnew) : repairs,
    masks,
    shelter: inOrder(options.shelter.filter(inside).map(stretch)),
    measured: measuredPoints(distance, repairs, masks),
  };
}

/** A run of filled elevations across a cut leans on a point that is cut off: the cut moves inwards past it. */
function withoutFilledEnds(track: Track, first: number, end: number): [number, number] {
  let low = first;
  let high = end;
  for (const { kind, from, to } of track.repairs) {
    if (kind !== 'missing_elevation') continue;
    const start = track.distance[first] ?? 0;
    const last = track.distance[end - 1] ?? 0;
    if (from <= start && to >= start) while (low < high && track.distance[low]! <= to) low++;
    if (from <= last && to >= last) while (high > low && track.distance[high - 1]! >= from) high--;
  }
  return [low, high];
}

function measuredPoints(
  distance: Float64Array,
  repairs: readonly Repair[],
  masks: readonly MaskedStretch[],
): Uint8Array {
  const filled = repairs.filter((repair) => repair.kind === 'missing_elevation');
  const out = [...filled, ...masks].sort((a, b) => a.from - b.from);
  const measured = new Uint8Array(distance.length).fill(1);
  let i = 0;
  for (const { from, to } of out) {
    while (i > 0 && distance[i - 1]! >= from) i--;
    while (i < distance.length && distance[i]! < from) i++;
    for (; i < distance.length && distance[i]! <= to; i++) measured[i] = 0;
  }
  return measured;
}

/** A reader's sentence opens with its place on the file's track; on a trimmed or turned road it opens with the driven place. */
function placedAnew(repair: Repair): Repair {
  const [from, to] = [toKm(repair.from).toFixed(3), toKm(repair.to).toFixed(3)];
  const place = from === to ? `At km ${from}` : `From km ${from} to km ${to}`;
  const message = repair.message.replace(/^(?:At km [\d.]+|From km [\d.]+ to km [\d.]+)/, place);
  return { ...repair, message };
}
