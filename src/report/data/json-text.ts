import { NotFiniteError } from './fixed.ts';

/** Two to four numbers, each on its own line: a raw line feed never stands inside a JSON string. */
const SHORT_ROW = /\[\n\s+(-?[\d.e+-]+(?:,\n\s+-?[\d.e+-]+){1,3})\n\s*\]/g;

/**
 * JSON text with two spaces of indent, short arrays of numbers on one line, and a line feed at the end.
 * JSON has no NaN and no infinity, and `JSON.stringify` would turn them into null without a word: here they throw.
 *
 * @throws NotFiniteError
 */
export function jsonText(value: unknown): string {
  const text = JSON.stringify(
    value,
    (key, member: unknown) => {
      if (typeof member === 'number' && !Number.isFinite(member)) throw new NotFiniteError(key, member);
      return member;
    },
    2,
  );
  return `${text.replace(SHORT_ROW, (_, row: string) => `[${row.replace(/\s+/g, ' ')}]`)}\n`;
}
