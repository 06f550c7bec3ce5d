import { type CsvVocabulary, TRACK_VOCABULARY, type TrackField } from './csv-columns.ts';
import { readCsvTable } from './csv-table.ts';
import type { RawTrack } from './raw-track.ts';

/**
 * Reads a CSV track: see readCsvTable for what such a file looks like.
 *
 * @param text the decoded file
 * @param file name for messages
 * @param vocabulary of a track, or of a ride
 * @returns the points as the file gives them; empty cells NaN, words for no number Infinity
 * @throws InputError of readCsvTable
 */
export function readCsv(
  text: string,
  file: string,
  vocabulary: CsvVocabulary<TrackField> = TRACK_VOCABULARY,
): RawTrack {
  const { size, line, numbers } = readCsvTable(text, file, vocabulary);
  return {
    file,
    name: null,
    format: 'csv',
    size,
    line,
    segment: new Int32Array(size),
    distance: numbers('distance'),
    latitudeDeg: numbers('latitudeDeg'),
    longitudeDeg: numbers('longitudeDeg'),
    elevation: numbers('elevation'),
    grade: numbers('grade'),
    heading: numbers('heading'),
    headwind: numbers('headwind'),
    time: numbers('time'),
    speed: numbers('speed'),
    throttle: numbers('throttle'),
  };
}
