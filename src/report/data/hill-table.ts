import type { Hill, HillOutcome } from '../../study/findings.ts';
import { toKm, toKmh, toKw, toPct, toWh } from '../../units/convert.ts';
import { fixed } from './fixed.ts';
import { inUnit } from './segment-table.ts';
import { type Column, csvText, type JsonRow, jsonRow } from './table.ts';

interface HillRow {
  readonly hill: Hill;
  readonly outcome: HillOutcome;
}

/** The columns of hills.csv, and the keys of `hills[]` in summary.json: one row a hill and candidate. */
export const HILL_COLUMNS: readonly Column<readonly HillRow[]>[] = [
  {
    name: 'hill',
    decimals: 0,
    about: 'number of the hill, from 1',
    value: (rows, i) => rows[i]!.hill.number,
  },
  {
    name: 'candidate',
    decimals: 0,
    about: 'name of the candidate',
    value: (rows, i) => rows[i]!.outcome.candidate,
  },
  {
    name: 'kind',
    decimals: 0,
    about: 'climb, descent, rolling or level',
    value: (rows, i) => rows[i]!.hill.kind,
  },
  { name: 'from_km', decimals: 4, about: 'start of the hill', value: (rows, i) => toKm(rows[i]!.hill.from) },
  { name: 'to_km', decimals: 4, about: 'end of the hill', value: (rows, i) => toKm(rows[i]!.hill.to) },
  {
    name: 'length_m',
    decimals: 1,
    about: 'horizontal length',
    value: (rows, i) => rows[i]!.hill.to - rows[i]!.hill.from,
  },
  {
    name: 'mean_grade_pct',
    decimals: 3,
    about: 'rise over length',
    value: (rows, i) => toPct(rows[i]!.hill.meanGrade),
  },
  {
    name: 'mean_grade_sd_pct',
    decimals: 3,
    about: 'one standard deviation of the mean grade',
    value: (rows, i) => toPct(rows[i]!.hill.meanGradeSd),
  },
  {
    name: 'max_grade_pct',
    decimals: 3,
    about: 'steepest grade, with its sign',
    value: (rows, i) => toPct(rows[i]!.hill.maxGrade),
  },
  {
    name: 'demand_pct',
    decimals: 2,
    about: 'demand of greatest magnitude, of a descent the least: force needed over force there',
    value: (rows, i) => toPct(rows[i]!.hill.share),
  },
  {
    name: 'required_force_n',
    decimals: 1,
    about: 'wheel force that the set speed needs there',
    value: (rows, i) => rows[i]!.hill.requiredForce,
  },
  {
    name: 'available_force_n',
    decimals: 1,
    about: 'wheel force that is there',
    value: (rows, i) => rows[i]!.hill.availableForce,
  },
  {
    name: 'sustained_speed_kmh',
    decimals: 2,
    about: 'speed that can be held there for ever, or that it runs away to',
    value: (rows, i) => toKmh(rows[i]!.hill.sustainedSpeed),
  },
  {
    name: 'speed_change_kmh',
    decimals: 3,
    about: 'speed error furthest from zero, on the hill and just behind it; negative: too slow',
    value: (rows, i) => toKmh(rows[i]!.outcome.speedChange),
  },
  {
    name: 'predicted_change_kmh',
    decimals: 3,
    about: 'the same by the hand formula',
    value: (rows, i) => inUnit(rows[i]!.outcome.predictedChange, toKmh),
  },
  {
    name: 'time_at_limit_s',
    decimals: 2,
    about: 'time at a limit of the throttle',
    value: (rows, i) => rows[i]!.outcome.timeAtLimit,
  },
  {
    name: 'recovery_s',
    decimals: 2,
    about: 'from leaving the band or the limit to within 1 km/h for 3 s',
    value: (rows, i) => rows[i]!.outcome.recovery,
  },
  {
    name: 'cause',
    decimals: 0,
    about: 'why it left its band; empty where it did not',
    value: (rows, i) => rows[i]!.outcome.cause,
  },
  {
    name: 'would_hold',
    decimals: 0,
    about: 'what would hold, one sentence a lever',
    value: (rows, i) => rows[i]!.outcome.wouldHold.map((remedy) => remedy.words).join(' '),
  },
  {
    name: 'gear_engaged',
    decimals: 0,
    about: 'gear at the place of greatest demand, from 1; empty for a drive without gears',
    value: (rows, i) => gearNumber(rows[i]!.hill.gears?.engaged),
  },
  {
    name: 'gear_needed',
    decimals: 0,
    about: 'highest gear in which the demand stays in range all over the hill; empty where none does',
    value: (rows, i) => gearNumber(rows[i]!.hill.gears?.needed),
  },
  {
    name: 'sustained_by_gear_kmh',
    decimals: 0,
    about: 'speed that each gear sustains at the place of greatest demand, first gear first; 0: none',
    value: (rows, i) => sustainedByGear(rows[i]!.hill),
  },
  {
    name: 'brake_power_kw',
    decimals: 3,
    about: 'greatest braking power that holds the set speed beside the least throttle',
    value: (rows, i) => toKw(rows[i]!.hill.brakePower),
  },
  {
    name: 'brake_energy_wh',
    decimals: 3,
    about: 'energy of that braking over the hill',
    value: (rows, i) => toWh(rows[i]!.hill.brakeEnergy),
  },
  {
    name: 'derating',
    decimals: 0,
    about: 'of the cause derating what takes the force: altitude, heat, voltage, empty or full; else empty',
    value: (rows, i) => {
      const { cause, derating } = rows[i]!.outcome;
      return cause === 'derating' ? (derating ?? 'altitude') : null;
    },
  },
];

const gearNumber = (gear: number | null | undefined): number | null =>
  gear === null || gear === undefined ? null : gear + 1;

/** `43.2 60.0 51.7`: one field, so that the columns are the same for every vehicle. */
const sustainedByGear = ({ gears }: Hill): string | null =>
  gears === null
    ? null
    : gears.sustained.map((speed) => fixed(toKmh(speed), 1, 'sustained_by_gear_kmh')).join(' ');

const rowsOf = (hills: readonly Hill[]): readonly HillRow[] =>
  hills.flatMap((hill) => hill.outcomes.map((outcome) => ({ hill, outcome })));

/** hills.csv: in order along the way, each candidate in turn. */
export function hillsCsv(hills: readonly Hill[]): string {
  const rows = rowsOf(hills);
  return csvText(HILL_COLUMNS, rows, rows.length);
}

/** The same rows as JSON. */
export function hillRows(hills: readonly Hill[]): readonly JsonRow[] {
  const rows = rowsOf(hills);
  return rows.map((_, i) => jsonRow(HILL_COLUMNS, rows, i));
}
