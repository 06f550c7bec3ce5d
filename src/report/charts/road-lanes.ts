import { medianOf } from '../../numeric/running-median.ts';
import type { Road } from '../../road/road.ts';
import { toKm, toPct } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { type Curve, columnsOf, everyValue, extentOf, plainCurve } from '../model/columns.ts';
import { distanceNameOf, lengthOf } from '../model/road-words.ts';
import { gradeText, type SpeedUnit, shareText } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, leftAxis, type Scale, scaleOf } from './axes.ts';
import {
  type Box,
  type Canvas,
  clip,
  clipped,
  drawing,
  filled,
  type LineLook,
  rectangle,
  segment,
  stroked,
  textWidth,
} from './canvas.ts';
import { distanceScale, roadSpan } from './elevation-plot.ts';
import { type KeyItem, keyRows, SIGN_WIDTH } from './key-row.ts';
import { envelopePath, linePath, type Point } from './paths.ts';
import { stretchBands } from './stretches.ts';

/** Room above each lane for its name and its key. */
const HEAD = 38;
const BAND_OPACITY = 0.4;

interface Lane {
  readonly name: string;
  readonly height: number;
  /** Least and greatest value, in the unit of the lane. */
  readonly domain: readonly [number, number];
  readonly key: readonly KeyItem[];
  readonly draw: (x: Scale, y: Scale) => Html;
}

/** The grade of the road over distance with its uncertainty, below it the wind where there is any: a drawing of its own. */
export function roadLanesChart(road: Road, speed: SpeedUnit, canvas: Canvas): Html {
  const { body, bottom } = roadLanes(road, speed, canvas, HEAD - 12);
  const words = {
    title: `Grade${hasWind(road) ? ' and wind' : ''} over ${distanceNameOf(road)}`,
    desc: gradeWords(road),
  };
  return drawing(canvas, bottom, words, body);
}

/**
 * The same as a part of a drawing.
 *
 * @param top of the first plot, with 26 user units of room above it
 * @returns the drawing, and where it ends below the axis
 */
export function roadLanes(
  road: Road,
  speed: SpeedUnit,
  canvas: Canvas,
  top: number,
): { readonly body: Html; readonly bottom: number } {
  const { id, narrow, paint } = canvas;
  const span = roadSpan(canvas);
  const x = distanceScale(road, span);
  const lanes = [gradeLane(road, canvas, span.width), ...windLane(road, speed, canvas, span.width)];
  let at = top;
  const body = lanes.map((lane, i) => {
    const box: Box = { ...span, top: at, height: narrow ? Math.round(lane.height * 0.8) : lane.height };
    at += box.height + HEAD;
    const y = scaleOf(lane.domain, box.top + box.height, box.top);
    const from = textWidth(lane.name) + 22;
    const clipId = `${id}-lane-${i}`;
    return html`<defs>${clip(clipId, box)}</defs>${stretchBands(road, canvas, box, x, false)}${leftAxis(canvas, box, y, lane.name, Math.max(2, Math.floor(box.height / 26)))}${
      keyRows(lane.key, from, box.top - 9, canvas.width - from, paint.ink).body
    }${clipped(clipId, lane.draw(x, y))}${bottomAxis(canvas, box, x, i === lanes.length - 1 ? `${distanceNameOf(road)} / km` : null)}`;
  });
  return { body: html`${body}`, bottom: at - HEAD + BOTTOM_AXIS_HEIGHT };
}

/** Every knot where there are fewer than columns of the picture, so that a step stays one; else columns. */
const drawnOf = (road: Road, curve: Curve, columns: number) =>
  curve.size <= columns ? everyValue(curve) : columnsOf(curve, 0, lengthOf(road) / columns);

