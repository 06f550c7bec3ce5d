import type { Figure, Segment, SegmentRun } from '../../study/findings.ts';
import { isNone } from '../../study/findings.ts';
import { toKm, toKmh, toPct, toWh } from '../../units/convert.ts';
import { type Column, csvText } from './table.ts';

interface SegmentRow {
  readonly segment: Segment;
  readonly run: SegmentRun;
}

/** A figure in another unit; what does not exist stays so. */
export const inUnit = (figure: Figure, convert: (value: number) => number): Figure =>
  isNone(figure) ? figure : convert(figure);

/** The columns of segments.csv: one row a candidate and segment. */
export const SEGMENT_COLUMNS: readonly Column<readonly SegmentRow[]>[] = [
  {
    name: 'candidate',
    decimals: 0,
    about: 'name of the candidate',
    value: (rows, i) => rows[i]!.run.candidate,
  },
  {
    name: 'segment',
    decimals: 0,
    about: 'number of the segment, from 1',
    value: (rows, i) => rows[i]!.segment.number,
  },
  {
    name: 'from_km',
    decimals: 4,
    about: 'start of the segment',
    value: (rows, i) => toKm(rows[i]!.segment.from),
  },
  { name: 'to_km', decimals: 4, about: 'end of the segment', value: (rows, i) => toKm(rows[i]!.segment.to) },
  {
    name: 'mean_grade_pct',
    decimals: 3,
    about: 'rise over length',
    value: (rows, i) => toPct(rows[i]!.segment.meanGrade),
  },
  {
    name: 'mean_headwind_m_s',
    decimals: 3,
    about: 'mean over distance, positive against travel',
    value: (rows, i) => rows[i]!.segment.meanHeadwind,
  },
  {
    name: 'mean_error_kmh',
    decimals: 4,
    about: 'speed error, mean over time',
    value: (rows, i) => inUnit(rows[i]!.run.meanError, toKmh),
  },
  {
    name: 'rms_error_kmh',
    decimals: 4,
    about: 'speed error, root mean square over time',
    value: (rows, i) => inUnit(rows[i]!.run.rmsError, toKmh),
  },
  {
    name: 'worst_error_kmh',
    decimals: 4,
    about: 'speed error of greatest magnitude, signed',
    value: (rows, i) => inUnit(rows[i]!.run.worstError, toKmh),
  },
  {
    name: 'mean_throttle_pct',
    decimals: 3,
    about: 'throttle at the actuator, mean over time',
    value: (rows, i) => inUnit(rows[i]!.run.meanThrottle, toPct),
  },
  {
    name: 'at_limit_pct',
    decimals: 3,
    about: 'share of the time at a limit of the throttle',
    value: (rows, i) => inUnit(rows[i]!.run.atLimit, toPct),
  },
  {
    name: 'wheel_energy_wh',
    decimals: 3,
    about: 'work of the drive while it pushes',
    value: (rows, i) => inUnit(rows[i]!.run.wheelEnergy, toWh),
  },
  { name: 'time_s', decimals: 3, about: 'time spent in the segment', value: (rows, i) => rows[i]!.run.time },
];

/** segments.csv, candidate by candidate, in order along the way. A run that ended before a segment leaves its fields empty. */
export function segmentsCsv(segments: readonly Segment[]): string {
  const names = (segments[0]?.runs ?? []).map((run) => run.candidate);
  const rows = names.flatMap((name) =>
    segments.flatMap((segment) =>
      segment.runs.filter((run) => run.candidate === name).map((run) => ({ segment, run })),
    ),
  );
  return csvText(SEGMENT_COLUMNS, rows, rows.length);
}
