import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { SaxesParser } from 'saxes';
import { beforeAll, expect, test } from 'vitest';
import { CASE, filesBelow, ridgehold, temporaryFolder, VEHICLE, writeFiles } from './start-program.ts';

// What the widely used schema of JUnit XML allows, element by element (from memory): attributes that must and may be
// there, and the children in their order.
const SHAPE: Readonly<Record<string, { must: string[]; may: string[]; children: RegExp }>> = {
  testsuites: {
    must: [],
    may: ['name', 'time', 'tests', 'failures', 'disabled', 'errors'],
    children: /^(testsuite )*$/,
  },
  testsuite: {
    must: ['name', 'tests'],
    may: ['failures', 'errors', 'time', 'disabled', 'skipped', 'timestamp', 'hostname', 'id', 'package'],
    children: /^(properties )?(testcase )*(system-out )?(system-err )?$/,
  },
  properties: { must: [], may: [], children: /^(property )+$/ },
  property: { must: ['name', 'value'], may: [], children: /^$/ },
  testcase: {
    must: ['name', 'classname'],
    may: ['assertions', 'time', 'status'],
    children: /^(skipped |error |failure )?$/,
  },
  skipped: { must: [], may: ['message'], children: /^$/ },
  error: { must: [], may: ['type', 'message'], children: /^$/ },
  failure: { must: [], may: ['type', 'message'], children: /^$/ },
};

interface Element {
  readonly name: string;
  readonly attributes: Readonly<Record<string, string>>;
  readonly children: Element[];
  text: string;
}

/** The document's element, each checked against SHAPE; throws where the text is no XML. */
function parsed(text: string): Element {
  const root: Element = { name: '', attributes: {}, children: [], text: '' };
  const open = [root];
  const parser = new SaxesParser();
  parser.on('error', (error) => {
    throw error;
  });
  parser.on('opentag', ({ name, attributes }) => {
    const element = { name, attributes, children: [], text: '' };
    open.at(-1)!.children.push(element);
    open.push(element);
  });
  parser.on('text', (words) => {
    open.at(-1)!.text += words;
  });
  parser.on('closetag', () => {
    const { name, attributes, children } = open.pop()!;
    const shape = SHAPE[name];
    expect(shape, `element ${name}`).toBeDefined();
    expect(children.map((child) => `${child.name} `).join('')).toMatch(shape!.children);
    expect(Object.keys(attributes)).toEqual(expect.arrayContaining(shape!.must));
    expect([...shape!.must, ...shape!.may]).toEqual(expect.arrayContaining(Object.keys(attributes)));
  });
  parser.write(text).close();
  return root.children[0]!;
}

const below = (element: Element, name: string): Element[] =>
  element.children.flatMap((child) => [...(child.name === name ? [child] : []), ...below(child, name)]);

const here = temporaryFolder();
// An odd title, as a hand might write it; a requirement that is met, one that is not, one that no place can answer.
const asked = `${CASE.replace('One hill', '\'One <"hill"> & more\'')}requirements:
  - {id: T-1, figure: worst_low_kmh, at_least: -60, where: all}
  - {id: T-2, figure: worst_low_kmh, at_least: -0.1, where: all}
  - {id: T-3, figure: fuel_l_per_100km, at_most: 3, where: all}
`;
writeFiles(here, { 'hill.yaml': asked, 'vehicle.yaml': VEHICLE });
const run = (...more: string[]) => ridgehold(here, ['run', 'hill.yaml', '-o', 'out', '--quiet', ...more]);

let suites: Element;
beforeAll(() => {
  const { status, stderr } = run('--junit', 'reports/hold.xml');
  expect([status, stderr]).toEqual([1, '']);
  suites = parsed(readFileSync(join(here, 'reports/hold.xml'), 'utf8'));
});

test('there is one suite a judged candidate and one case a requirement, and their counts are right', () => {
  expect(suites.name).toBe('testsuites');
  expect(suites.attributes).toEqual({
    name: 'ridgehold: One <"hill"> & more',
    tests: '3',
    failures: '1',
    errors: '1',
  });
  const [suite, ...others] = suites.children;
  expect(others).toEqual([]);
  expect(suite!.attributes).toEqual({ name: 'pi-20s', tests: '3', failures: '1', errors: '1', skipped: '0' });
  const cases = below(suites, 'testcase');
  expect(cases.map(({ attributes }) => attributes.name!.split(' ')[0])).toEqual(['T-1', 'T-2', 'T-3']);
  expect(cases.map(({ attributes }) => attributes.classname)).toEqual(Array(3).fill('hill.pi-20s'));
});

