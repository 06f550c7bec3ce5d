import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import type { LogKind } from '../../src/identify/log-kind.ts';
import { InputError } from '../../src/problems/input-error.ts';
import { identifyLogs } from '../../src/run/identify-logs.ts';

interface Row {
  readonly file: string;
  readonly code: string;
  readonly says: readonly string[];
  readonly kind?: LogKind;
  /** Held against the demo's vehicle. */
  readonly vehicle?: boolean;
  /** False: none is given. */
  readonly mass?: boolean;
}
const folder = new URL('../broken/logs/', import.meta.url);
const table: readonly Row[] = JSON.parse(readFileSync(new URL('table.json', folder), 'utf8'));
const VEHICLE = '../../../routes/vehicles/proving-125.yaml';

function problemOf({ file, kind, vehicle, mass }: Row): InputError {
  try {
    identifyLogs({
      logs: [file],
      read: (name) => readFileSync(new URL(name, folder)),
      kind,
      vehicle: vehicle === true ? VEHICLE : undefined,
      massKg: mass === false ? undefined : 215,
    });
  } catch (error) {
    if (error instanceof InputError) return error;
    throw error;
  }
  throw new Error(`${file} was read`);
}

describe('a broken or thin log', () => {
  it.each(table.map((row) => [row.file, row] as const))('is refused: %s', (file, row) => {
    const error = problemOf(row);
    expect([error.code, error.message]).toEqual([row.code, expect.stringContaining(file)]);
    for (const words of row.says) expect(error.message).toContain(words);
    expect(error.message).not.toMatch(/\bundefined\b|\[object|NaN/);
    for (const { found, allowed } of error.problems)
      expect([found, allowed].some((words) => words !== undefined && words !== '')).toBe(true);
  });

  it('stands in the table, and every row has a file', () => {
    const files = readdirSync(folder).filter((file) => file !== 'table.json');
    expect(table.map((row) => row.file).sort()).toEqual(files.sort());
  });
});
