import { FIGURES, type FigureRow } from '../../study/figure-table.ts';
import { type Figure, isNone } from '../../study/findings.ts';
import type { ResultSummary, SummaryCandidate } from './read-summary.ts';

/** `changed`: a figure without a good direction. `not comparable`: the reason stands in the difference. */
export type Change = 'better' | 'worse' | 'changed' | 'same' | 'not comparable';

/** A figure of one candidate in two runs, in the unit of the table of figures. */
export interface FigureChange {
  readonly figure: string;
  readonly label: string;
  readonly unit: string;
  readonly before: Figure;
  readonly after: Figure;
  /** After less before. */
  readonly difference: Figure;
  readonly change: Change;
}

/** What a comparison needs to know of a figure. */
type Row = Pick<FigureRow, 'name' | 'label' | 'unit' | 'weight' | 'takesBand' | 'better'>;

const margin = (name: string, label: string, unit: string): Row => ({
  name,
  label,
  unit,
  weight: 'event',
  takesBand: false,
  better: 'higher',
});

/** The table of figures, and the margins of the linear loop. How well the energy account closes is no merit of a design. */
const ROWS: readonly Row[] = [
  ...FIGURES.map((row): Row => (row.name === 'ledger_residual' ? { ...row, better: null } : row)),
  margin('gain_margin', 'Gain margin', ''),
  margin('phase_margin_deg', 'Phase margin', '°'),
];

/** Units whose figures people read to a tenth: half of that is no change. Of others it is 1 in 2000. */
const TENTHS = ['km/h', '%', 's'];
const LEAST = 0.05;
const LEAST_SHARE = 0.0005;
/** Units of figures that grow with the way. */
const GROWING = ['s', 'Wh', 'm', 'km/h·s', '(km/h)²·s', 'km/h·s²'];
/** The record tells jerk to so much. */
const LEAST_JERK = 0.005;
/** Bare ratios: what an energy account may be open by. */
const LEAST_RATIO = 1e-6;

/** A difference that no reader would see is none. */
export function isSame(before: number, after: number, unit: string): boolean {
  const largest = Math.max(Math.abs(before), Math.abs(after));
  const least = TENTHS.includes(unit)
    ? LEAST
    : unit === '1'
      ? LEAST_RATIO
      : unit === 'm/s³'
        ? LEAST_JERK
        : LEAST_SHARE * largest;
  return Math.abs(after - before) <= least;
}

export function changeOf(before: number, after: number, unit: string, better: Row['better']): Change {
  if (isSame(before, after, unit)) return 'same';
  if (better === null) return 'changed';
  return after > before === (better === 'higher') ? 'better' : 'worse';
}

/** Every figure that one of two runs of a candidate has, in the order of the table of figures. */
export function figureChanges(
  before: SummaryCandidate,
  after: SummaryCandidate,
  bands: { readonly before: number; readonly after: number },
): FigureChange[] {
  return ROWS.filter(({ name }) => name in before || name in after).map((row) => {
    const [was, is] = [figureOf(before, row.name), figureOf(after, row.name)];
    const { name, label, unit } = row;
    const found = { figure: name, label, unit, before: was, after: is };
    if (isNone(was) || isNone(is)) {
      const alike = isNone(was) && isNone(is);
      const why = isNone(is) ? `after: ${is.none}` : `before: ${isNone(was) ? was.none : ''}`;
      return { ...found, difference: { none: why }, change: alike ? 'same' : 'not comparable' };
    }
    const why = apart(row, before, after, bands);
    if (why !== null && was !== is) return { ...found, difference: { none: why }, change: 'not comparable' };
    return { ...found, difference: is - was, change: changeOf(was, is, unit, row.better) };
  });
}

function figureOf(candidate: SummaryCandidate, name: string): Figure {
  const value = candidate[name];
  if (typeof value === 'number') return value;
  const reason = candidate[`${name}_reason`];
  return { none: typeof reason === 'string' ? reason : 'that run has no such figure' };
}

/** Why two values of a figure are not of the same thing; null where they are. */
function apart(
  { takesBand, weight, unit }: Row,
  before: SummaryCandidate,
  after: SummaryCandidate,
  bands: { readonly before: number; readonly after: number },
): string | null {
  if (takesBand && bands.before !== bands.after)
    return `the band is ±${bands.before} km/h before and ±${bands.after} km/h after`;
  const grows = unit === 'shifts' || (weight !== 'event' && GROWING.includes(unit));
  const [was, is] = [before.end_m, after.end_m];
  if (!grows || Math.abs(is - was) <= Math.max(1, 0.001 * was)) return null;
  const km = (metres: number) => (metres / 1000).toFixed(2);
  return `over ${km(was)} km before and ${km(is)} km after`;
}

/** The band that the figures of a run count in [km/h]. */
export const bandOf = ({ hold }: ResultSummary): number => hold.band_kmh;