test('a failure tells measured value, limit, margin and place, and an error its reason', () => {
  const [met, failed, open] = below(suites, 'testcase');
  expect(met!.children).toEqual([]);
  const failure = failed!.children[0]!;
  expect(failure.name).toBe('failure');
  expect(failure.attributes.type).toBe('not met');
  expect(failure.attributes.message).toMatch(
    /^not met: measured −\d+\.\d\skm\/h, asked at least −0\.1\skm\/h, margin −\d+\.\d\skm\/h, worst at km\s0\.\d\d$/,
  );
  expect(failure.text).toContain('pi-20s: furthest below');
  const error = open!.children[0]!;
  expect([error.name, error.attributes.type]).toEqual(['error', 'not judged']);
  expect(error.attributes.message).toMatch(/^not judged: .*fuel/);
});

test('what is too close to call is skipped, as it does not count against the run', () => {
  // An uncertain climb through the limit: its standard deviation spans the worst error.
  const points = Array.from({ length: 241 }, (_, i) => {
    const x = i * 10;
    const height = 100 + 5 * Math.sin(x / 190) + (x > 1200 ? (x - 1200) * 0.03 : 0);
    return `${x},${height.toFixed(2)}`;
  });
  const uncertain = asked
    .replace(/track: .*/, 'track: {file: climb.csv}\nroad: {elevation_source: dem90}')
    .replace(
      /requirements:[\s\S]*/,
      'requirements:\n  - {id: T-4, figure: worst_low_kmh, at_least: LIMIT, where: all}\n',
    );
  writeFiles(here, { 'climb.csv': `distance_m,elevation_m\n${points.join('\n')}\n` });
  const judge = (limit: number) => {
    writeFiles(here, { 'climb.yaml': uncertain.replace('LIMIT', limit.toFixed(3)) });
    const { status, stdout } = ridgehold(here, [
      'run',
      'climb.yaml',
      '-o',
      'climb',
      '--json',
      '--quiet',
      '--junit',
      'climb.xml',
    ]);
    return { status, ...JSON.parse(stdout).requirements[0] };
  };
  const { measured } = judge(-50);
  expect(measured).toBeLessThan(0);
  const found = judge(measured + 1e-3);
  expect([found.verdict, found.status]).toEqual(['too close to call', 0]);
  const [only] = below(parsed(readFileSync(join(here, 'climb.xml'), 'utf8')), 'testcase');
  expect(only!.children[0]!.name).toBe('skipped');
  expect(only!.children[0]!.attributes.message).toMatch(/^too close to call: measured/);
});

test('the same case gives the same bytes, no time among them, and an earlier file is written over', () => {
  const before = readFileSync(join(here, 'reports/hold.xml'), 'utf8');
  expect(before).not.toMatch(/time(stamp)?=/);
  expect(run('--junit', 'reports/hold.xml').status).toBe(1);
  expect(readFileSync(join(here, 'reports/hold.xml'), 'utf8')).toBe(before);
  expect(readdirSync(join(here, 'reports'))).toEqual(['hold.xml']);
});

test('it may stand in the folder of the result, where a later run leaves it', () => {
  expect(run('--junit', 'out/junit.xml').status).toBe(1);
  expect(run().status).toBe(1);
  expect(existsSync(join(here, 'out/junit.xml'))).toBe(true);
});

test.each([
  ['notes.xml', 'notes.xml: would be written over, and no earlier run wrote it'],
  ['out/summary.json', "--junit cannot be 'out/summary.json'"],
  ['folder.xml', 'folder.xml: cannot be written: a folder stands in place of the file'],
  ['notes.xml/hold.xml', 'is a file, not a folder'],
])('--junit %s is refused before the work, and nothing is changed', (file, words) => {
  writeFiles(here, { 'notes.xml': '<mine/>', 'folder.xml/inner.txt': 'mine' });
  const before = filesBelow(here);
  const { status, stdout, stderr } = run('--junit', file, '--set', 'hold.set_speed_kmh=50');
  expect(stderr).toContain(words);
  expect([status, stdout]).toEqual([2, '']);
  expect(filesBelow(here)).toEqual(before);
});
