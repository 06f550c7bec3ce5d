import type { MatrixCell, MatrixResult } from '../../run/matrix-result.ts';
import { type Figure, isNone, type RequirementFinding } from '../../study/findings.ts';
import { toKm } from '../../units/convert.ts';
import { figureLabel } from '../model/figure-text.ts';
import { decimalsOf } from './decimals-of.ts';
import { rounded } from './fixed.ts';
import { type Json, numbers } from './json-parts.ts';
import { type Column, csvText, jsonRow } from './table.ts';

interface MatrixRow {
  readonly cell: MatrixCell;
  readonly finding: RequirementFinding;
}

/** What a combination is, in matrix.csv and in summary.json. */
const COMBINATION_COLUMNS: readonly Column<readonly Pick<MatrixRow, 'cell'>[]>[] = [
  {
    name: 'combination',
    decimals: 0,
    about: 'number of the combination, from 1',
    value: (rows, i) => rows[i]!.cell.number,
  },
  {
    name: 'load',
    decimals: 0,
    about: 'name of the load',
    value: (rows, i) => rows[i]!.cell.combination.load.label,
  },
  {
    name: 'carried_kg',
    decimals: 2,
    about: 'mass of rider, payload and pillion together',
    value: (rows, i) => {
      const { riderKg, payloadKg, pillionKg } = rows[i]!.cell.combination.load;
      return riderKg + payloadKg + pillionKg;
    },
  },
  {
    name: 'wind',
    decimals: 0,
    about: 'name of the wind',
    value: (rows, i) => rows[i]!.cell.combination.wind.label,
  },
  {
    name: 'wind_speed_m_s',
    decimals: 2,
    about: 'wind at its height, 0 in still air',
    value: (rows, i) => rows[i]!.cell.combination.wind.speed,
  },
  {
    name: 'wind_from_deg',
    decimals: 1,
    about: 'where it blows from, clockwise from true north; empty in still air',
    value: (rows, i) => rows[i]!.cell.combination.wind.fromDeg,
  },
  {
    name: 'direction',
    decimals: 0,
    about: 'which way the road is driven: there, back or both',
    value: (rows, i) => rows[i]!.cell.combination.direction,
  },
  {
    name: 'gear',
    decimals: 0,
    about: 'gear at the start, from 1; empty without gears',
    value: (rows, i) => rows[i]!.cell.combination.gear,
  },
  {
    name: 'set_speed_kmh',
    decimals: 3,
    about: 'set speed at the start of the way there',
    value: (rows, i) => rows[i]!.cell.combination.setSpeedKmh,
  },
];

/** The columns of matrix.csv: one row a combination, requirement and candidate. */
export const MATRIX_COLUMNS: readonly Column<readonly MatrixRow[]>[] = [
  ...COMBINATION_COLUMNS,
  {
    name: 'candidate',
    decimals: 0,
    about: 'name of the candidate',
    value: (rows, i) => rows[i]!.finding.candidate,
  },
  {
    name: 'requirement',
    decimals: 0,
    about: 'id of the requirement',
    value: (rows, i) => rows[i]!.finding.requirement.id,
  },
  {
    name: 'figure',
    decimals: 0,
    about: 'name of its figure',
    value: (rows, i) => rows[i]!.finding.requirement.figure,
  },
  {
    name: 'unit',
    decimals: 0,
    about: 'unit of the figure, its limit and its margin',
    value: (rows, i) => figureLabel(rows[i]!.finding.requirement.figure).unit,
  },
  {
    name: 'measured',
    decimals: 4,
    about: 'the figure; empty where there is none',
    value: (rows, i) => rows[i]!.finding.measured,
  },
  {
    name: 'sense',
    decimals: 0,
    about: 'at least or at most',
    value: (rows, i) => senseOf(rows[i]!.finding),
  },
  { name: 'limit', decimals: 4, about: 'the limit', value: (rows, i) => limitOf(rows[i]!.finding) },
  {
    name: 'margin',
    decimals: 4,
    about: 'distance to the limit, positive on the good side; empty for a run that ended early',
    value: (rows, i) => rows[i]!.finding.margin,
  },
  {
    name: 'verdict',
    decimals: 0,
    about: 'met, not met, too close to call or not judged',
    value: (rows, i) => rows[i]!.finding.verdict,
  },
  {
    name: 'worst_at_km',
    decimals: 4,
    about:
      'where it was worst, along the way that this combination drives; empty for a figure without a place',
    value: (rows, i) => {
      const { worstAt } = rows[i]!.finding;
      return worstAt === null ? null : toKm(worstAt);
    },
  },
  {
    name: 'reason',
    decimals: 0,
    about: 'why there is no figure, or no margin',
    value: (rows, i) => {
      const { measured, margin } = rows[i]!.finding;
      return reasonOf(measured) ?? reasonOf(margin);
    },
  },
];

const reasonOf = (figure: Figure): string | null => (isNone(figure) ? figure.none : null);
const senseOf = ({ requirement }: RequirementFinding): string =>
  requirement.atLeast === null ? 'at most' : 'at least';
const limitOf = ({ requirement }: RequirementFinding): number | null =>
  requirement.atLeast ?? requirement.atMost;

/** matrix.csv. */
export function matrixCsv({ cells }: MatrixResult): string {
  const rows = cells.flatMap((cell) => cell.findings.map((finding): MatrixRow => ({ cell, finding })));
  return csvText(MATRIX_COLUMNS, rows, rows.length);
}

/** `matrix` of summary.json. */
export function matrixJson({ lists, cells }: MatrixResult): Json {
  const rows = cells.map((cell) => ({ cell }));
  return {
    lists,
    combinations: cells.map((cell, i) => ({
      ...jsonRow(COMBINATION_COLUMNS, rows, i),
      is_the_case: cell.own,
      ...(cell.reason === null ? {} : { reason: cell.reason }),
      candidates: cell.runs.map(({ candidate, status, endDistance, figures }) => ({
        name: candidate,
        status,
        ...numbers({ end_m: endDistance, ...figures }),
      })),
      requirements: cell.findings.map(findingJson),
    })),
  };
}

function findingJson(finding: RequirementFinding): Json {
  const { requirement, candidate, measured, margin, verdict, worstAt } = finding;
  const decimals = decimalsOf(requirement.figure);
  const figure = (name: string, value: Figure): Record<string, Json> =>
    isNone(value)
      ? { [name]: null, [`${name}_reason`]: value.none }
      : { [name]: rounded(value, decimals, `${requirement.id}: ${name}`) };
  return {
    id: requirement.id,
    candidate,
    ...figure('measured', measured),
    ...figure('margin', margin),
    worst_at_km: worstAt === null ? null : rounded(toKm(worstAt), 4),
    verdict,
  };
}
