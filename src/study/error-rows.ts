import { toKmh } from '../units/convert.ts';
import {
  byError,
  detailed,
  furthestClass,
  quantile,
  steadyHillError,
  sumOf,
  timeWeightedError,
} from './detail-measures.ts';
import { held, sum, worstBin, worstError } from './figure-measures.ts';
import { DEFINED_HERE, type FigureRow } from './figure-row.ts';

const INTEGRAL = 'error integrals of control engineering (IAE, ISE, ITAE), from memory';

/** Figures of the distribution of the speed error and of its integrals. */
export const ERROR_ROWS: readonly FigureRow[] = [
  {
    name: 'p95_abs_error_kmh',
    label: '95 % of |e|',
    unit: 'km/h',
    weight: 'time',
    takesBand: false,
    better: 'lower',
    definition:
      'The value that |e| stays within for 95 % of the time with hold on, controller sample by sample, to 0.01 km/h. Its place is where |e| was greatest.',
    source: DEFINED_HERE,
    detail: true,
    measure: (record) =>
      detailed(
        record,
        ({ error }) => {
          const value = quantile(record, error, 0.95, true);
          return typeof value === 'number' ? toKmh(value) : value;
        },
        ({ error }, i) => furthestClass(error, i),
      ),
  },
  {
    name: 'iae_kmh_s',
    label: 'Integral of |e|',
    unit: 'km/h·s',
    weight: 'time',
    takesBand: false,
    better: 'lower',
    definition: 'IAE: time integral of |e| over the time with hold on. Its place is where |e| was greatest.',
    source: INTEGRAL,
    detail: true,
    measure: (record) =>
      detailed(record, ({ errorAbsolute }) => toKmh(sumOf(record, errorAbsolute)), byError(record)),
  },
  {
    name: 'ise_kmh2_s',
    label: 'Integral of e squared',
    unit: '(km/h)²·s',
    weight: 'time',
    takesBand: false,
    better: 'lower',
    definition:
      'ISE: time integral of e squared over the time with hold on. Its place is where |e| was greatest.',
    source: INTEGRAL,
    measure: (record) => {
      const worst = worstBin(record, (i) => worstError(record, i));
      const { value } = held(record, () => toKmh(toKmh(sum(record, (i) => record.bins.errorSquare[i]))));
      return { value, at: typeof value === 'number' ? (worst?.at ?? null) : null };
    },
  },
  {
    name: 'itae_kmh_s2',
    label: 'Integral of t |e|',
    unit: 'km/h·s²',
    weight: 'time',
    takesBand: false,
    better: 'lower',
    definition:
      'ITAE: time integral of |e| times the time since the last event, over the time with hold on. Events are the start of the run, each change of set speed, each end of a hill that the section on hills lists, and whatever takes hold or gives it back, a shift of the rider too; one counts from the start of its bin of distance. Its place is where |e| was greatest.',
    source: `${INTEGRAL}; the events are defined here`,
    detail: true,
    measure: (record) =>
      detailed(record, (detail) => toKmh(timeWeightedError(record, detail)), byError(record)),
  },
  {
    name: 'steady_hill_error_kmh',
    label: 'Steady error on a hill',
    unit: 'km/h',
    weight: 'event',
    takesBand: false,
    better: 'lower',
    definition:
      'Greatest |mean e| over the last 30 % of a hill: a stretch of 200 m or more that is 2 % or steeper, up or down. Only of hills at whose end the command was at no limit and hold was on; bins in which the grade changes by more than one point in 100 m are left out, and a hill with less than 50 m of others has none.',
    source: DEFINED_HERE,
    measure: (record) => {
      const { value, at } = steadyHillError(record);
      return { value: typeof value === 'number' ? toKmh(value) : value, at };
    },
  },
];
