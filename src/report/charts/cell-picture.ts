import type { CellPicture } from '../../run/matrix-result.ts';
import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import type { CandidateView, View } from '../model/view.ts';
import { changeText, placeText } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, leftAxis, scaleOf } from './axes.ts';
import {
  type Box,
  type Canvas,
  clip,
  clipped,
  drawing,
  filled,
  rectangle,
  segment,
  stroked,
} from './canvas.ts';
import { envelopePath, linePath, type Point } from './paths.ts';

/** Shown to both sides of the place [m]. */
const REACH = 600;

/**
 * Speed error over distance around the place where a figure was worst: the mean of each bin with its least and
 * greatest. The scales are given, so that pictures beside each other can be compared.
 *
 * @param errors least and greatest error of the scale, in the reader's unit
 */
export function cellPicture(
  view: View,
  picture: CellPicture,
  candidate: CandidateView,
  errors: readonly [number, number],
  canvas: Canvas,
): Html {
  const { paint, id } = canvas;
  const { of, axis } = view.speed;
  const box: Box = { left: 34, top: 22, width: canvas.width - 40, height: 88 };
  const x = scaleOf([toKm(picture.at - REACH), toKm(picture.at + REACH)], box.left, box.left + box.width);
  const y = scaleOf(errors, box.top + box.height, box.top);
  const points = (values: Float64Array): Point[] =>
    Array.from(values, (value, i) => [x(toKm(picture.distance[i]!)), y(of(value))]);
  const band = of(view.result.band);
  const stroke = paint.series[candidate.colour]!;
  const body = html`<defs>${clip(`${id}-c`, box)}</defs>${clipped(
    `${id}-c`,
    rectangle({ left: box.left, top: y(band), width: box.width, height: y(-band) - y(band) }, paint.band),
  )}${leftAxis(canvas, box, y, `speed error / ${axis}`, 3)}${clipped(
    `${id}-c`,
    html`${filled(envelopePath(points(picture.low), points(picture.high)), stroke, 0.28)}${stroked(
      linePath(points(picture.mean)),
      { stroke, width: 1.5, dash: candidate.dash },
    )}${segment(x(toKm(picture.at)), box.top, x(toKm(picture.at)), box.top + box.height, { stroke: paint.warn, dash: '4 2' })}`,
  )}${bottomAxis({ ...canvas, narrow: true }, box, x, `${view.distanceName} / km`)}`;
  const words = {
    title: `Speed error around ${placeText(picture.at)}`,
    desc: `${candidate.name}: from ${changeText(leastOf(picture.low), view.speed)} to ${changeText(-leastOf(picture.high.map((e) => -e)), view.speed)} within ${REACH} m.`,
  };
  return drawing(canvas, box.top + box.height + BOTTOM_AXIS_HEIGHT, words, body);
}

const leastOf = (values: Float64Array): number => values.reduce((low, value) => Math.min(low, value), 0);

/** Errors further out are cut off: a run that stalls would squeeze the rest [m/s]. */
const FARTHEST = 5;

/** One scale for all pictures, in the reader's unit: what they show, a little beyond the band at least. */
export function errorScale(view: View, pictures: readonly CellPicture[]): readonly [number, number] {
  const band = 1.5 * view.result.band;
  const low = pictures.reduce((least, picture) => Math.min(least, leastOf(picture.low)), -band);
  const high = pictures.reduce(
    (most, picture) => Math.max(most, -leastOf(picture.high.map((e) => -e))),
    band,
  );
  return [view.speed.of(Math.max(low, -FARTHEST)), view.speed.of(Math.min(high, FARTHEST))];
}

/** The scale does not hold all of it. */
export const isCutOff = (
  view: View,
  { low, high }: CellPicture,
  errors: readonly [number, number],
): boolean =>
  low.some((e) => view.speed.of(e) < errors[0] - 1e-9) ||
  high.some((e) => view.speed.of(e) > errors[1] + 1e-9);
