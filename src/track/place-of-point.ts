import type { Place } from '../problems/place.ts';
import type { RawTrack } from './raw-track.ts';

/** Where a raw point stands in its file: by line, or by its number (from 1) where the format has no lines. */
export function placeOfPoint(raw: RawTrack, index: number): Place {
  if (raw.line !== null) return { file: raw.file, line: raw.line[index]! };
  return { file: raw.file, key: `point ${index + 1}` };
}
