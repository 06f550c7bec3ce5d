import type { Bend } from '../../road/bend.ts';
import type { BendPlan, BendStop, UnfitPlace } from '../../study/bend-plan.ts';
import { toKm, toKmh } from '../../units/convert.ts';
import { type Json, numbers } from './json-parts.ts';
import { type Column, csvText, type JsonRow, jsonRow } from './table.ts';

interface BendRow {
  readonly bend: Bend;
  readonly stop: BendStop;
  /** True speed at which it is ridden [m/s]. */
  readonly ridden: number;
  /** The place it is in where speed hold does not belong; null: none. */
  readonly unfit: UnfitPlace | null;
}
type Rows = readonly BendRow[];

/** The columns of bends.csv, and the keys of `bends.list[]` in summary.json: one row a bend. */
export const BEND_COLUMNS: readonly Column<Rows>[] = [
  { name: 'bend', decimals: 0, about: 'number of the bend, from 1', value: (_, i) => i + 1 },
  { name: 'from_km', decimals: 4, about: 'its start', value: (rows, i) => toKm(rows[i]!.bend.from) },
  { name: 'to_km', decimals: 4, about: 'its end', value: (rows, i) => toKm(rows[i]!.bend.to) },
  {
    name: 'sharpest_km',
    decimals: 4,
    about: 'where it is sharpest',
    value: (rows, i) => toKm(rows[i]!.bend.sharpestAt),
  },
  { name: 'side', decimals: 0, about: 'left or right', value: (rows, i) => rows[i]!.bend.side },
  {
    name: 'radius_m',
    decimals: 1,
    about: 'radius in plan where it is sharpest',
    value: (rows, i) => 1 / rows[i]!.bend.curvature,
  },
  {
    name: 'allowed_kmh',
    decimals: 3,
    about: 'true speed at which the lateral acceleration is the greatest that the rider rides',
    value: (rows, i) => toKmh(rows[i]!.bend.speed),
  },
  {
    name: 'ridden_kmh',
    decimals: 3,
    about: 'true speed to which the rider brakes for it: not above what it allows, nor too fast for the next',
    value: (rows, i) => toKmh(rows[i]!.ridden),
  },
  {
    name: 'brakes_km',
    decimals: 4,
    about: 'where the rider begins to brake for it or for those before it, which ends hold',
    value: (rows, i) => toKm(rows[i]!.stop.from),
  },
  {
    name: 'resumes_km',
    decimals: 4,
    about: 'where the rider resumes behind it or behind those after it; empty: they do not',
    value: (rows, i) => (rows[i]!.stop.resumes ? toKm(rows[i]!.stop.to) : null),
  },
  {
    name: 'no_hold',
    decimals: 0,
    about:
      'why speed hold does not belong there: bends_follow or below_lowest; empty where nothing speaks against it',
    value: (rows, i) => rows[i]!.unfit?.reason ?? '',
  },
];

function rowsOf({ bends, stops, unfit }: BendPlan): Rows {
  return stops.flatMap((stop) =>
    stop.speeds.map((ridden, k): BendRow => {
      const bend = bends[stop.first + k]!;
      const place = unfit.find(({ from, to }) => bend.from >= from && bend.from < to);
      return { bend, stop, ridden, unfit: place ?? null };
    }),
  );
}

/** bends.csv: the bends that ask for less than the set speed, in order along the way. */
export function bendsCsv(plan: BendPlan): string {
  const rows = rowsOf(plan);
  return csvText(BEND_COLUMNS, rows, rows.length);
}

/** `bends` of summary.json: how they are ridden, the bends, and where speed hold does not belong. */
export function bendsJson(plan: BendPlan): Json {
  const { riding, resolution, unfit } = plan;
  const rows = rowsOf(plan);
  return {
    ...numbers({
      max_lateral_m_s2: riding.maxLateral,
      brake_m_s2: riding.deceleration,
      resolution_m: resolution,
    }),
    list: rows.map((_, i): JsonRow => jsonRow(BEND_COLUMNS, rows, i)),
    no_hold: unfit.map(({ from, to, reason, bends, lowestSpeed }) => ({
      ...numbers({ from_km: toKm(from), to_km: toKm(to) }),
      reason,
      bends,
      ...numbers({ lowest_kmh: toKmh(lowestSpeed) }),
    })),
  };
}
