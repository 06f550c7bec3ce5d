import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { expect, it } from 'vitest';
import { parse } from 'yaml';
import { type Editable, editCase } from '../../src/case/edit-case.ts';
import { starterCase } from '../../src/case/starter-case.ts';
import type { InputError } from '../../src/problems/input-error.ts';

type Path = (string | number)[];

/** Every place of parsed data that holds a scalar. */
function scalarPaths(value: unknown, path: Path = []): Path[] {
  if (typeof value !== 'object' || value === null) return [path];
  const entries = Array.isArray(value) ? value.map((v, i) => [i, v] as const) : Object.entries(value);
  return entries.flatMap(([key, inner]) => scalarPaths(inner, [...path, key]));
}

/** Parsed data with one place set, by the plain way. */
function set(root: unknown, path: Path, value: unknown): unknown {
  const copy = structuredClone(root) as Record<string | number, unknown>;
  let here = copy;
  for (const step of path.slice(0, -1)) {
    here[step] ??= {};
    here = here[step] as Record<string | number, unknown>;
  }
  here[path.at(-1)!] = value;
  return copy;
}

const TEXTS = [
  readFileSync(new URL('../../routes/harrow-gap.yaml', import.meta.url), 'utf8'),
  readFileSync(new URL('../../routes/vehicles/proving-e.yaml', import.meta.url), 'utf8'),
  starterCase()[0]!.text,
  starterCase()[1]!.text.replaceAll('\n', '\r\n'),
];
const scalar = fc.oneof(
  fc.double({ noNaN: true, noDefaultInfinity: true }).map((x) => (x === 0 ? 0 : x)), // -0 reads as 0
  fc.integer(),
  fc.boolean(),
  fc.string({ unit: 'grapheme', maxLength: 20 }),
  fc.constantFrom(
    '60',
    'yes',
    'null',
    '~',
    'a: b',
    '- x',
    '#c',
    '[1',
    "it's",
    '0x1F',
    '1e3',
    ' a ',
    '*x',
    'a\nb',
  ),
);

it('changes any scalar, and nothing else in the data', () => {
  fc.assert(
    fc.property(fc.constantFrom(...TEXTS), fc.nat(), scalar, (text, pick, value) => {
      const paths = scalarPaths(parse(text));
      const path = paths[pick % paths.length]!;
      expect(parse(editCase(text, path, value))).toEqual(set(parse(text), path, value));
    }),
    { seed: 1, numRuns: 200 },
  );
});

it('keeps every byte before and after the value', () => {
  fc.assert(
    fc.property(fc.constantFrom(...TEXTS), fc.nat(), fc.integer(), (text, pick, value) => {
      const paths = scalarPaths(parse(text));
      const path = paths[pick % paths.length]!;
      // A marker in the value's place shows where it stands, independent of the splice under test.
      const marked = editCase(text, path, 'MARKER');
      const [before, after] = marked.split('MARKER') as [string, string];
      expect(text.startsWith(before) && text.endsWith(after)).toBe(true);
      expect(editCase(text, path, value)).toBe(`${before}${value}${after}`);
      expect(before.length + after.length).toBeLessThan(text.length);
    }),
    { seed: 2, numRuns: 200 },
  );
});

it('puts a missing key into any mapping, keeping all that was written', () => {
  const mappings = (value: unknown, path: Path = []): Path[] =>
    typeof value !== 'object' || value === null
      ? []
      : [
          ...(Array.isArray(value) ? [] : [path]),
          ...Object.entries(value).flatMap(([key, inner]) =>
            mappings(inner, [...path, Array.isArray(value) ? Number(key) : key]),
          ),
        ];
  fc.assert(
    fc.property(fc.constantFrom(...TEXTS), fc.nat(), fc.boolean(), scalar, (text, pick, deep, value) => {
      const paths = mappings(parse(text));
      const path = [...paths[pick % paths.length]!, 'new_key', ...(deep ? ['inner'] : [])];
      const edited = editCase(text, path, value);
      expect(parse(edited)).toEqual(set(parse(text), path, value));
      // What was written is still there in order: the new text with one piece cut out is the old text.
      let start = 0;
      while (start < text.length && text[start] === edited[start]) start++;
      expect(text.slice(start)).toBe(edited.slice(edited.length - (text.length - start)));
    }),
    { seed: 3, numRuns: 200 },
  );
});

