import { InputError } from '../problems/input-error.ts';
import { chooseTrack } from './choose-track.ts';
import { cleanTrack } from './clean-track.ts';
import { decodeText } from './decode-text.ts';
import { lineOf } from './line-of.ts';
import type { RawTrack } from './raw-track.ts';
import { readCsv } from './read-csv.ts';
import { readGeoJson } from './read-geojson.ts';
import { readGpx } from './read-gpx.ts';
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

function readRaw(name: string, bytes: Uint8Array, choice: string | number | undefined): RawTrack {
  const ending = /\.[^./\\]*$/.exec(name)?.[0].toLowerCase() ?? '';
  const allowed = '.gpx, .csv, .geojson, .json';
  if (!allowed.split(', ').includes(ending))
    throw new InputError({
      code: 'unknown-format',
      place: { file: name },
      message: 'the file ending is not that of a track',
      found: ending === '' ? 'no ending' : `'${ending}'`,
      allowed,
    });
  const text = decodeText(bytes, name);
  if (/^\s*<(!doctype\s+)?html[\s>]/i.test(text))
    throw new InputError({
      code: 'html-page',
      place: { file: name, line: 1 },
      message: 'this is a web page, not a track',
      found: 'HTML',
      allowed: ending.slice(1).toUpperCase(),
    });
  const begin = text.search(/\S/);
  if (ending === '.gpx' && begin >= 0 && text[begin] !== '<')
    throw new InputError({
      code: 'not-gpx',
      place: { file: name, ...lineOf(text, begin) },
      message: 'this is no GPX, which begins with a <, whatever the ending says',
      found: `'${text.slice(begin, begin + 40).split(/[\r\n]/)[0]}'`,
      allowed: 'GPX, or the ending of what it is: .csv, .geojson',
    });
  if (ending === '.gpx') return readGpx(text, name, choice);
  if (ending !== '.csv') return readGeoJson(text, name, choice);
  const raw = readCsv(text, name);
  chooseTrack([{ name: null, what: 'table', points: raw.size }], choice, name);
  return raw;
}
