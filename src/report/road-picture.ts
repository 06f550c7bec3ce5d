import type { Road } from '../road/road.ts';
import { chartOnWhite } from './chart-on-white.ts';
import { roadChart } from './charts/road-chart.ts';
import { FILE_PAINT } from './paint.ts';
import { SPEED_UNITS } from './quantity.ts';
import type { ReportOptions } from './render-report.ts';

/** road.svg: the picture of a road alone, complete SVG on white. */
export function roadPicture(road: Road, { units }: ReportOptions): string {
  const canvas = { id: 'road', paint: FILE_PAINT, width: 980, narrow: false };
  return chartOnWhite(roadChart(road, SPEED_UNITS[units], canvas));
}
