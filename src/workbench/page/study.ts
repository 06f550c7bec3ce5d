import { carried } from '../../run/carried-case.ts';
import { decodeText } from '../../track/decode-text.ts';

/** A file as it stands at one moment. Never changed: another content is another number. */
export interface StudyFile {
  readonly name: string;
  /** Tells contents apart. */
  readonly content: number;
  readonly bytes: Uint8Array;
}

/** A case and its files, by the names that the case has for them. Never changed: an edit makes another one. */
export interface Study {
  /** Name of the case among the files. */
  readonly file: string;
  readonly files: readonly StudyFile[];
}

let contents = 0;

export const studyFile = (name: string, bytes: Uint8Array): StudyFile => ({
  name,
  content: ++contents,
  bytes,
});

export const fileOf = (study: Study, name: string): StudyFile | undefined =>
  study.files.find((file) => file.name === name);

/** @throws InputError for what is no text */
export function textOf(study: Study, name: string): string {
  const file = fileOf(study, name);
  return file === undefined ? '' : decodeText(file.bytes, name);
}

/** The same study with another content of a file, or with one more file. */
export function withFile(study: Study, name: string, bytes: Uint8Array): Study {
  const file = studyFile(name, bytes);
  const known = fileOf(study, name) !== undefined;
  const files = known ? study.files.map((one) => (one.name === name ? file : one)) : [...study.files, file];
  return { ...study, files };
}

export const withText = (study: Study, name: string, text: string): Study =>
  withFile(study, name, new TextEncoder().encode(text));

/** What a page would carry of a study. */
export const carriedStudy = ({ file, files }: Study) => ({
  file,
  files: files.map(({ name, bytes }) => carried(name, bytes)),
});
