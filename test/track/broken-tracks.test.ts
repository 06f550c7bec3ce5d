import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { readTrack } from '../../src/track/read-track.ts';

interface Row {
  readonly file: string;
  readonly code: string;
  readonly says: readonly string[];
}
const folder = new URL('../broken/tracks/', import.meta.url);
const table: readonly Row[] = JSON.parse(readFileSync(new URL('table.json', folder), 'utf8'));

function problemOf(file: string, choice?: string | number): InputError {
  try {
    readTrack({ name: file, bytes: readFileSync(new URL(file, folder)) }, choice);
  } catch (error) {
    if (error instanceof InputError) return error;
    throw error;
  }
  throw new Error(`${file} was read`);
}

describe('a broken track', () => {
  it.each(table.map((row) => [row.file, row] as const))('is refused: %s', (file, { code, says }) => {
    const error = problemOf(file);
    expect([error.code, error.message]).toEqual([code, expect.stringContaining(file)]);
    for (const words of says) expect(error.message).toContain(words);
    expect(error.message).not.toMatch(/\bundefined\b(?! entity)|\[object|NaN m/);
    expect(error.message.split('\n')).toHaveLength(1);
  });

  it('stands in the table, and every row has a file', () => {
    const files = readdirSync(folder).filter((file) => file !== 'table.json');
    expect(table.map((row) => row.file).sort()).toEqual(files.sort());
    expect(table.length).toBeGreaterThan(30);
  });
});

describe('a choice among tracks', () => {
  it.each(['Home', 2, '2'])('can be a name or a number: %j', (choice) => {
    const bytes = readFileSync(new URL('several-tracks.gpx', folder));
    expect(readTrack({ name: 'several-tracks.gpx', bytes }, choice).name).toBe('Home');
  });

  it.each([3, 0, 1.5, 'Away'])('that fits none is refused: %j', (choice) => {
    const error = problemOf('several-tracks.gpx', choice);
    expect(error.code).toBe('no-such-track');
    expect(error.message).toContain("1 'Out' (track, 5 points), 2 'Home'");
  });
});
