import { InputError } from '../problems/input-error.ts';
import { lineOf } from './line-of.ts';

/** Largest file that is read [bytes]: half a million GPX points with elevation and time are 51 MB. */
export const LARGEST_FILE = 64 * 1024 * 1024;

/**
 * Decodes the bytes of a text file: by its byte order mark, else by the `encoding=` of an XML declaration,
 * else as UTF-8; strictly, so that a wrong byte is refused and never replaced.
 *
 * @param bytes the whole file, 1 byte to 64 MiB
 * @param name file name for messages
 * @returns the text without byte order mark
 * @throws InputError `empty-file`, `file-too-large`, `compressed-file`, `unknown-encoding`, `wrong-encoding`
 *   (with the line of the first wrong byte), `binary-file`
 */
export function decodeText(bytes: Uint8Array, name: string): string {
  const place = { file: name };
  if (bytes.length === 0)
    throw new InputError({ code: 'empty-file', place, message: 'the file is empty', found: '0 bytes' });
  if (bytes.length > LARGEST_FILE) {
    const found = `${(bytes.length / 1024 / 1024).toFixed(0)} MiB`;
    throw new InputError({
      code: 'file-too-large',
      place,
      message: 'the file is too large',
      found,
      allowed: '64 MiB',
    });
  }
  const packed = compression(bytes);
  if (packed !== null)
    throw new InputError({
      code: 'compressed-file',
      place,
      message: 'the file is compressed; unpack it first',
      found: packed,
      allowed: 'plain text',
    });
  const label = encodingOf(bytes);
  let decoder: TextDecoder;
  try {
    decoder = new TextDecoder(label, { fatal: true });
  } catch {
    const message = 'the encoding in the XML declaration is not known';
    throw new InputError({ code: 'unknown-encoding', place, message, found: `'${label}'`, allowed: 'utf-8' });
  }
  let text: string;
  try {
    text = decoder.decode(bytes);
  } catch {
    throw new InputError({
      code: 'wrong-encoding',
      place: { ...place, ...wrongLine(bytes, label) },
      message: `the bytes are not ${label} text`,
      allowed: 'UTF-8, a byte order mark, or the right encoding= in the XML declaration',
    });
  }
  const zero = text.indexOf('\0');
  if (zero >= 0)
    throw new InputError({
      code: 'binary-file',
      place: { ...place, ...lineOf(text, zero) },
      message: 'the file holds a zero character and is not text',
      allowed: 'plain text',
    });
  if (text.trim() === '')
    throw new InputError({ code: 'empty-file', place, message: 'the file is empty', found: 'only blanks' });
  return text;
}

function compression(bytes: Uint8Array): string | null {
  const [a, b] = bytes;
  if (a === 0x1f && b === 0x8b) return 'gzip';
  if (a === 0x50 && b === 0x4b) return 'zip';
  return null;
}

function encodingOf(bytes: Uint8Array): string {
  const [a, b, c] = bytes;
  if (a === 0xef && b === 0xbb && c === 0xbf) return 'utf-8';
  if (a === 0xff && b === 0xfe) return 'utf-16le';
  if (a === 0xfe && b === 0xff) return 'utf-16be';
  let head = '';
  for (let i = 0; i < Math.min(bytes.length, 200); i++) head += String.fromCharCode(bytes[i]!);
  const declared = /^\s*<\?xml[^>]*?\sencoding\s*=\s*["']([^"']*)["']/.exec(head)?.[1];
  return declared === undefined ? 'utf-8' : declared.toLowerCase();
}

/** The line of the first byte that UTF-8 does not allow; nothing for other encodings. */
function wrongLine(bytes: Uint8Array, label: string): { line?: number } {
  if (label !== 'utf-8' && label !== 'utf8') return {};
  const decoder = new TextDecoder('utf-8', { fatal: true });
  let start = 0;
  for (let line = 1; start < bytes.length; line++) {
    const end = bytes.indexOf(0x0a, start);
    const stop = end < 0 ? bytes.length : end + 1;
    try {
      decoder.decode(bytes.subarray(start, stop));
    } catch {
      return { line };
    }
    start = stop;
  }
  return {};
}
