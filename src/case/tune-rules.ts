import type * as z from 'zod';
import type { caseSchema } from './case-schema.ts';
import type { Rule, RuleFault } from './check-file.ts';
import { upwards } from './place-rules.ts';
import type { Path } from './yaml-source.ts';

type CaseInput = z.input<typeof caseSchema>;

const LISTS = ['speeds_kmh', 'grades_pct', 'headwinds_m_s', 'gears', 'designs'] as const;

/** What no single field of `tune` can say. */
export const tuneRules: readonly Rule<CaseInput>[] = [
  {
    about: ['tune'],
    check: ({ tune }) =>
      tune === undefined
        ? []
        : [
            ...LISTS.flatMap((list) => doubled<string | number>(tune[list] ?? [], ['tune', list])),
            ...doubled((tune.loads ?? []).map(loadKey), ['tune', 'loads']),
            ...doubled(
              (tune.cost ?? []).map(({ figure, where = 'all' }) =>
                where === 'all' ? figure : `${figure} ${whereKey(where)}`,
              ),
              ['tune', 'cost'],
            ),
            ...(tune.cost ?? []).flatMap(({ where }, i) =>
              typeof where === 'object' ? upwards(where, ['tune', 'cost', i, 'where']) : [],
            ),
          ],
  },
  { about: [], check: ({ tune, candidates }) => likeFaults(tune?.like, candidates) },
];

const loadKey = (load: string | object): string =>
  typeof load === 'string' ? load : JSON.stringify(Object.entries(load).sort(([a], [b]) => (a < b ? -1 : 1)));

const whereKey = (where: string | { readonly from_km: number; readonly to_km: number }): string =>
  typeof where === 'string' ? where : `from ${where.from_km} to ${where.to_km} km`;

function doubled<T extends string | number>(items: readonly T[], path: Path): RuleFault[] {
  return items.flatMap((item, i): RuleFault[] =>
    items.indexOf(item) === i
      ? []
      : [
          {
            path: [...path, i],
            code: 'doubled-item',
            message: 'stands in the list already',
            found: String(item).startsWith('[') ? 'the same values again' : String(item),
            allowed: 'each item once',
          },
        ],
  );
}

function likeFaults(like: string | undefined, candidates: CaseInput['candidates']): RuleFault[] {
  if (like === undefined) return [];
  const usable = candidates.filter(({ kind }) => kind === 'pi' || kind === 'pid');
  const names = usable.map(({ name, kind }) => name ?? kind);
  if (names.includes(like)) return [];
  const known = candidates.some(({ name, kind }) => (name ?? kind) === like);
  return [
    {
      path: ['tune', 'like'],
      code: 'unknown-candidate',
      message: known ? 'is no PI or PID controller' : 'is no candidate of this case',
      found: like,
      allowed: names.length === 0 ? 'nothing: the case has no PI candidate' : names.join(', '),
    },
  ];
}
