import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex } from '@noble/hashes/utils.js';
import { InputError } from '../problems/input-error.ts';
import type { Place } from '../problems/place.ts';
import type { InputFile } from './run-result.ts';

/** Gives the bytes of a file by the name that a case has for it, relative to the case. */
export type Reader = (name: string) => Uint8Array;

/** Reads files for a run and notes which: name, length, SHA-256 (FIPS 180-4). */
export class InputLog {
  readonly files: InputFile[] = [];
  private readonly reader: Reader;

  constructor(reader: Reader) {
    this.reader = reader;
  }

  /**
   * @param name as written in the case
   * @param namedAt where the case names it: said beside what the reader refuses
   * @throws InputError of the reader
   */
  read(name: string, namedAt?: Place): Uint8Array {
    let bytes: Uint8Array;
    try {
      bytes = this.reader(name);
    } catch (error) {
      if (!(error instanceof InputError) || namedAt === undefined) throw error;
      const [first, ...others] = error.problems.map((problem) => ({
        ...problem,
        place: namedAt,
        message: `'${problem.place.file ?? name}' ${problem.message}`,
      }));
      throw first === undefined ? error : new InputError(first, ...others);
    }
    this.files.push({ name: withoutFolders(name), sha256: bytesToHex(sha256(bytes)), bytes: bytes.length });
    return bytes;
  }
}

/** An absolute path says where somebody's files are: results carry its last part only. */
function withoutFolders(name: string): string {
  return /^(?:[\\/]|[A-Za-z]:)/.test(name) ? (name.split(/[\\/]/).at(-1) ?? name) : name;
}
