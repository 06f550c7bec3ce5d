import type { Road } from '../../road/road.ts';
import { toDeg, toPct } from '../../units/convert.ts';
import { type Column, csvText } from './table.ts';

/** A heading [rad] in degrees that stays below 360.00 when it is rounded. */
function headingDeg(angle: number): number {
  const degrees = toDeg(angle);
  return degrees >= 359.995 ? 0 : degrees;
}

/** The columns of disturbance.csv: one row a knot of the road. */
export const DISTURBANCE_COLUMNS: readonly Column<Road>[] = [
  {
    name: 'distance_m',
    decimals: 2,
    about: 'horizontal distance from the driven start',
    value: (r, i) => r.distance[i]!,
  },
  { name: 'elevation_m', decimals: 3, about: 'smoothed elevation', value: (r, i) => r.elevation[i]! },
  {
    name: 'raw_elevation_m',
    decimals: 2,
    about: 'elevation as measured, outliers included; empty for a written road',
    value: (r, i) => (r.rawElevation === null ? null : r.rawElevation[i]!),
  },
  {
    name: 'grade_pct',
    decimals: 4,
    about: 'rise over horizontal run, positive uphill',
    value: (r, i) => toPct(r.grade[i]!),
  },
  {
    name: 'grade_sd_pct',
    decimals: 4,
    about: 'one standard deviation of the grade',
    value: (r, i) => toPct(r.gradeSd[i]!),
  },
  {
    name: 'heading_deg',
    decimals: 2,
    about: 'clockwise from true north; empty where unknown',
    value: (r, i) => (r.heading === null ? null : headingDeg(r.heading[i]!)),
  },
  {
    name: 'curvature_per_m',
    decimals: 6,
    about: 'of the plan, positive to the right; empty where the heading is unknown',
    value: (r, i) => (r.curvature === null ? null : r.curvature[i]!),
  },
  {
    name: 'headwind_m_s',
    decimals: 3,
    about: 'positive against travel, at rider height',
    value: (r, i) => r.headwind[i]!,
  },
  {
    name: 'crosswind_m_s',
    decimals: 3,
    about: 'positive from the right, at rider height',
    value: (r, i) => r.crosswind[i]!,
  },
  {
    name: 'air_density_kg_m3',
    decimals: 5,
    about: 'air density at that altitude',
    value: (r, i) => r.airDensity[i]!,
  },
];

/** disturbance.csv: what the road does to the vehicle, knot by knot. Two rows of one distance mark a step. */
export function disturbanceCsv(road: Road): string {
  return csvText(DISTURBANCE_COLUMNS, road, road.size);
}
