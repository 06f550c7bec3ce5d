import { expect, test } from 'vitest';
import { junitXml } from '../../src/report/junit-xml.ts';
import { fixtureResult } from './fixture.ts';
import { withFixtureMatrix } from './fixture-matrix.ts';

// A requirement that the case itself meets and that is missed two up: the exit status is 1, so the file must be red.
const met = fixtureResult({ requirements: 'met' });
const run = withFixtureMatrix(met, {
  loads: ['own', 'two up'],
  margin: (cell) => (cell === 1 ? -0.5 : 0.5),
});
const count = (text: string, what: RegExp): number => [...text.matchAll(what)].length;

test('each requirement has a case for each combination but the case itself, which it has already', () => {
  const alone = junitXml(met, 'kmh');
  const text = junitXml(run, 'kmh');
  expect(count(alone, /<testcase /g)).toBe(met.requirements.length);
  expect(count(text, /<testcase /g)).toBe(2 * met.requirements.length);
  expect(count(text, /; two up"/g)).toBe(met.requirements.length);
  expect(text).not.toContain('; own"');
});

test('what is missed in a combination alone is a failure there, and counted', () => {
  expect(junitXml(met, 'kmh')).not.toContain('<failure');
  const text = junitXml(run, 'kmh');
  expect(count(text, /<failure /g)).toBe(met.requirements.length);
  expect(text).toContain(`tests="${2 * met.requirements.length}" failures="${met.requirements.length}"`);
});