it.each<[string, Path, Editable, string]>([
  ['a: 1.0e-2   # keep\nb: 2\n', ['b'], 3, 'a: 1.0e-2   # keep\nb: 3\n'],
  ['a:\nb: 2\n', ['a'], 1, 'a: 1\nb: 2\n'],
  ['a:\n  - 1\n  - 2   # two\n\n# end\nb: 3', ['a', 1], 5, 'a:\n  - 1\n  - 5   # two\n\n# end\nb: 3'],
  ['a: {x: 1}\n', ['a', 'y'], 2, 'a: {x: 1, y: 2}\n'],
  ['a: {}\n', ['a', 'y'], 2, 'a: {y: 2}\n'],
  ['a:\n  x: 1 # one\n# after\nb: 2\n', ['a', 'y'], 2, 'a:\n  x: 1 # one\n  y: 2\n# after\nb: 2\n'],
  ['- {a: 1}\n- {a: 2}\n', [1, 'a'], 3, '- {a: 1}\n- {a: 3}\n'],
  ['a: old\n', ['a'], 'x: y', 'a: "x: y"\n'],
  ['a: [1, 2] # two\nb: 3\n', ['a', 2], 3, 'a: [1, 2, 3] # two\nb: 3\n'],
  [
    'a: [\n  {n: x},\n  {n: y}, # last\n]\n',
    ['a', 2],
    { n: 'z' },
    'a: [\n  {n: x},\n  {n: y}, {n: z}, # last\n]\n',
  ],
  [
    'a:\n- n: x\n  k: 1   # one\n\n# end\nb: 3',
    ['a', 1],
    { n: 'y' },
    'a:\n- n: x\n  k: 1   # one\n- {n: y}\n\n# end\nb: 3',
  ],
  ['a:\r\n    - {n: x}', ['a', 1], { n: 'y' }, 'a:\r\n    - {n: x}\r\n    - {n: y}'],
  ['{"a": [{"n": "x"}]}', ['a', 1], { n: 'y', k: [1] }, '{"a": [{"n": "x"}, {"n":"y","k":[1]}]}'],
  ['{"a": {"n": "x"}}', ['a', 'k'], 'y', '{"a": {"n": "x", "k": "y"}}'],
  ['a: {b: {c: 1}}\n', ['a', 'b'], { d: [1, 'two'] }, 'a: {b: {d: [1, two]}}\n'],
])('edits %j at %j', (text, path, value, expected) => {
  expect(editCase(text, path, value)).toBe(expected);
});

it('appends to any list, keeping all that was written', () => {
  const lists = (value: unknown, path: Path = []): Path[] =>
    typeof value !== 'object' || value === null
      ? []
      : [
          ...(Array.isArray(value) ? [[...path, value.length]] : []),
          ...Object.entries(value).flatMap(([key, inner]) =>
            lists(inner, [...path, Array.isArray(value) ? Number(key) : key]),
          ),
        ];
  fc.assert(
    fc.property(
      fc.constantFrom(...TEXTS.filter((text) => lists(parse(text)).length > 0)),
      fc.nat(),
      scalar,
      (text, pick, value) => {
        const paths = lists(parse(text));
        const path = paths[pick % paths.length]!;
        const edited = editCase(text, path, { added: value as Editable });
        expect(parse(edited)).toEqual(set(parse(text), path, { added: value }));
        let start = 0;
        while (start < text.length && text[start] === edited[start]) start++;
        expect(text.slice(start)).toBe(edited.slice(edited.length - (text.length - start)));
      },
    ),
    { seed: 4, numRuns: 100 },
  );
});

it('undoes by editing back', () => {
  const text = TEXTS[0]!;
  expect(editCase(editCase(text, ['hold', 'set_speed_kmh'], 71), ['hold', 'set_speed_kmh'], 60)).toBe(text);
});

it.each<[string, Path, string]>([
  ['a: &x 5\nb: *x\n', ['a'], 'edit-shared'],
  ['a: &x {c: 5}\nb: *x\n', ['b', 'c'], 'edit-no-place'],
  ['a: [1, 2]\n', ['a', 3], 'edit-no-place'],
  ['a: []\n', ['a', 0], 'edit-no-place'],
  ['a: &x [1, 2]\nb: *x\n', ['a', 2], 'edit-shared'],
  ['a: &x [1, 2]\nb: *x\n', ['b', 2], 'edit-no-place'],
  ['a: 1\n', ['a', 'b'], 'edit-no-place'],
])('refuses %j at %j', (text, path, code) => {
  let error: unknown;
  try {
    editCase(text, path, 7);
  } catch (thrown) {
    error = thrown;
  }
  expect((error as InputError).code).toBe(code);
});
