import { basename, dirname, isAbsolute, join } from 'node:path';
import { InputError } from '../problems/input-error.ts';
import type { Place } from '../problems/place.ts';
import { readBytes } from './read-files.ts';

/** Reads the files of a case, and brings their names in messages back to where the user stands. */
export interface CaseReader {
  /** The case by its name alone: what the library calls it. */
  readonly file: string;
  /** Reads a file named relative to the folder of the case. */
  readonly read: (name: string) => Uint8Array;
  /** A place in one of the files read, named as seen from the working folder. */
  readonly seen: (place: Place) => Place;
  /** Does some work; what it refuses is told with names as seen from the working folder. */
  readonly telling: <T>(work: () => T) => T;
}

/** @param path of the case or track, as the user typed it */
export function readerOf(path: string): CaseReader {
  const folder = dirname(path);
  const names = new Set<string>();
  const from = (name: string): string => (isAbsolute(name) ? name : join(folder, name));
  const seen = (place: Place): Place =>
    place.file !== undefined && names.has(place.file) ? { ...place, file: from(place.file) } : place;
  return {
    file: basename(path),
    read: (name) => {
      names.add(name);
      return readBytes(from(name), name);
    },
    seen,
    telling: (work) => {
      try {
        return work();
      } catch (error) {
        if (!(error instanceof InputError)) throw error;
        const [first, ...others] = error.problems.map((each) => ({ ...each, place: seen(each.place) }));
        throw first === undefined ? error : new InputError(first, ...others);
      }
    },
  };
}
