import { InputError } from '../problems/input-error.ts';
import { chooseTrack } from './choose-track.ts';
import { type CsvVocabulary, TRACK_VOCABULARY, type TrackField } from './csv-columns.ts';
import { decodeText } from './decode-text.ts';
import { lineOf } from './line-of.ts';
import type { RawTrack } from './raw-track.ts';
import { readCsv } from './read-csv.ts';
import { readGeoJson } from './read-geojson.ts';
import { readGpx } from './read-gpx.ts';

/**
 * Reads the points of a file as it gives them, by the ending of its name.
 *
 * @param choice name or number (from 1) where the file has several tracks or routes
 * @param vocabulary columns of a CSV file
 * @throws InputError of decodeText and of the readers; `unknown-format`, `html-page`, `not-gpx`
 */
export function readRaw(
  name: string,
  bytes: Uint8Array,
  choice: string | number | undefined,
  vocabulary: CsvVocabulary<TrackField> = TRACK_VOCABULARY,
): RawTrack {
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
  const raw = readCsv(text, name, vocabulary);
  chooseTrack([{ name: null, what: 'table', points: raw.size }], choice, name);
  return raw;
}
