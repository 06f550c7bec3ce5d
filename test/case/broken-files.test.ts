import { readdirSync, readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { matrixOf } from '../../src/case/matrix-of.ts';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { tuneOf } from '../../src/case/tune-of.ts';
import { vehicleOf } from '../../src/case/vehicle-of.ts';
import { vehicleOfCase } from '../../src/case/vehicle-of-case.ts';
import { InputError } from '../../src/problems/input-error.ts';

interface Row {
  readonly file: string;
  readonly code: string;
  /** Line of the first problem; null: only that it has one. */
  readonly line: number | null;
  readonly says: readonly string[];
}

/** A file as a run takes it: read, and brought to SI with what it holds. */
const READERS = {
  cases: (text: string, file: string) => {
    const document = readCaseFile(text, file);
    if (document.vehicle === null) return;
    vehicleOfCase(document, document.vehicle);
    matrixOf(document, document.vehicle);
    tuneOf(document, document.vehicle);
  },
  vehicles: (text: string, file: string) => {
    vehicleOf(readVehicleFile(text, file));
  },
};

for (const [folder, read] of Object.entries(READERS)) {
  const root = new URL(`../broken/${folder}/`, import.meta.url);
  const table = JSON.parse(readFileSync(new URL('table.json', root), 'utf8')) as Row[];

  it(`lists every broken file of ${folder}`, () => {
    const files = readdirSync(root).filter((name) => name !== 'table.json');
    expect(table.map(({ file }) => file).sort()).toEqual(files.sort());
  });

  it.each(table)(`refuses ${folder}/$file`, ({ file, code, line, says }) => {
    let error: unknown;
    try {
      read(readFileSync(new URL(file, root), 'utf8'), file);
    } catch (thrown) {
      error = thrown;
    }
    expect(error).toBeInstanceOf(InputError);
    const { problems, message } = error as InputError;
    expect(problems[0]?.code).toBe(code);
    expect(problems[0]?.place.file).toBe(file);
    if (line === null) expect(problems[0]?.place.line).toBeGreaterThan(0);
    else expect(problems[0]?.place.line).toBe(line);
    for (const words of says) expect(message).toContain(words);
  });
}
