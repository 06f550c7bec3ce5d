import type { HoldEvent } from '../../loop/result.ts';
import type { RunResult } from '../../run/run-result.ts';
import type { Figure } from '../../study/findings.ts';
import type { HoldMeasure } from '../../study/hold-transient.ts';
import { toKmh, toPct } from '../../units/convert.ts';
import { type Cell, type Column, csvText, type JsonRow, jsonRow } from './table.ts';

interface EventRow {
  readonly candidate: string;
  readonly event: HoldEvent;
  /** What followed it; null for an event that nothing is measured behind. */
  readonly measure: HoldMeasure | null;
}
type Rows = readonly EventRow[];

/** A figure of the transient in the unit of its column. */
const followed =
  (of: (measure: HoldMeasure) => Figure, inUnit: (value: number) => number) =>
  (rows: Rows, i: number): Cell => {
    const { measure } = rows[i]!;
    if (measure === null) return null;
    const value = of(measure);
    return typeof value === 'number' ? inUnit(value) : value;
  };
const same = (value: number): number => value;

/** The columns of hold-events.csv, and the keys of `hold_events[]` in summary.json: one row an event of a candidate's hold. */
export const HOLD_EVENT_COLUMNS: readonly Column<Rows>[] = [
  { name: 'candidate', decimals: 0, about: 'name of the candidate', value: (rows, i) => rows[i]!.candidate },
  {
    name: 'time_s',
    decimals: 3,
    about: 'from the start of the run',
    value: (rows, i) => rows[i]!.event.time,
  },
  {
    name: 'distance_m',
    decimals: 2,
    about: 'horizontal distance from the driven start',
    value: (rows, i) => rows[i]!.event.distance,
  },
  {
    name: 'event',
    decimals: 0,
    about:
      'engaged, resumed, tapped, override_began, override_ended (the grip is let go), reentered (hold is back behind it), ended, refused',
    value: (rows, i) => rows[i]!.event.kind,
  },
  {
    name: 'cause',
    decimals: 0,
    about:
      'rider, bend, brake, clutch or gear_change; of the unit itself too_slow, too_fast, below_lowest_speed or sensor_not_believed',
    value: (rows, i) => rows[i]!.event.cause,
  },
  {
    name: 'set_speed_kmh',
    decimals: 3,
    about: 'in force from here; of an end the one that a resume goes back to',
    value: (rows, i) => toKmh(rows[i]!.event.setSpeed),
  },
  {
    name: 'measured_kmh',
    decimals: 4,
    about: 'measured speed at the sample before',
    value: (rows, i) => toKmh(rows[i]!.event.measured),
  },
  {
    name: 'command_pct',
    decimals: 3,
    about: 'throttle command at the sample before',
    value: (rows, i) => toPct(rows[i]!.event.command),
  },
  {
    name: 'command_step_pct',
    decimals: 3,
    about: 'jump of the command where hold takes over or ends; behind an override where hold is back',
    value: followed(({ commandStep }) => commandStep, toPct),
  },
  {
    name: 'lowest_kmh',
    decimals: 4,
    about:
      'furthest below the set speed for as long as it is followed, true speed, negative; 0 where it never was below',
    value: followed(({ lowest }) => lowest, toKmh),
  },
  {
    name: 'highest_kmh',
    decimals: 4,
    about: 'furthest above the set speed for as long as it is followed; 0 where it never was above',
    value: followed(({ highest }) => highest, toKmh),
  },
  {
    name: 'settling_s',
    decimals: 3,
    about: 'to the start of the first 3 s within 1 km/h of the set speed, which it may leave again',
    value: followed(({ settling }) => settling, same),
  },
  {
    name: 'jerk_m_s3',
    decimals: 3,
    about: "greatest change of the acceleration, over 0.2 s; none where the rider's brake ends hold",
    value: followed(({ jerk }) => jerk, same),
  },
];

function rowsOf({ candidates, transients }: RunResult): Rows {
  return candidates.flatMap(({ name, result: { holdEvents = [] } }) =>
    holdEvents.map((event): EventRow => {
      const measure = transients.measures.find(
        (one) => one.candidate === name && one.event.time === event.time && one.event.kind === event.kind,
      );
      return { candidate: name, event, measure: measure ?? null };
    }),
  );
}

/** hold-events.csv: candidate by candidate, in order along the way. */
export function holdEventsCsv(run: RunResult): string {
  const rows = rowsOf(run);
  return csvText(HOLD_EVENT_COLUMNS, rows, rows.length);
}

/** The same rows as JSON. */
export function holdEventRows(run: RunResult): readonly JsonRow[] {
  const rows = rowsOf(run);
  return rows.map((_, i) => jsonRow(HOLD_EVENT_COLUMNS, rows, i));
}
