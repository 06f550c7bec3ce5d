import type { CandidateResult } from '../../run/run-result.ts';
import { histogramOf } from '../../study/histogram.ts';
import { toPct } from '../../units/convert.ts';
import { SPREAD_QUANTITIES } from '../model/histograms.ts';
import { type Column, csvText } from './table.ts';

interface HistogramRow {
  readonly candidate: string;
  readonly quantity: string;
  readonly from: number;
  readonly to: number;
  /** [s] */
  readonly time: number;
  readonly share: number;
}

/** The columns of histograms.csv: one row a candidate, quantity and class. */
export const HISTOGRAM_COLUMNS: readonly Column<readonly HistogramRow[]>[] = [
  { name: 'candidate', decimals: 0, about: 'name of the candidate', value: (rows, i) => rows[i]!.candidate },
  {
    name: 'quantity',
    decimals: 0,
    about: 'what is counted, with the unit of from and to: speed error, throttle command, acceleration, jerk',
    value: (rows, i) => rows[i]!.quantity,
  },
  { name: 'from', decimals: 3, about: 'lower border of the class, in it', value: (rows, i) => rows[i]!.from },
  { name: 'to', decimals: 3, about: 'upper border of the class, not in it', value: (rows, i) => rows[i]!.to },
  {
    name: 'time_s',
    decimals: 3,
    about: 'time with hold on in the class; of the jerk from 0.4 s on, of the throttle without shifts',
    value: (rows, i) => rows[i]!.time,
  },
  {
    name: 'share_pct',
    decimals: 4,
    about: 'share of the time that the quantity has',
    value: (rows, i) => rows[i]!.share,
  },
];

/** histograms.csv: candidate by candidate, quantity by quantity, classes in order from the lowest to the highest that was met. */
export function histogramsCsv(candidates: readonly CandidateResult[]): string {
  const rows = candidates.flatMap(({ name, result }) => {
    const { detail } = result.bins;
    return detail === null
      ? []
      : SPREAD_QUANTITIES.flatMap((quantity): HistogramRow[] => {
          const { width, first, times } = histogramOf(quantity.of(detail), quantity.toUnit, quantity.width);
          const whole = times.reduce((sum, time) => sum + time, 0);
          return Array.from(times, (time, k) => ({
            candidate: name,
            quantity: quantity.name,
            from: (first + k - 0.5) * width,
            to: (first + k + 0.5) * width,
            time,
            share: whole > 0 ? toPct(time / whole) : 0,
          }));
        });
  });
  return csvText(HISTOGRAM_COLUMNS, rows, rows.length);
}
