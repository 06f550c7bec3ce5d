import { type CaseDocument, readCaseFile } from '../case/read-case-file.ts';
import { decodeText } from '../track/decode-text.ts';
import type { Reader } from './input-log.ts';

/** A case with the files that it names, in one piece that a page can carry. */
export interface CarriedCase {
  /** Name of the case among the files. */
  readonly file: string;
  /** By the names that the case has for them, the case first. */
  readonly files: readonly CarriedFile[];
}

/** A file: its text where it is one, so that it can be read where it is carried; else its bytes as UTF-16 code units of one byte each. */
export type CarriedFile =
  | { readonly name: string; readonly text: string }
  | { readonly name: string; readonly bytes: string };

/**
 * @param read gives the bytes of the case and of the files that it names
 * @throws InputError of the reader, and of a case that cannot be read
 */
export function carryCase(file: string, read: Reader): CarriedCase {
  const document = readCaseFile(decodeText(read(file), file), file);
  return { file, files: [file, ...filesNamed(document)].map((name) => carried(name, read(name))) };
}

/** Files that a case names, as written. */
export function filesNamed({ trackFile, vehicleFile, file }: CaseDocument): readonly string[] {
  const names = [trackFile, vehicleFile, ...file.logged_rides.map((ride) => ride.file)];
  return [...new Set(names.filter((name) => name !== null))];
}

/** The bytes of a carried file, those that it was made of. */
export function bytesOf(file: CarriedFile): Uint8Array {
  return 'text' in file
    ? new TextEncoder().encode(file.text)
    : Uint8Array.from(file.bytes, (unit) => unit.charCodeAt(0));
}

/** @returns text only where it gives the very bytes back: a byte order mark or another encoding would be lost */
export function carried(name: string, bytes: Uint8Array): CarriedFile {
  try {
    const text = new TextDecoder('utf-8', { fatal: true, ignoreBOM: true }).decode(bytes);
    return { name, text };
  } catch {
    return { name, bytes: Array.from(bytes, (byte) => String.fromCharCode(byte)).join('') };
  }
}

/** As JSON that can stand in the script element of a page: nothing in it ends the element or begins another. */
export const jsonInPage = (value: unknown): string =>
  JSON.stringify(value).replace(
    /[<\u2028\u2029]/g,
    (c) => `\\u${c.charCodeAt(0).toString(16).padStart(4, '0')}`,
  );

/** What a page begins with: a case, one of its demos by number, or nothing. */
export type Start = { readonly study: CarriedCase } | { readonly demo: number } | null;

/** The element of the page that holds it. */
const START = /(<script type="application\/json" id="start">)[^<]*(<\/script>)/;

/** Whether a text is a page that a case can be put into. */
export const takesStart = (page: string): boolean => START.test(page);

/**
 * The page that begins with something else.
 *
 * @throws RangeError for a text that is no such page
 */
export function withStart(page: string, start: Start): string {
  if (!takesStart(page)) throw new RangeError('this is no page that a case can be put into');
  return page.replace(START, (_, before: string, after: string) => before + jsonInPage(start) + after);
}
