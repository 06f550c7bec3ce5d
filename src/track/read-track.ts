import { cleanTrack } from './clean-track.ts';
import { readRaw } from './read-raw.ts';
import type { Track } from './track.ts';

/**
 * Reads a track file, chosen by the ending of its name: `.gpx`, `.csv`, `.geojson` or `.json`, and repairs what is
 * safe to repair; every repair is in the result.
 *
 * @param file name (for the ending and for messages) and whole content
 * @param choice name or number (from 1) where the file has several tracks or routes
 * @returns the track, at least 3 points (2 rows of a table of distances) and 50 m long, with elevation or grade
 * @throws InputError for what cannot be read or safely repaired, with the place in the file; see decodeText,
 *   readGpx, readCsv, readGeoJson, cleanTrack; `unknown-format` for another ending, `html-page` for a web page, `not-gpx`
 */
export function readTrack(
  file: { readonly name: string; readonly bytes: Uint8Array },
  choice?: string | number,
): Track {
  return cleanTrack(readRaw(file.name, file.bytes, choice));
}