function gradeLane(road: Road, { paint, narrow }: Canvas, columns: number): Lane {
  const { grade, gradeSd, distance, size } = road;
  const uncertain = gradeSd.some((sd) => sd > 0);
  const band: Curve = {
    size,
    at: distance,
    low: grade.map((g, i) => g - 2 * gradeSd[i]!),
    mean: grade,
    high: grade.map((g, i) => g + 2 * gradeSd[i]!),
  };
  const [low, high] = extentOf([plainCurve(distance, grade)]) ?? [0, 0];
  // Bridged gaps and the ends may be so uncertain that their band would flatten the rest: it leaves the plot there.
  const room = 2.5 * medianOf(gradeSd) + 0.06 * (high - low) + 0.002;
  const shade: KeyItem = {
    sign: (left, middle) =>
      rectangle({ left, top: middle - 6, width: SIGN_WIDTH, height: 12 }, paint.series[1]!, BAND_OPACITY),
    text: narrow ? '±2 s.d.' : '±2 standard deviations of the grade',
  };
  return {
    name: 'grade / %',
    height: 160,
    domain: [toPct(Math.min(0, low) - room), toPct(Math.max(0, high) + room)],
    key: uncertain ? [shade] : [],
    draw: (x, y) => {
      const edges = drawnOf(road, band, columns);
      const line = drawnOf(road, plainCurve(distance, grade), columns);
      const points = (of: typeof line, pick: 'low' | 'mean' | 'high'): Point[] =>
        of.map((c) => [x(toKm(c.at)), y(toPct(c[pick]))]);
      // Within a column as wide as several knots the grade has its extremes: none is lost.
      return html`${uncertain && filled(envelopePath(points(edges, 'low'), points(edges, 'high')), paint.series[1]!, BAND_OPACITY)}${filled(
        envelopePath(points(line, 'low'), points(line, 'high')),
        paint.ink,
        0.4,
      )}${stroked(linePath(points(line, 'mean')), { stroke: paint.ink, width: 1.1 })}`;
    },
  };
}

/** Head- or crosswind somewhere. */
export const hasWind = ({ headwind, crosswind }: Road): boolean =>
  headwind.some((w) => w !== 0) || crosswind.some((w) => w !== 0);

function windLane(road: Road, speed: SpeedUnit, { paint, narrow }: Canvas, columns: number): readonly Lane[] {
  if (!hasWind(road)) return [];
  const { distance, headwind, crosswind } = road;
  const lines: readonly { readonly values: Float64Array; readonly text: string; readonly look: LineLook }[] =
    [
      {
        values: headwind,
        text: narrow ? 'ahead' : 'headwind, positive against travel',
        look: { stroke: paint.series[1]!, width: 1.5 },
      },
      {
        values: crosswind,
        text: narrow ? 'from the right' : 'crosswind, positive from the right',
        look: { stroke: paint.series[2]!, width: 1.5, dash: '5 3' },
      },
    ];
  const shown = lines.filter(({ values }) => values === headwind || values.some((w) => w !== 0));
  const [low, high] = extentOf(shown.map(({ values }) => plainCurve(distance, values))) ?? [0, 0];
  const room = 0.08 * (Math.max(0, high) - Math.min(0, low));
  return [
    {
      name: `wind / ${speed.axis}`,
      height: 90,
      domain: [speed.of(Math.min(0, low) - room), speed.of(Math.max(0, high) + room)],
      key: shown.map(({ text, look }) => ({
        sign: (left, middle) => segment(left, middle, left + SIGN_WIDTH, middle, look),
        text,
      })),
      draw: (x, y) =>
        html`${shown.map(({ values, look }) => {
          const line = drawnOf(road, plainCurve(distance, values), columns);
          return stroked(linePath(line.map((c): Point => [x(toKm(c.at)), y(speed.of(c.mean))])), look);
        })}`,
    },
  ];
}

/** Its range and its usual uncertainty, for those who do not see the picture. */
export function gradeWords(road: Road): string {
  const [low, high] = extentOf([plainCurve(road.distance, road.grade)]) ?? [0, 0];
  const sd = medianOf(road.gradeSd);
  const known =
    sd > 0
      ? `one standard deviation ${shareText(sd, 2)} at the median`
      : 'taken as given, without uncertainty';
  return `Grade from ${gradeText(low)} to ${gradeText(high)}, ${known}.`;
}
