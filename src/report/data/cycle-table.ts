import type { LimitCycle } from '../../study/findings.ts';
import { toKm, toKmh, toPct } from '../../units/convert.ts';
import { type Column, csvText, type JsonRow, jsonRow } from './table.ts';

/** The columns of cycles.csv, and the keys of `cycles[]` in summary.json: one row a limit cycle. */
export const CYCLE_COLUMNS: readonly Column<readonly LimitCycle[]>[] = [
  {
    name: 'candidate',
    decimals: 0,
    about: 'name of the candidate',
    value: (rows, i) => rows[i]!.candidate,
  },
  {
    name: 'from_km',
    decimals: 4,
    about: 'where the oscillation begins',
    value: (rows, i) => toKm(rows[i]!.from),
  },
  { name: 'to_km', decimals: 4, about: 'where it ends', value: (rows, i) => toKm(rows[i]!.to) },
  { name: 'period_s', decimals: 3, about: 'one turn', value: (rows, i) => rows[i]!.period },
  { name: 'turns', decimals: 0, about: 'turns that were driven', value: (rows, i) => rows[i]!.turns },
  {
    name: 'speed_amplitude_kmh',
    decimals: 4,
    about: 'half of peak to peak of the speed error',
    value: (rows, i) => toKmh(rows[i]!.speedAmplitude),
  },
  {
    name: 'throttle_amplitude_pct',
    decimals: 3,
    about: 'half of peak to peak of the throttle',
    value: (rows, i) => toPct(rows[i]!.throttleAmplitude),
  },
  {
    name: 'cause',
    decimals: 0,
    about: 'slack, fuel_cut, pulse_counting, resolution, shifting, gains or unknown',
    value: (rows, i) => rows[i]!.cause,
  },
  {
    name: 'why',
    decimals: 0,
    about: 'what was taken away, and what was left of the amplitude',
    value: (rows, i) => rows[i]!.why,
  },
];

/** cycles.csv: candidate by candidate, in order along the way; the header alone where no loop oscillates by itself. */
export const cyclesCsv = (cycles: readonly LimitCycle[]): string =>
  csvText(CYCLE_COLUMNS, cycles, cycles.length);

/** The same rows as JSON. */
export const cycleRows = (cycles: readonly LimitCycle[]): readonly JsonRow[] =>
  cycles.map((_, i) => jsonRow(CYCLE_COLUMNS, cycles, i));
