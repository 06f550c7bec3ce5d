import type { LoopSheet } from '../../study/loop-sheet.ts';
import type { OperatingPoint, PointMargins } from '../../study/operating-point.ts';
import type { PointFigures } from '../../study/point-figures.ts';
import { toDeg, toKmh, toPct } from '../../units/convert.ts';
import { type Cell, type Column, csvText, type JsonRow, jsonRow } from './table.ts';

interface MarginRow {
  readonly candidate: string;
  /** Number of the point, from 1. */
  readonly number: number;
  readonly point: OperatingPoint;
  readonly figures: PointFigures;
}

const UNSTABLE = { none: 'the linear loop is unstable' };

/** A figure of a stable loop; one without an end is none, with its reason. */
function margin(
  value: number | null,
  { stable }: PointMargins,
  unbounded: string,
  convert: (value: number) => number = (one) => one,
): Cell {
  if (!stable) return UNSTABLE;
  return value === null || !Number.isFinite(value) ? { none: unbounded } : convert(value);
}

const NO_GAIN = 'no gain makes it oscillate';
const NO_CROSSOVER = 'the gain never crosses 1';
const FLAT = 'nowhere above 1';

function column(
  name: string,
  decimals: number,
  about: string,
  value: (row: MarginRow) => Cell,
): Column<readonly MarginRow[]> {
  return { name, decimals, about, value: (rows, i) => value(rows[i]!) };
}

/** The same margins with a sampler and without. */
const margins = (
  suffix: string,
  words: string,
  of: (row: MarginRow) => PointMargins,
): readonly Column<readonly MarginRow[]>[] => [
  column(`gain_margin${suffix}`, 4, `factor on the gain at which it oscillates${words}`, (row) =>
    margin(of(row).gainMargin, of(row), NO_GAIN),
  ),
  column(`phase_margin${suffix}_deg`, 3, `lag at the gain crossover at which it does${words}`, (row) =>
    margin(of(row).phaseMargin, of(row), NO_CROSSOVER, toDeg),
  ),
  column(`sensitivity${suffix}`, 4, `Ms, the greatest |1 / (1 + L)|${words}`, (row) =>
    margin(of(row).sensitivity, of(row), FLAT),
  ),
];

/** The columns of margins.csv: one row a candidate and operating point; fields are empty where a figure does not exist. */
export const MARGIN_COLUMNS: readonly Column<readonly MarginRow[]>[] = [
  column('candidate', 0, 'name of the candidate', (row) => row.candidate),
  column('point', 0, 'number of the operating point, from 1', (row) => row.number),
  column('from', 0, 'route: visited; grid: asked for', (row) => row.point.from),
  column('load', 0, 'name of the load; empty: that of the case', (row) => row.point.load),
  column('gear', 0, 'from 1', (row) => row.point.gear + 1),
  column('speed_kmh', 3, 'true speed', (row) => toKmh(row.point.speed)),
  column('grade_pct', 3, 'rise over run', (row) => toPct(row.point.surroundings.grade)),
  column('headwind_m_s', 3, 'positive against travel', (row) => row.point.surroundings.headwind),
  column('throttle_pct', 3, 'throttle that holds the speed', (row) => toPct(row.point.throttle)),
  column('share_of_time_pct', 3, 'of the time that the points of the route stand for', (row) =>
    toPct(row.point.weight),
  ),
  column('stable', 0, 'yes or no: every pole of the closed sampled loop decays', (row) =>
    row.figures.margins.stable ? 'yes' : 'no',
  ),
  ...margins('', '', ({ figures }) => figures.margins),
  column('sensitivity_at_rad_s', 5, 'where |1 / (1 + L)| is greatest', ({ figures }) =>
    margin(figures.margins.sensitivityAt, figures.margins, FLAT),
  ),
  column('gain_crossover_rad_s', 5, 'where the phase margin is taken', ({ figures }) =>
    margin(figures.margins.gainCrossover, figures.margins, NO_CROSSOVER),
  ),
  column('phase_crossover_rad_s', 5, 'where the gain margin is taken', ({ figures }) =>
    margin(figures.margins.phaseCrossover, figures.margins, NO_GAIN),
  ),
  column(
    'least_gain',
    5,
    'factor to which the gain may fall before it oscillates or runs away; 0: it never does',
    ({ figures }) => margin(figures.margins.gainReduction, figures.margins, NO_GAIN),
  ),
  column('delay_margin_s', 4, 'dead time that may be added', ({ figures }) =>
    margin(figures.margins.delayMargin, figures.margins, NO_CROSSOVER),
  ),
  column('bandwidth_rad_s', 5, 'from where |T| stays below its slow value over sqrt(2)', ({ figures }) =>
    margin(figures.margins.bandwidth, figures.margins, 'none within the Nyquist frequency'),
  ),
  ...margins('_continuous', ', without a sampler', ({ figures }) => figures.continuous),
  column('rise_s', 4, 'of a small step of set speed, 10 to 90 %', ({ figures }) =>
    step(figures, ({ rise }) => rise),
  ),
  column('settling_s', 4, 'from when on it stays within 2 %', ({ figures }) =>
    step(figures, ({ settling }) => settling),
  ),
  column('overshoot_pct', 3, 'of that step', ({ figures }) =>
    step(figures, ({ overshoot }) => toPct(overshoot)),
  ),
  column('droop_kmh_per_pct', 4, 'greatest loss of speed after one per cent more of grade', ({ figures }) =>
    figures.load === null ? UNSTABLE : toKmh(figures.load.droop),
  ),
  column('droop_at_s', 3, 'when it is', ({ figures }) =>
    figures.load === null ? UNSTABLE : figures.load.droopAt,
  ),
  column('droop_left_kmh', 4, 'what is left of it in the end', ({ figures }) =>
    figures.load === null ? UNSTABLE : toKmh(figures.load.left),
  ),
];

function step(
  { setSpeed, margins: { stable } }: PointFigures,
  of: (figures: NonNullable<PointFigures['setSpeed']>) => number,
): Cell {
  if (!stable) return UNSTABLE;
  if (setSpeed === null) return { none: 'without an integral it does not come to the set speed' };
  const value = of(setSpeed);
  return Number.isFinite(value) ? value : { none: 'not within ten minutes' };
}

const rowsOf = ({ points, loops }: LoopSheet, which: 'all' | 'worst'): readonly MarginRow[] =>
  loops.flatMap(({ name, figures, order }) =>
    (which === 'worst' ? order.slice(0, 1) : figures.map((_, i) => i)).map((i) => ({
      candidate: name,
      number: i + 1,
      point: points[i]!,
      figures: figures[i]!,
    })),
  );

/** margins.csv, candidate by candidate; the header alone where no loop is linear. */
export function marginsCsv(sheet: LoopSheet): string {
  const rows = rowsOf(sheet, 'all');
  return csvText(MARGIN_COLUMNS, rows, rows.length);
}

/** The row of each candidate's worst point as JSON, by its name; none for one without margins. */
export function worstPoints(sheet: LoopSheet): ReadonlyMap<string, JsonRow> {
  const rows = rowsOf(sheet, 'worst');
  return new Map(
    rows.map(({ candidate }, i) => {
      const { candidate: _, ...figures } = jsonRow(MARGIN_COLUMNS, rows, i);
      return [candidate, figures];
    }),
  );
}
