import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { binCurve } from '../model/bin-curves.ts';
import { type Curve, columnsOf, extentOf, peaksOf, unbrokenRuns } from '../model/columns.ts';
import { rideCurves } from '../model/ride-curves.ts';
import type { CandidateView, RideView, View } from '../model/view.ts';
import type { Paint } from '../paint.ts';
import { bandText, changeText, placeText } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, leftAxis, type Scale, scaleOf } from './axes.ts';
import {
  type Box,
  type Canvas,
  clip,
  clipped,
  drawing,
  filled,
  label,
  rectangle,
  segment,
  stroked,
  textWidth,
} from './canvas.ts';
import { cycleMarks } from './cycle-marks.ts';
import { holdBrackets, holdColumns, holdHead } from './hold-brackets.ts';
import { curveOf, curvesOfRide, type LaneLook, laneLooks } from './lane-looks.ts';
import { BREAK, envelopePath, linePath, type Point } from './paths.ts';
import { rideLine, rideSign } from './ride-line.ts';

/** Columns of two user units: what a screen can tell apart, and half the bytes. */
const COLUMN = 2;
/** Columns in a user unit of a line without a shade around it. */
const FINE = 2;

/** All lanes under one another over the same distance. */
export function lanesChart(view: View, canvas: Canvas): Html {
  const looks = laneLooks(view);
  const { narrow, id } = canvas;
  const left = narrow ? 40 : 52;
  const width = canvas.width - left - (narrow ? 10 : 118);
  const gap = 38;
  let top = 26 + holdHead(view);
  const parts = looks.map((look, i) => {
    const box: Box = { left, top, width, height: narrow ? Math.round(look.height * 0.8) : look.height };
    top += box.height + gap;
    return oneLane(view, { ...canvas, id: `${id}-${i}` }, look, box, i === 0, i === looks.length - 1);
  });
  const words = {
    title: `${looks[0]!.name} and what drives it over ${view.distanceName}`,
    desc: [
      ...view.candidates.map((c) => extremes(view, c)),
      ...view.rides.map((r) => extremesOfRide(view, r)),
    ].join(' '),
  };
  return drawing(canvas, top - gap + BOTTOM_AXIS_HEIGHT, words, html`${parts}`);
}

/** One lane as a drawing of its own. */
export function laneChart(view: View, canvas: Canvas, look: LaneLook): Html {
  const box: Box = { left: 52, top: 26 + holdHead(view), width: canvas.width - 170, height: 220 };
  const words = {
    title: `${look.title} over ${view.distanceName}`,
    desc: `${look.name} of every candidate.`,
  };
  return drawing(
    canvas,
    box.top + box.height + BOTTOM_AXIS_HEIGHT,
    words,
    oneLane(view, canvas, look, box, true, true),
  );
}

function extremes(view: View, candidate: CandidateView): string {
  const extent = extentOf([binCurve(candidate.result.bins, 'error')]);
  if (extent === null) return `${candidate.name}: no record.`;
  return `${candidate.name}: speed error from ${changeText(extent[0], view.speed)} to ${changeText(extent[1], view.speed)}.`;
}

function extremesOfRide(view: View, ride: RideView): string {
  const [low, high] = extentOf(rideCurves(ride, 'error')) ?? [0, 0];
  return `${ride.name}, logged: speed error from ${changeText(low, view.speed)} to ${changeText(high, view.speed)}.`;
}

function oneLane(view: View, canvas: Canvas, look: LaneLook, box: Box, first: boolean, last: boolean): Html {
  const { paint, id } = canvas;
  const curves = view.candidates.map((candidate) => curveOf(candidate, look.lane));
  const ridden = view.rides.map((ride) => curvesOfRide(ride, look.lane));
  const x = scaleOf([0, toKm(view.length)], box.left, box.left + box.width);
  const y = scaleOf(domainOf(look, [...curves, ...ridden.flat()]), box.top + box.height, box.top);
  const band = view.speed.of(view.result.band);
  const inBand = { ...box, top: y(band), height: y(-band) - y(band) };
  const drawn = view.candidates.map((candidate, i) =>
    curveMarks(candidate, curves[i]!, look, canvas, x, y, view.length / (box.width / COLUMN)),
  );
  const logged = view.rides.flatMap((ride, i) =>
    ridden[i]!.map((curve) => {
      const peaks = peaksOf(curve, view.length / (box.width * FINE));
      return rideLine(
        peaks.map(([at, value]): Point => [x(toKm(at)), y(look.of(value))]),
        ride,
        box,
        canvas,
      );
    }),
  );
  return html`<defs>${clip(`${id}-c`, box)}</defs>${holdColumns(view, canvas, box, x)}${first && holdBrackets(view, canvas, { ...box, top: box.top - 20 }, x)}${look.lane === 'error' && rectangle(inBand, paint.band)}${leftAxis(
    canvas,
    box,
    y,
    look.closed && look.lane === 'error' ? `${look.name}, near the band` : look.name,
    look.ticks,
  )}${clipped(`${id}-c`, html`${look.lane === 'speed' && setSpeedLine(view, canvas, x, y)}${drawn}${logged}`)}${look.closed && look.lane === 'error' && bandLabel(view, canvas, box, y(band))}${first && cycleMarks(view, canvas, box, x)}${endMarks(view, canvas, x, box, first)}${!canvas.narrow && endLabels(view, curves, ridden, look, canvas, box, y)}${bottomAxis(
    canvas,
    box,
    x,
    last ? `${view.distanceName} / km` : null,
  )}`;
}

