import { afterEach, expect, test, vi } from 'vitest';
import { tellFailure } from '../../src/cli/tell-failure.ts';
import { InputError } from '../../src/problems/input-error.ts';
import { NotFiniteError } from '../../src/report/data/fixed.ts';

const said: string[] = [];
vi.spyOn(process.stderr, 'write').mockImplementation((text) => {
  said.push(String(text));
  return true;
});
afterEach(() => {
  said.length = 0;
  vi.unstubAllEnvs();
});

test('refused input has a line for each problem and status 2', () => {
  const place = { file: 'a.yaml', line: 3, column: 5, key: 'road.grid' };
  const problem = { code: 'unknown-key', place, message: 'is no key', found: 'grid', allowed: 'grid_m' };
  expect(tellFailure(new InputError(problem, problem))).toBe(2);
  expect(said).toEqual(
    Array(2).fill('error: a.yaml:3:5: road.grid: is no key (found grid; allowed: grid_m)\n'),
  );
});

test('a number that is not finite is a numerical failure: status 3', () => {
  expect(tellFailure(new NotFiniteError('speed_kmh, row 7', Number.NaN))).toBe(3);
  expect(said.join('')).toContain('speed_kmh, row 7 is NaN');
});

test('anything else is a fault of the program: status 70, its trace only when asked for', () => {
  vi.stubEnv('RIDGEHOLD_DEBUG', undefined);
  expect(tellFailure(new TypeError('x is not a function'))).toBe(70);
  expect(said.join('')).toMatch(/TypeError: x is not a function\nPlease report it/);
  expect(said.join('')).not.toContain('tell-failure.test.ts');
  vi.stubEnv('RIDGEHOLD_DEBUG', '1');
  expect(tellFailure(new TypeError('x is not a function'))).toBe(70);
  expect(said.join('')).toContain('tell-failure.test.ts');
  expect(tellFailure('a bare string')).toBe(70);
});
