import type { Road } from '../../road/road.ts';
import type { RepairKind } from '../../track/track.ts';
import { type Html, html } from '../html.ts';
import { extentOf, plainCurve } from '../model/columns.ts';
import { lengthOf } from '../model/road-words.ts';
import { fixed, lengthText, type SpeedUnit } from '../quantity.ts';
import { bottomAxis } from './axes.ts';
import { type Box, type Canvas, drawing, type LineLook, label, rectangle, segment } from './canvas.ts';
import { distanceScale, ELEVATION_HEAD, elevationPlot, roadSpan } from './elevation-plot.ts';
import { type KeyItem, keyRows, SIGN_WIDTH } from './key-row.ts';
import { REPAIR_KINDS, repairMark } from './repair-marks.ts';
import { gradeWords, roadLanes } from './road-lanes.ts';
import { brackets, WARNED_OPACITY, warnedStretches } from './stretches.ts';

const HEADING = 26;

/** A road alone: elevation with what was repaired, masked and warned of; grade with its uncertainty; wind. */
export function roadChart(road: Road, speed: SpeedUnit, canvas: Canvas): Html {
  const { paint } = canvas;
  const box: Box = { ...roadSpan(canvas), top: HEADING + ELEVATION_HEAD, height: 220 };
  const x = distanceScale(road, box);
  const lanes = roadLanes(road, speed, canvas, box.top + box.height + 44);
  const key = keyRows(keyOf(road, canvas), 0, lanes.bottom + 22, canvas.width, paint.ink);
  const warned = warnedStretches(road).toSorted((a, b) => a.from - b.from);
  const body = html`${label(0, 14, `${road.name}, ${lengthText(lengthOf(road))}`, { size: 14, bold: true, fill: paint.ink })}
${elevationPlot(road, canvas, box, x)}
${brackets(
  warned.map(({ name, from, to }) => ({ from, to, text: name, strong: true })),
  canvas,
  box,
  x,
)}
${bottomAxis(canvas, box, x, null)}
${lanes.body}
${key.body}`;
  const [low, high] = extentOf([plainCurve(road.distance, road.elevation)]) ?? [0, 0];
  const words = {
    title: `The road ${road.name}`,
    desc: `Elevation from ${fixed(low)} m to ${fixed(high)} m over ${lengthText(lengthOf(road))}. ${gradeWords(road)} ${warned.map(({ message }) => message).join(' ')}`,
  };
  return drawing(canvas, lanes.bottom + 6 + key.height, words, body);
}

function keyOf(road: Road, { paint }: Canvas): readonly KeyItem[] {
  const line = (text: string, look: LineLook): KeyItem => ({
    sign: (left, middle) => segment(left, middle, left + SIGN_WIDTH, middle, look),
    text,
  });
  const box = (text: string, fill: string, opacity = 1): KeyItem => ({
    sign: (left, middle) =>
      rectangle({ left, top: middle - 6, width: SIGN_WIDTH, height: 12 }, fill, opacity),
    text,
  });
  const counts = new Map<RepairKind, number>();
  for (const { kind } of road.repairs) counts.set(kind, (counts.get(kind) ?? 0) + 1);
  const { smoothing, rawElevation, masks } = road;
  const warned = warnedStretches(road).length;
  return [
    line(smoothing === null ? 'as given' : `smoothed, half gain at ${lengthText(smoothing.wavelength)}`, {
      stroke: paint.ink,
      width: 1.8,
    }),
    ...(rawElevation === null ? [] : [line('as measured', { stroke: paint.muted, opacity: 0.55 })]),
    ...(masks.length > 0 ? [box(`elevation masked (${masks.length})`, paint.grid)] : []),
    ...(warned > 0 ? [box(`stretch with a warning (${warned})`, paint.warn, WARNED_OPACITY)] : []),
    ...[...counts].map(
      ([kind, count]): KeyItem => ({
        sign: (left, middle) => repairMark(left + SIGN_WIDTH / 2, middle, kind, paint),
        text: `${REPAIR_KINDS[kind].words} (${count})`,
      }),
    ),
  ];
}