/** The set speed by the road's own reckoning, dotted. */
function setSpeedLine(
  { result: { road, demand }, speed }: View,
  { paint }: Canvas,
  x: Scale,
  y: Scale,
): Html | null {
  const points = Array.from(demand.setSpeed, (v, i): Point => [x(toKm(road.distance[i]!)), y(speed.of(v))]);
  return stroked(linePath(points), { stroke: paint.ink, width: 1, dash: '1 2' });
}

function domainOf(look: LaneLook, curves: readonly Curve[]): readonly [number, number] {
  if (look.closed) return look.domain;
  const [low, high] = extentOf(curves) ?? [0, 0];
  const [from, to] = [Math.min(look.domain[0], look.of(low)), Math.max(look.domain[1], look.of(high))];
  return [from === 0 ? 0 : from - (to - from) * 0.04, to + (to - from) * 0.04];
}

function curveMarks(
  candidate: CandidateView,
  curve: Curve,
  look: LaneLook,
  { paint }: Canvas,
  x: Scale,
  y: Scale,
  column: number,
): Html {
  const runs = unbrokenRuns(curve).map((run) => columnsOf(run, 0, column));
  const columns = runs.flat();
  const points = (pick: 'low' | 'mean' | 'high'): Point[] =>
    runs.flatMap((run, i): Point[] => [
      ...(i === 0 ? [] : [BREAK]),
      ...run.map((c): Point => [x(toKm(c.at)), y(look.of(c[pick]))]),
    ]);
  const stroke = paint.series[candidate.colour]!;
  const spread = columns.some((c) => c.high > c.low);
  return html`<g>${spread && filled(envelopePath(points('low'), points('high')), stroke, 0.28)}${stroked(
    linePath(points('mean')),
    { stroke, width: candidate.locked ? 1.4 : 1.6, dash: candidate.dash },
  )}</g>`;
}

/** The band's width, on a plate of the page's colour at its upper edge. */
function bandLabel(view: View, { paint }: Canvas, box: Box, edge: number): Html {
  const text = `band ${bandText(view.result.band, view.speed)}`;
  const width = textWidth(text, 11) + 8;
  const plate = { left: box.left + 6, top: edge - 16, width, height: 15 };
  return html`${rectangle(plate, paint.page, 0.9)}${label(box.left + 10, edge - 5, text, { size: 11, fill: paint.ink })}`;
}

/** Where a run ended before the end of the road. */
function endMarks(view: View, { paint }: Canvas, x: Scale, box: Box, named: boolean): Html {
  const early = view.candidates.filter((candidate) => candidate.result.status !== 'completed');
  return html`${early.map((candidate) => {
    const at = x(toKm(candidate.result.endDistance));
    return html`<g><title>${`${candidate.name} ended at ${placeText(candidate.result.endDistance)}: ${candidate.result.status}`}</title>${segment(at, box.top, at, box.top + box.height, { stroke: paint.warn, width: 1.5, dash: '3 2' })}</g>${named && endName(candidate.name, at, box, paint)}`;
  })}`;
}

/** `locked ended` on the side of the mark that has room. */
function endName(name: string, at: number, box: Box, paint: Paint): Html {
  const text = `${name} ended`;
  const left = at + textWidth(text, 11) + 8 > box.left + box.width ? at - textWidth(text, 11) - 8 : at + 4;
  return html`${rectangle({ left: left - 1, top: box.top + box.height - 18, width: textWidth(text, 11) + 4, height: 14 }, paint.page, 0.85)}${label(left, box.top + box.height - 7, text, { size: 11, fill: paint.ink })}`;
}

/** Names beside the ends of the lines, moved apart where they would meet. */
function endLabels(
  view: View,
  curves: readonly Curve[],
  ridden: readonly (readonly Curve[])[],
  look: LaneLook,
  { paint }: Canvas,
  box: Box,
  y: Scale,
): Html {
  const atEnd = (curve: Curve | undefined): number => {
    const value = curve !== undefined && curve.size > 0 ? look.of(curve.mean[curve.size - 1]!) : 0;
    const at = Number.isFinite(value) ? y(value) : box.top;
    return Math.min(box.top + box.height, Math.max(box.top, at));
  };
  const left = box.left + box.width + 6;
  const wanted = [
    ...view.candidates.flatMap((candidate, i) => {
      const { result, name, colour, dash } = candidate;
      if (result.status !== 'completed') return [];
      const look = { stroke: paint.series[colour]!, width: 2, dash };
      const sign = (place: number) => segment(left, place, left + 20, place, look);
      return [{ name, at: atEnd(curves[i]), rank: colour, sign }];
    }),
    ...view.rides.flatMap((ride, i) => {
      if (ridden[i]!.length === 0) return [];
      const sign = (place: number) => rideSign(left, place, 20, ride, paint);
      return [{ name: ride.name, at: atEnd(ridden[i]!.at(-1)), rank: view.candidates.length + i, sign }];
    }),
  ].sort((a, b) => a.at - b.at || a.rank - b.rank);
  const step = 14;
  const most = box.top + box.height - (wanted.length - 1) * step;
  let free = Number.NEGATIVE_INFINITY;
  return html`${wanted.map(({ name, at, sign }, i) => {
    const place = Math.max(free, Math.min(at, most + i * step));
    free = place + step;
    const short = name.length > 13 ? `${name.slice(0, 12)}…` : name;
    return html`${sign(place)}${label(left + 24, place + 4, short, { size: 11, fill: paint.ink })}`;
  })}`;
}
