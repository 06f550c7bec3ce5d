import type * as z from 'zod';
import type { caseSchema } from './case-schema.ts';
import type { Rule, RuleFault } from './check-file.ts';
import { MOST_COMBINATIONS } from './matrix-schema.ts';

type CaseInput = z.input<typeof caseSchema>;
type MatrixInput = NonNullable<CaseInput['matrix']>;

const LISTS = ['loads', 'winds', 'directions', 'gears', 'set_speeds_kmh'] as const;
type List = (typeof LISTS)[number];

/** What no single field of a matrix can say. */
export const matrixRules: readonly Rule<CaseInput>[] = [
  { about: ['matrix'], check: ({ matrix }) => (matrix === undefined ? [] : size(matrix)) },
  {
    about: ['matrix'],
    check: ({ matrix }) => (matrix === undefined ? [] : LISTS.flatMap((list) => doubledItems(matrix, list))),
  },
  // Those that look at other keys too wait until the whole file has passed the schema.
  {
    about: [],
    check: ({ matrix, requirements }) =>
      matrix === undefined || (requirements ?? []).length > 0
        ? []
        : [
            {
              path: ['matrix'],
              code: 'nothing-to-judge',
              message: 'there is no requirement that the combinations could be judged by',
              allowed: 'a matrix beside at least one of requirements',
            },
          ],
  },
  { about: [], check: ({ matrix, track }) => (matrix === undefined ? [] : oneWay(matrix, track)) },
  {
    about: [],
    check: ({ matrix, track, hold }) =>
      matrix === undefined ? [] : turnedByTime(matrix, track, hold.changes ?? []),
  },
  {
    about: [],
    check: ({ matrix, track, rider, faults }) =>
      matrix === undefined
        ? []
        : turnedActs(matrix, track, [
            ['rider.does', rider?.does ?? []],
            ['faults', faults ?? []],
          ]),
  },
];

function size(matrix: MatrixInput): RuleFault[] {
  const given = LISTS.filter((list) => matrix[list] !== undefined);
  if (given.length === 0)
    return [
      {
        path: ['matrix'],
        code: 'missing-key',
        message: 'has no list',
        allowed: `at least one of ${LISTS.join(', ')}`,
      },
    ];
  const count = given.reduce((product, list) => product * (matrix[list]?.length ?? 1), 1);
  if (count <= MOST_COMBINATIONS) return [];
  return [
    {
      path: ['matrix'],
      code: 'too-many-combinations',
      message: 'has too many combinations',
      found: `${given.map((list) => `${matrix[list]?.length} ${list}`).join(' x ')} = ${count}`,
      allowed: `at most ${MOST_COMBINATIONS}`,
    },
  ];
}

type Item = NonNullable<MatrixInput[List]>[number];

/** A combination that stands twice would be counted twice; a name that stands twice tells nothing apart. */
function doubledItems(matrix: MatrixInput, list: List): RuleFault[] {
  const items: readonly Item[] = matrix[list] ?? [];
  const nameOf = (item: Item): string => (typeof item === 'object' ? (item.name ?? '') : String(item));
  const partsOf = (item: Item): string =>
    typeof item === 'object'
      ? JSON.stringify(Object.entries({ ...item, name: '' }).sort(([a], [b]) => (a < b ? -1 : 1)))
      : String(item);
  return items.flatMap((item, i): RuleFault[] => {
    const before = items.slice(0, i);
    const sameParts = before.some((other) => partsOf(other) === partsOf(item));
    const sameName = nameOf(item) !== '' && before.some((other) => nameOf(other) === nameOf(item));
    if (!sameParts && !sameName) return [];
    return [
      {
        path: ['matrix', list, i],
        code: 'doubled-item',
        message: sameParts ? 'stands in the list already' : 'its name is taken already',
        found: nameOf(item) === '' ? 'the same values again' : nameOf(item),
        allowed: 'each item once',
      },
    ];
  });
}

function oneWay({ directions }: MatrixInput, { direction }: CaseInput['track']): RuleFault[] {
  if (directions === undefined || direction !== 'both') return [];
  return [
    {
      path: ['matrix', 'directions'],
      code: 'keys-exclude',
      message: 'goes one way, and the run of the case goes there and back in one drive',
      found: 'track.direction: both',
      allowed: 'track.direction: there or back, or no directions',
    },
  ];
}

/** Driven the other way, a change at a time has no place to be at. */
function turnedByTime(
  { directions = [] }: MatrixInput,
  { direction = 'there' }: CaseInput['track'],
  changes: readonly object[],
): RuleFault[] {
  const other = directions.findIndex((one) => one !== direction);
  if (other < 0 || !changes.some((change) => 'at_s' in change)) return [];
  return [
    {
      path: ['matrix', 'directions', other],
      code: 'keys-exclude',
      message: 'is the other way than the case goes, and its set speed changes at a time, not at a place',
      found: String(directions[other]),
      allowed: `${direction}, or hold.changes with at_km`,
    },
  ];
}

/** Driven the other way, what the rider does in an order, and what befalls the sensor, has no order to be done in. */
function turnedActs(
  { directions = [] }: MatrixInput,
  { direction = 'there' }: CaseInput['track'],
  lists: readonly (readonly [key: string, items: readonly object[]])[],
): RuleFault[] {
  const other = directions.findIndex((one) => one !== direction);
  const written = lists.find(([, items]) => items.length > 0);
  if (other < 0 || written === undefined) return [];
  return [
    {
      path: ['matrix', 'directions', other],
      code: 'keys-exclude',
      message: `is the other way than the case goes, and ${written[0]} is written for one way`,
      found: String(directions[other]),
      allowed: `${direction}, or no ${written[0]}`,
    },
  ];
}
