import type * as z from 'zod';
import { FIGURES } from '../study/figure-table.ts';
import { candidateRules } from './candidate-rules.ts';
import type { caseSchema } from './case-schema.ts';
import type { Rule, RuleFault } from './check-file.ts';
import { matrixRules } from './matrix-rules.ts';
import { nearestKey } from './nearest-key.ts';
import { increasing } from './order-rules.ts';
import { oneWay, placesInOrder, upwards } from './place-rules.ts';
import { riderRules } from './rider-rules.ts';
import { isMapping } from './schema-walk.ts';
import { tuneRules } from './tune-rules.ts';
import { TERRAIN_ROUGHNESS } from './weather-schema.ts';

type CaseInput = z.input<typeof caseSchema>;

/** What no single field of a case can say. */
export const caseRules: readonly Rule<CaseInput>[] = [
  {
    about: ['track', 'profile'],
    check: ({ track }) =>
      'profile' in track ? oneWay(track.profile, ['track', 'profile'], 'length_m', 'for_s') : [],
  },
  {
    about: ['road', 'masks'],
    check: ({ road }) => (road?.masks ?? []).flatMap((mask, i) => upwards(mask, ['road', 'masks', i])),
  },
  {
    about: ['road', 'shelter'],
    check: ({ road }) =>
      (road?.shelter ?? []).flatMap((shelter, i) => upwards(shelter, ['road', 'shelter', i])),
  },
  { about: ['wind'], check: ({ wind }) => (wind === undefined ? [] : aboveRoughness(wind)) },
  {
    about: ['hold', 'changes'],
    check: ({ hold }) =>
      placesInOrder(hold.changes ?? [], ['hold', 'changes'], 'the changes are not in order'),
  },
  {
    about: ['hold', 'shifts'],
    check: ({ hold }) =>
      increasing(
        (hold.shifts ?? []).map(({ at_km }) => at_km),
        (i) => ['hold', 'shifts', i, 'at_km'],
        'km',
      ),
  },
  { about: ['requirements'], check: ({ requirements }) => (requirements ?? []).flatMap(requirementWhere) },
  ...candidateRules,
  ...riderRules,
  ...matrixRules,
  ...tuneRules,
];

/** Checks by name, which hold whatever else is wrong with the items: no item has the number -1, so none stops them. */
export const caseNameRules: readonly Rule<unknown>[] = [
  {
    about: ['candidates', -1],
    check: (file) => doubled(file, 'candidates', (item) => item.name ?? item.kind, 'name'),
  },
  {
    about: ['logged_rides', -1],
    check: (file) => doubled(file, 'logged_rides', (item) => item.name, 'name'),
  },
  { about: ['logged_rides', -1], check: ridesCalledAsCandidates },
  { about: ['requirements', -1], check: (file) => doubled(file, 'requirements', (item) => item.id, 'id') },
  { about: ['requirements', -1], check: unknownCandidates },
  { about: ['requirements', -1], check: unknownFigures },
  { about: ['requirements', -1], check: limitsInWrongSense },
];

/** The list under a key, whatever is wrong in it. */
function items(file: unknown, key: string): Record<string, unknown>[] {
  const list = isMapping(file) ? file[key] : undefined;
  return Array.isArray(list) ? list.map((item) => (isMapping(item) ? item : {})) : [];
}

function doubled(
  file: unknown,
  key: string,
  nameOf: (item: Record<string, unknown>) => unknown,
  field: string,
): RuleFault[] {
  const seen = new Set<unknown>();
  return items(file, key).flatMap((item, i) => {
    const name = nameOf(item);
    if (typeof name !== 'string' || !seen.has(name)) {
      seen.add(name);
      return [];
    }
    return [
      {
        path: [key, i, field],
        code: 'doubled-name',
        message: `the ${field} is taken already`,
        found: name,
        allowed: `each ${field} once`,
      },
    ];
  });
}

/** The names of the candidates as written; a candidate without one is called by its kind. */
export const candidateNames = (file: unknown): string[] =>
  items(file, 'candidates').map((item) => String(item.name ?? item.kind));

/** A ride stands beside the candidates, in their charts and tables. */
function ridesCalledAsCandidates(file: unknown): RuleFault[] {
  const taken = candidateNames(file);
  return items(file, 'logged_rides').flatMap(({ name }, i): RuleFault[] =>
    typeof name === 'string' && taken.includes(name)
      ? [
          {
            path: ['logged_rides', i, 'name'],
            code: 'doubled-name',
            message: 'the name is that of a candidate',
            found: name,
            allowed: 'a name of its own',
          },
        ]
      : [],
  );
}

