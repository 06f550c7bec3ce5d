import { distanceBetween } from './geodesic.ts';
import type { RawTrack } from './raw-track.ts';

/** Horizontal way from raw point `from` to `to` [m]: of the distance column where there is one (signed), else of the positions. */
export function legLength(raw: RawTrack): (from: number, to: number) => number {
  const { distance, latitudeDeg, longitudeDeg } = raw;
  if (distance !== null) return (from, to) => distance[to]! - distance[from]!;
  if (latitudeDeg === null || longitudeDeg === null)
    throw new Error('a raw track has distances or positions');
  return (from, to) =>
    distanceBetween(latitudeDeg[from]!, longitudeDeg[from]!, latitudeDeg[to]!, longitudeDeg[to]!);
}
