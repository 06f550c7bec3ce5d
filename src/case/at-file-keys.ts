import { InputError, type Problem } from '../problems/input-error.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';
import { type Path, placeOf } from './yaml-source.ts';

/**
 * Runs a compiler of `vehicle/`, which knows its own SI keys only: what it refuses is told with file, line and column
 * of the key of the file. The rules of the file come first; this is for what they leave.
 *
 * @param part of the vehicle that is compiled
 * @param keys of the file below that part, by the first word of the key of the specification; the part itself for any other
 */
export function atFileKeys<T>(
  { source, at }: VehicleDocument,
  part: string,
  keys: Readonly<Record<string, Path>>,
  compile: () => T,
): T {
  try {
    return compile();
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    const [first, ...others] = error.problems.map((problem): Problem => {
      const key = problem.place.key?.split(/[.[]/)[0] ?? '';
      const path = Object.hasOwn(keys, key) ? (keys[key] ?? []) : [];
      return { ...problem, place: placeOf(source, [...at, part, ...path]) };
    });
    throw first === undefined ? error : new InputError(first, ...others);
  }
}
