import { expect, it } from 'vitest';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import type { InputError } from '../../src/problems/input-error.ts';

function refusal(text: string, overrides: readonly string[] = []): InputError['problems'][number] {
  try {
    readCaseFile(text, 'f.yaml', overrides);
  } catch (error) {
    return (error as InputError).problems[0]!;
  }
  return expect.unreachable();
}

it.each([
  ['brackets', '['.repeat(100_000)],
  ['braces', '{a: '.repeat(100_000)],
  ['lists in lists', '- '.repeat(100_000)],
  ['keys of keys', '? '.repeat(100_000)],
  ['anchors', '&a '.repeat(100_000)],
  ['tags', '!a '.repeat(100_000)],
])('refuses a hundred thousand %s in a row near the 500th, before parsing', (_, text) => {
  const { code, place, allowed } = refusal(`title: deep\nroad: ${text}`);
  expect([code, place.line, allowed]).toEqual(['too-deep', 2, 'at most 40 deep']);
  expect(place.column).toBeGreaterThan(500);
  expect(place.column).toBeLessThan(2100);
});

it('does not count what is closed again, nor lists line by line', () => {
  const items = Array.from({ length: 2000 }, () => '  - {name: x, reason: [1, {a: 2}]}').join('\n');
  expect(refusal(`masks:\n${items}\n`).code).not.toBe('too-deep');
  expect(refusal('- a\n'.repeat(2000)).code).toBe('wrong-type');
});

it('refuses the value of an override that is nested too deep', () => {
  const problem = refusal('title: x\n', [`road=${'['.repeat(50_000)}`]);
  expect([problem.code, problem.place.file]).toEqual(['bad-override', '--set road']);
});