function unknownCandidates(file: unknown): RuleFault[] {
  const known = candidateNames(file);
  return items(file, 'requirements').flatMap((requirement, i) =>
    (Array.isArray(requirement.candidates) ? requirement.candidates : []).flatMap(
      (name: unknown, k: number) =>
        typeof name !== 'string' || known.includes(name) || known.length === 0
          ? []
          : [
              {
                path: ['requirements', i, 'candidates', k],
                code: 'unknown-candidate',
                message: 'is no candidate of this case',
                found: name,
                allowed: known.join(', '),
              },
            ],
    ),
  );
}

/** The log law has no wind at or below the roughness length. */
function aboveRoughness(wind: NonNullable<CaseInput['wind']>): RuleFault[] {
  const roughness = 'roughness_m' in wind ? wind.roughness_m : TERRAIN_ROUGHNESS[wind.terrain ?? 'open'];
  return (['height_m', 'rider_height_m'] as const).flatMap((key) => {
    const height = wind[key];
    if (height === undefined || height > roughness) return [];
    return [
      {
        path: ['wind', key],
        code: 'below-roughness',
        message: 'is not above the roughness of the terrain',
        found: `${height} m`,
        allowed: `more than ${roughness} m`,
      },
    ];
  });
}

function requirementWhere({ where }: NonNullable<CaseInput['requirements']>[number], i: number): RuleFault[] {
  return typeof where === 'object' ? upwards(where, ['requirements', i, 'where']) : [];
}

function unknownFigures(file: unknown): RuleFault[] {
  return items(file, 'requirements').flatMap(({ figure, band_kmh: band }, i): RuleFault[] => {
    if (typeof figure !== 'string') return [];
    const row = FIGURES.find(({ name }) => name === figure);
    const names = FIGURES.map(({ name }) => name);
    if (row === undefined) {
      const near = nearestKey(figure, names);
      return [
        {
          path: ['requirements', i, 'figure'],
          code: 'unknown-figure',
          message: `is not in the table of figures${near === null ? '' : `, did you mean ${near.key}?`}`,
          found: figure,
          allowed: names.join(', '),
        },
      ];
    }
    if (row.takesBand && band === undefined)
      return [
        {
          path: ['requirements', i, 'band_kmh'],
          code: 'missing-key',
          message: `is missing: ${figure} is counted within a band`,
          allowed: 'a half-width in km/h',
        },
      ];
    if (!row.takesBand && band !== undefined)
      return [
        {
          path: ['requirements', i, 'band_kmh'],
          code: 'keys-exclude',
          message: `has no meaning for ${figure}`,
          allowed: FIGURES.filter(({ takesBand }) => takesBand)
            .map(({ name }) => name)
            .join(', '),
        },
      ];
    return [];
  });
}

/** A limit that no share can reach. */
function shareBeyondAll(
  unit: string,
  requirement: Readonly<Record<string, unknown>>,
  i: number,
): RuleFault[] {
  if (unit !== '%') return [];
  return ['at_least', 'at_most'].flatMap((key): RuleFault[] => {
    const limit = requirement[key];
    if (typeof limit !== 'number' || Math.abs(limit) <= 100) return [];
    return [
      {
        path: ['requirements', i, key],
        code: 'out-of-range',
        message: `is more than all of it: ${String(requirement.figure)} is a share`,
        found: `${limit} %`,
        allowed: 'up to 100 %',
      },
    ];
  });
}

/** A limit on the side where every run meets it, or none does, is a slip of the pen. */
function limitsInWrongSense(file: unknown): RuleFault[] {
  return items(file, 'requirements').flatMap((requirement, i): RuleFault[] => {
    const row = FIGURES.find(({ name }) => name === requirement.figure);
    if (row === undefined) return [];
    const beyond = shareBeyondAll(row.unit, requirement, i);
    if (beyond.length > 0 || row.better === null) return beyond;
    const [right, wrong] = row.better === 'higher' ? ['at_least', 'at_most'] : ['at_most', 'at_least'];
    const below = row.name === 'worst_low_kmh';
    const hint = below ? `: it is 0 or negative, -3 is 3 ${row.unit} below the set speed` : '';
    const limit = requirement[right];
    // Where both stand, the schema complains already.
    if (requirement[wrong] !== undefined && limit === undefined)
      return [
        {
          path: ['requirements', i, wrong],
          code: 'wrong-sense',
          message: `limits ${row.name} on its better side${hint}`,
          found: `${wrong}: ${String(requirement[wrong])}`,
          allowed: right,
        },
      ];
    if (!below || typeof limit !== 'number' || limit <= 0) return [];
    return [
      {
        path: ['requirements', i, right],
        code: 'wrong-sense',
        message: `can never be met by ${row.name}${hint}`,
        found: String(limit),
        allowed: `a number up to 0 ${row.unit}`,
      },
    ];
  });
}
