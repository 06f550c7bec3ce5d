import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { columnsOf, extentOf, plainCurve } from '../model/columns.ts';
import { DEMAND_CLASSES, type DemandClass, demandRuns } from '../model/demand-classes.ts';
import type { View } from '../model/view.ts';
import type { Paint } from '../paint.ts';
import { fixed, lengthText, placeText } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, leftAxis, type Scale, scaleOf } from './axes.ts';
import {
  type Box,
  type Canvas,
  drawing,
  filled,
  hatch,
  label,
  rectangle,
  segment,
  stroked,
  tenth,
  textWidth,
} from './canvas.ts';
import { areaPath, linePath, type Point } from './paths.ts';
import { repairMark } from './repair-marks.ts';

const STRIP = 22;

/** Fill of a class of demand; the two that cannot be held have a hatch over it. */
export function demandFill(name: DemandClass, paint: Paint): string {
  const index = { 'hold-back': 0, light: 1, strong: 2, 'near-limit': 3, above: 3, below: 0 } as const;
  return paint.demand[index[name]]!;
}

/** Elevation over distance: raw faint, smooth strong, the area under it shaded by demand, hills numbered, repairs at their places. */
export function profileChart(view: View, canvas: Canvas): Html {
  const { road, hills } = view.result;
  const { paint, id, narrow } = canvas;
  const box: Box = {
    left: narrow ? 40 : 52,
    top: 24 + STRIP,
    width: canvas.width - (narrow ? 48 : 66),
    height: narrow ? 150 : 220,
  };
  const x = scaleOf([0, toKm(view.length)], box.left, box.left + box.width);
  const curves = [road.elevation, ...(road.rawElevation === null ? [] : [road.rawElevation])].map((values) =>
    plainCurve(road.distance, values),
  );
  // Spikes of the raw elevation are clipped by the scale of the smooth one where they would flatten it.
  const [low, high] = extentOf(curves.slice(0, 1)) ?? [0, 1];
  const room = Math.max(8, (high - low) * 0.15);
  const y = scaleOf([low - room * 1.2, high + room], box.top + box.height, box.top);
  const column = view.length / box.width;
  const points = (values: Float64Array, pick: 'mean' | 'low' | 'high', width: number): Point[] =>
    columnsOf(plainCurve(road.distance, values), 0, width).map((c) => [x(toKm(c.at)), y(c[pick])]);
  const smooth = points(road.elevation, 'mean', column);
  const runs = demandRuns(view, column * 2);
  const areas = DEMAND_CLASSES.map(({ name }) => {
    const d = runs
      .filter((run) => run.name === name)
      .map((run) => areaPath(between(smooth, x(toKm(run.from)), x(toKm(run.to))), box.top + box.height))
      .join('');
    const over = name === 'above' ? `url(#${id}-up)` : name === 'below' ? `url(#${id}-down)` : null;
    return html`${filled(d, demandFill(name, paint))}${over !== null && filled(d, over)}`;
  });
  const raw = road.rawElevation;
  const clamp = (point: Point): Point => [
    point[0],
    Math.min(box.top + box.height, Math.max(box.top, point[1])),
  ];
  const body = html`<defs>${hatch(`${id}-up`, 'rising', paint.ink, 5)}${hatch(`${id}-down`, 'falling', paint.warn, 5)}</defs>
${leftAxis(canvas, box, y, '')}${label(0, 12, narrow ? 'elevation / m' : 'elevation above sea level / m', { bold: true, fill: paint.ink })}
${road.masks.map((mask) => maskBand(x, box, mask.from, mask.to, mask.reason, canvas))}
${areas}
${
  raw !== null &&
  html`${stroked(linePath(points(raw, 'low', column).map(clamp)), { stroke: paint.muted, opacity: 0.55, width: 0.8 })}${stroked(
    linePath(points(raw, 'high', column).map(clamp)),
    { stroke: paint.muted, opacity: 0.55, width: 0.8 },
  )}`
}
${stroked(linePath(smooth), { stroke: paint.ink, width: 1.8 })}
${road.repairs.map((repair) => repairMark(x(toKm((repair.from + repair.to) / 2)), box.top + box.height - 7, repair.kind, paint))}
${hillStrip(view, canvas, x, box)}
${road.turnsAt !== null && html`${segment(x(toKm(road.turnsAt)), box.top, x(toKm(road.turnsAt)), box.top + box.height, { stroke: paint.ink, dash: '6 3' })}${label(x(toKm(road.turnsAt)) + 4, box.top + 12, 'turns round', { size: 11, fill: paint.ink })}`}
${bottomAxis(canvas, box, x, `${view.distanceName} / km`)}`;
  const words = {
    title: 'The road: elevation and demand on the drive',
    desc: `Elevation from ${fixed(low)} m to ${fixed(high)} m over ${lengthText(view.length)}. ${hills.length} hills. ${runs
      .filter((run) => run.name === 'above' || run.name === 'below')
      .slice(0, 6)
      .map(
        (run) =>
          `${run.name === 'above' ? 'More than there is' : 'Below the least force'} near ${placeText(run.from)}.`,
      )
      .join(' ')}`,
  };
  return drawing(canvas, box.top + box.height + BOTTOM_AXIS_HEIGHT, words, body);
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

function maskBand(x: Scale, box: Box, from: number, to: number, reason: string, { paint }: Canvas): Html {
  const [left, right] = [x(toKm(from)), x(toKm(to))];
  return html`<g><title>${`masked: ${reason}`}</title>${rectangle({ left, top: box.top, width: Math.max(2, right - left), height: box.height }, paint.grid)}${label(
    (left + right) / 2,
    box.top + 11,
    'masked',
    { anchor: 'middle', size: 10, fill: paint.muted },
  )}</g>`;
}

/** Bars with numbers above the plot: where the hills are. A number that would meet the one before it is left out. */
function hillStrip(view: View, { paint }: Canvas, x: Scale, box: Box): Html {
  const y = box.top - 8;
  let free = Number.NEGATIVE_INFINITY;
  return html`<g>${view.result.hills.map((hill) => {
    const [left, right] = [x(toKm(hill.from)), Math.max(x(toKm(hill.to)), x(toKm(hill.from)) + 2)];
    const middle = (left + right) / 2;
    const half = textWidth(String(hill.number), 11) / 2 + 1;
    const fits = middle - half > free;
    if (fits) free = middle + half;
    const stroke = Math.abs(hill.share) > 1 ? paint.warn : paint.muted;
    return html`<path d="M${tenth(left)},${tenth(y + 4)}V${tenth(y)}H${tenth(right)}V${tenth(y + 4)}" fill="none" stroke="${stroke}" stroke-width="1.5"/>${
      fits &&
      label(middle, y - 4, String(hill.number), {
        anchor: 'middle',
        size: 11,
        bold: Math.abs(hill.share) > 1,
        fill: paint.ink,
      })
    }`;
  })}</g>`;
}
