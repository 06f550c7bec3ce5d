import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { extentOf, plainCurve } from '../model/columns.ts';
import { DEMAND_CLASSES, type DemandClass, demandRuns } from '../model/demand-classes.ts';
import { unfitWords } from '../model/hold-words.ts';
import type { View } from '../model/view.ts';
import type { Paint } from '../paint.ts';
import { fixed, lengthText, placeText, stretchText } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, type Scale } from './axes.ts';
import { type Box, type Canvas, drawing, filled, hatch, rectangle } from './canvas.ts';
import { distanceScale, ELEVATION_HEAD, elevationPlot, roadSpan } from './elevation-plot.ts';
import { areaPath, type Point } from './paths.ts';
import { brackets } from './stretches.ts';

const UNFIT_HEIGHT = 10;

/** Fill of a class of demand; the two that cannot be held have a hatch over it. */
export function demandFill(name: DemandClass, paint: Paint): string {
  const index = { 'hold-back': 0, light: 1, strong: 2, 'near-limit': 3, above: 3, below: 0 } as const;
  return paint.demand[index[name]]!;
}

/** The elevation of the road, the area under it shaded by demand, hills numbered. */
export function profileChart(view: View, canvas: Canvas): Html {
  const { road, hills } = view.result;
  const { paint, id, narrow } = canvas;
  const box: Box = { ...roadSpan(canvas), top: ELEVATION_HEAD, height: narrow ? 150 : 220 };
  const x = distanceScale(road, box);
  const runs = demandRuns(view, (view.length / box.width) * 2);
  const shaded = (smooth: readonly Point[]): readonly Html[] =>
    DEMAND_CLASSES.map(({ name }) => {
      const d = runs
        .filter((run) => run.name === name)
        .map((run) => areaPath(between(smooth, x(toKm(run.from)), x(toKm(run.to))), box.top + box.height))
        .join('');
      const over = name === 'above' ? `url(#${id}-up)` : name === 'below' ? `url(#${id}-down)` : null;
      return html`${filled(d, demandFill(name, paint))}${over !== null && filled(d, over)}`;
    });
  const body = html`<defs>${hatch(`${id}-up`, 'rising', paint.ink, 5)}${hatch(`${id}-down`, 'falling', paint.warn, 5)}</defs>
${elevationPlot(road, canvas, box, x, shaded)}
${unfitStrip(view, canvas, box, x)}${brackets(
  hills.map(({ from, to, number, share }) => ({
    from,
    to,
    text: String(number),
    strong: Math.abs(share) > 1,
  })),
  canvas,
  box,
  x,
)}
${bottomAxis(canvas, box, x, `${view.distanceName} / km`)}`;
  const [low, high] = extentOf([plainCurve(road.distance, road.elevation)]) ?? [0, 1];
  const words = {
    title: 'The road: elevation and demand on the drive',
    desc: `Elevation from ${fixed(low)} m to ${fixed(high)} m over ${lengthText(view.length)}. ${hills.length} hills. ${runs
      .filter((run) => run.name === 'above' || run.name === 'below')
      .slice(0, 6)
      .map(
        (run) =>
          `${run.name === 'above' ? 'More than there is' : 'Below the least force'} near ${placeText(run.from)}.`,
      )
      .join(
        ' ',
      )}${(view.result.bends?.unfit ?? []).map(({ from, to }) => ` Speed hold does not belong at ${stretchText(from, to)}.`).join('')}`,
  };
  return drawing(canvas, box.top + box.height + BOTTOM_AXIS_HEIGHT, words, body);
}

/** Along the lower edge: where speed hold does not belong, cross-hatched. */
function unfitStrip(
  { result: { bends }, speed }: View,
  { paint, id }: Canvas,
  box: Box,
  x: Scale,
): Html | null {
  const places = bends?.unfit ?? [];
  if (places.length === 0) return null;
  const top = box.top + box.height - UNFIT_HEIGHT;
  return html`<defs>${hatch(`${id}-no`, 'rising', paint.warn, 4)}${hatch(`${id}-no2`, 'falling', paint.warn, 4)}</defs>${places.map(
    (place) => {
      const left = x(toKm(place.from));
      const strip = { left, top, width: Math.max(3, x(toKm(place.to)) - left), height: UNFIT_HEIGHT };
      return html`<g><title>${`speed hold does not belong, ${stretchText(place.from, place.to)}: ${unfitWords(place, speed)}`}</title>${rectangle(strip, paint.page)}${rectangle(strip, `url(#${id}-no)`)}${rectangle(strip, `url(#${id}-no2)`)}</g>`;
    },
  )}`;
}

/** The part of a line between two places, its ends interpolated; x increases. */
function between(points: readonly Point[], from: number, to: number): readonly Point[] {
  const at = (place: number): Point | null => {
    const next = points.findIndex((p) => p[0] >= place);
    if (next <= 0) return next === 0 ? [place, points[0]![1]] : [place, points[points.length - 1]?.[1] ?? 0];
    const [a, b] = [points[next - 1]!, points[next]!];
    return [place, a[1] + ((b[1] - a[1]) * (place - a[0])) / (b[0] - a[0])];
  };
  const inside = points.filter((p) => p[0] > from && p[0] < to);
  return [at(from), ...inside, at(to)].filter((p) => p !== null);
}
