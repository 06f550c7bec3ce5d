import type { Road } from '../../road/road.ts';
import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { columnsOf, extentOf, plainCurve } from '../model/columns.ts';
import { lengthOf } from '../model/road-words.ts';
import { leftAxis, type Scale, scaleOf } from './axes.ts';
import { type Box, type Canvas, label, segment, stroked } from './canvas.ts';
import { linePath, type Point } from './paths.ts';
import { repairMark } from './repair-marks.ts';
import { BRACKETS_HEIGHT, stretchBands } from './stretches.ts';

/** Height above the plot: its name, and a row of brackets. */
export const ELEVATION_HEAD = BRACKETS_HEIGHT + 24;

/** Where the plots of a road stand in a drawing, from left to right. */
export const roadSpan = ({ width, narrow }: Canvas): { readonly left: number; readonly width: number } => ({
  left: narrow ? 40 : 52,
  width: width - (narrow ? 48 : 66),
});

/** Distance in km over the whole road. */
export const distanceScale = (road: Road, box: Pick<Box, 'left' | 'width'>): Scale =>
  scaleOf([0, toKm(lengthOf(road))], box.left, box.left + box.width);

/**
 * Elevation over distance, but for the axis below: raw faint, smooth strong, masks, warnings' stretches and repairs at
 * their places, and where the way turns round.
 *
 * @param under drawn beneath the lines, from the smooth line as it is drawn [user units]
 */
export function elevationPlot(
  road: Road,
  canvas: Canvas,
  box: Box,
  x: Scale,
  under: (smooth: readonly Point[]) => readonly Html[] = () => [],
): Html {
  const { paint, narrow } = canvas;
  const bottom = box.top + box.height;
  // Spikes of the raw elevation are clipped by the scale of the smooth one where they would flatten it.
  const [low, high] = extentOf([plainCurve(road.distance, road.elevation)]) ?? [0, 1];
  const room = Math.max(8, (high - low) * 0.15);
  const y = scaleOf([low - room * 1.2, high + room], bottom, box.top);
  const points = (values: Float64Array, pick: 'mean' | 'low' | 'high'): Point[] =>
    columnsOf(plainCurve(road.distance, values), 0, lengthOf(road) / box.width).map((c) => [
      x(toKm(c.at)),
      Math.min(bottom, Math.max(box.top, y(c[pick]))),
    ]);
  const smooth = points(road.elevation, 'mean');
  const raw = road.rawElevation;
  const faint = { stroke: paint.muted, opacity: 0.55, width: 0.8 };
  return html`${leftAxis(canvas, box, y, '')}${label(0, box.top - ELEVATION_HEAD + 12, narrow ? 'elevation / m' : 'elevation above sea level / m', { bold: true, fill: paint.ink })}
${stretchBands(road, canvas, box, x, true)}
${under(smooth)}
${raw !== null && html`${stroked(linePath(points(raw, 'low')), faint)}${stroked(linePath(points(raw, 'high')), faint)}`}
${stroked(linePath(smooth), { stroke: paint.ink, width: 1.8 })}
${road.repairs.map((repair) => repairMark(x(toKm((repair.from + repair.to) / 2)), bottom - 7, repair.kind, paint))}
${road.turnsAt !== null && html`${segment(x(toKm(road.turnsAt)), box.top, x(toKm(road.turnsAt)), bottom, { stroke: paint.ink, dash: '6 3' })}${label(x(toKm(road.turnsAt)) + 4, box.top + 12, 'turns round', { size: 11, fill: paint.ink })}`}`;
}
