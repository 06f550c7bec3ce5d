import { LIMIT_OFF, LIMIT_SHIFT } from '../../loop/plan.ts';
import type { FullSeries } from '../../loop/result.ts';
import type { Hill, HillOutcome } from '../../study/findings.ts';
import { toPct } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { holdingThrottle } from '../model/holding-throttle.ts';
import { rideStretches } from '../model/ride-curves.ts';
import type { CandidateView, RideView, View } from '../model/view.ts';
import { changeText } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, leftAxis, type Scale, scaleOf } from './axes.ts';
import {
  type Box,
  type Canvas,
  clip,
  clipped,
  drawing,
  filled,
  hatch,
  rectangle,
  segment,
  stroked,
} from './canvas.ts';
import { spans } from './limit-spans.ts';
import { areaPath, linePath, type Point } from './paths.ts';
import { rideLine } from './ride-line.ts';
import { trace } from './trace.ts';

/** A candidate on a hill, with its record. */
interface Shown {
  readonly candidate: CandidateView;
  readonly outcome: HillOutcome;
}

/**
 * A small picture over time: speed against the set speed above; below, the command against the throttle that would hold the
 * set speed. Time counts from the foot of the hill.
 */
export function hillPicture(view: View, hill: Hill, canvas: Canvas): Html {
  const { id, paint } = canvas;
  const shown = shownOn(view, hill);
  const width = canvas.width - 50;
  const upper: Box = { left: 40, top: 24, width, height: 104 };
  const lower: Box = { left: 40, top: 162, width, height: 84 };
  const foot = (picture: FullSeries): number => timeAtPlace(picture, hill.from);
  const [start, end] = timeDomain(hill, shown, foot);
  const x = scaleOf([start, end], upper.left, upper.left + width);
  const ridden = view.rides.flatMap((ride) => rideOn(ride, hill, start, end));
  const speeds = scaleOf(speedDomain(view, shown, ridden), upper.top + upper.height, upper.top);
  const guide = guideOf(shown);
  const { throttleMin, throttleMax } = view.result.vehicle.drive;
  const holding = guide === undefined ? [] : holdingAlong(view, guide.outcome.picture);
  const throttles = scaleOf(
    throttleDomain(throttleMin, throttleMax, holding),
    lower.top + lower.height,
    lower.top,
  );
  const over = (
    scale: Scale,
    values: ArrayLike<number>,
    of: (v: number) => number,
    picture: FullSeries,
  ): Point[] =>
    Array.from({ length: picture.size }, (_, i) => [
      x(picture.time[i]! - foot(picture)),
      scale(of(values[i]!)),
    ]);
  const linesOf = (
    { view: ride, stretches, foot }: RideOnHill,
    box: Box,
    scale: Scale,
    values: Float64Array,
    of: (v: number) => number,
  ) =>
    stretches.map((rows) =>
      rideLine(
        rows.map((row): Point => [x(ride.time[row]! - foot), scale(of(values[row]!))]),
        ride,
        box,
        canvas,
      ),
    );
  const body = html`<defs>${clip(`${id}-u`, upper)}${clip(`${id}-l`, lower)}${isOff(guide) && hatch(`${id}-off`, 'rising', paint.muted, 7)}</defs>${
    guide !== undefined && onTheHill(guide.outcome.picture, hill, x, [upper, lower], foot, canvas)
  }${leftAxis(canvas, upper, speeds, `speed / ${view.speed.axis}`, 4)}${clipped(
    `${id}-u`,
    html`${
      guide !== undefined &&
      stroked(linePath(over(speeds, guide.outcome.picture.setSpeed, view.speed.of, guide.outcome.picture)), {
        stroke: paint.ink,
        width: 1,
        dash: '1 2',
      })
    }${shown.map(({ candidate, outcome }) =>
      trace(over(speeds, outcome.picture.speed, view.speed.of, outcome.picture), candidate, upper, canvas),
    )}${ridden.map((ride) => html`${linesOf(ride, upper, speeds, ride.view.speed, view.speed.of)}`)}`,
  )}${leftAxis(canvas, lower, throttles, 'command, and throttle that would hold / %', 3)}${clipped(
    `${id}-l`,
    html`${
      guide !== undefined &&
      filled(
        areaPath(over(throttles, holding, toPct, guide.outcome.picture), throttles(0)),
        paint.demand[1]!,
        0.75,
      )
    }${[throttleMin, throttleMax].map((limit) =>
      segment(lower.left, throttles(toPct(limit)), lower.left + width, throttles(toPct(limit)), {
        stroke: paint.warn,
        dash: '4 2',
      }),
    )}${shown.map(({ candidate, outcome }) =>
      trace(over(throttles, outcome.picture.command, toPct, outcome.picture), candidate, lower, canvas),
    )}${ridden.map((ride) => ride.view.throttle !== null && html`${linesOf(ride, lower, throttles, ride.view.throttle, toPct)}`)}`,
  )}${bottomAxis({ ...canvas, narrow: true }, upper, x, null)}${bottomAxis({ ...canvas, narrow: true }, lower, x, 'time from the foot / s')}`;
  const words = {
    title: `Hill ${hill.number}: speed, command and the throttle that would hold, over time`,
    desc: shown
      .map(({ candidate, outcome }) => `${candidate.name}: ${changeText(outcome.speedChange, view.speed)}.`)
      .join(' '),
  };
  return drawing(canvas, lower.top + lower.height + BOTTOM_AXIS_HEIGHT, words, body);
}

/** Hold of the guide is off somewhere in its picture. */
const isOff = (guide: Shown | undefined): boolean =>
  guide?.outcome.picture.limit.some((bits) => (bits & LIMIT_OFF) !== 0) === true;

/** A logged ride while a hill is shown: its rows from gap to gap, and its time at the foot [s]. */
interface RideOnHill {
  readonly view: RideView;
  readonly stretches: readonly (readonly number[])[];
  readonly foot: number;
}

/** The rows of a ride within the picture; none where the log has no time at the foot. */
function rideOn(ride: RideView, hill: Hill, start: number, end: number): readonly RideOnHill[] {
  const { distance, time } = ride;
  const all = rideStretches(ride);
  if (!all.some(([from, to]) => distance[from]! <= hill.from && distance[to - 1]! > hill.from)) return [];
  const foot = timeAtPlace(ride, hill.from);
  // A row on either side of the picture, so that the line reaches its edges.
  const stretches = all.map(([from, to]) =>
    Array.from({ length: to - from }, (_, i) => from + i).filter(
      (row) =>
        time[Math.min(row + 1, to - 1)]! - foot >= start && time[Math.max(row - 1, from)]! - foot <= end,
    ),
  );
  return [{ view: ride, stretches: stretches.filter(({ length }) => length > 1), foot }];
}

/** The run that gives set speed, holding throttle and hill their times: of the designs that reached the end the one that is shown longest. */
function guideOf(shown: readonly Shown[]): Shown | undefined {
  const rank = ({ candidate, outcome: { picture } }: Shown): readonly [number, number] => [
    (candidate.locked ? 2 : 0) + (candidate.result.status === 'completed' ? 0 : 1),
    (picture.time[0] ?? 0) - (picture.time[picture.size - 1] ?? 0),
  ];
  return shown.toSorted((a, b) => rank(a)[0] - rank(b)[0] || rank(a)[1] - rank(b)[1])[0];
}

const shownOn = (view: View, hill: Hill): readonly Shown[] =>
  view.candidates.flatMap((candidate) => {
    const outcome = hill.outcomes.find((one) => one.candidate === candidate.name);
    return outcome !== undefined && outcome.picture.size > 1 ? [{ candidate, outcome }] : [];
  });

/** The range of the throttle with room beyond it, more below where holding asks for more: to as much again as the range. */
function throttleDomain(least: number, most: number, holding: readonly number[]): readonly [number, number] {
  const lowest = holding.reduce((low, value) => (Number.isFinite(value) ? Math.min(low, value) : low), least);
  const range = most - least;
  const below = Math.max(lowest, least - range) - 0.05 * range;
  return [toPct(below), toPct(most + 0.25 * range)];
}

/**
 * From the first record before the foot to the last recovery of a design, but no longer behind the hill than the hill
 * itself takes, or 40 s: a locked throttle may take minutes and would squeeze the rest.
 */
function timeDomain(
  hill: Hill,
  shown: readonly Shown[],
  foot: (picture: FullSeries) => number,
): readonly [number, number] {
  const designs = shown.filter(({ candidate }) => !candidate.locked);
  let [start, end, over] = [0, 1, 0];
  for (const { outcome } of designs.length > 0 ? designs : shown) {
    const { picture } = outcome;
    start = Math.min(start, picture.time[0]! - foot(picture));
    end = Math.max(end, picture.time[picture.size - 1]! - foot(picture));
    over = Math.max(over, timeAtPlace(picture, hill.to) - foot(picture));
  }
  return [start, Math.min(end, over + Math.max(40, over))];
}

/** The designs and the logged rides decide the scale; a locked throttle that strays further leaves it at the edge. */
function speedDomain(
  view: View,
  shown: readonly Shown[],
  ridden: readonly RideOnHill[],
): readonly [number, number] {
  const { of } = view.speed;
  const designs = shown.filter(({ candidate }) => !candidate.locked);
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const { outcome } of designs.length > 0 ? designs : shown)
    for (let i = 0; i < outcome.picture.size; i++) {
      for (const v of [of(outcome.picture.speed[i]!), of(outcome.picture.setSpeed[i]!)]) {
        if (!Number.isFinite(v)) continue;
        low = Math.min(low, v);
        high = Math.max(high, v);
      }
    }
  for (const { view: ride, stretches } of ridden)
    for (const row of stretches.flat()) {
      low = Math.min(low, of(ride.speed[row]!));
      high = Math.max(high, of(ride.speed[row]!));
    }
  if (low > high) return [0, 1];
  const room = Math.max(of(view.result.band), (high - low) * 0.15);
  return [low - room, high + room];
}

/** Time at which a picture passes a place; its ends where it does not. */
function timeAtPlace(
  { distance, time, size }: Pick<FullSeries, 'distance' | 'time' | 'size'>,
  place: number,
): number {
  for (let i = 1; i < size; i++) {
    if (distance[i]! < place) continue;
    const step = distance[i]! - distance[i - 1]!;
    const part = step > 0 ? Math.max(0, (place - distance[i - 1]!) / step) : 0;
    return time[i - 1]! + part * (time[i]! - time[i - 1]!);
  }
  return time[size - 1] ?? 0;
}

function onTheHill(
  picture: FullSeries,
  hill: Hill,
  x: Scale,
  boxes: readonly Box[],
  foot: (picture: FullSeries) => number,
  { paint, id }: Canvas,
): Html {
  const [from, to] = [x(0), x(timeAtPlace(picture, hill.to) - foot(picture))];
  return html`${boxes.map((box) => rectangle({ left: from, top: box.top, width: to - from, height: box.height }, paint.ground))}${spans(
    picture,
    LIMIT_SHIFT,
  ).map(([begin, end]) => {
    const [left, right] = [x(begin - foot(picture)), x(end - foot(picture))];
    return html`<g><title>a shift: no hold, or no torque</title>${boxes.map((box) => rectangle({ left, top: box.top, width: Math.max(1, right - left), height: box.height }, paint.grid))}</g>`;
  })}${spans(picture, LIMIT_OFF).map(([begin, end]) => {
    const [left, right] = [x(begin - foot(picture)), x(end - foot(picture))];
    return html`<g><title>hold is off</title>${boxes.map((box) => rectangle({ left, top: box.top, width: Math.max(1, right - left), height: box.height }, `url(#${id}-off)`, 0.35))}</g>`;
  })}`;
}

/** Throttle that would hold the set speed where the guide is, sample by sample of its picture. */
function holdingAlong(view: View, picture: FullSeries): readonly number[] {
  const { road } = view.result;
  const values: number[] = [];
  let [knot, known, throttle] = [0, -1, Number.NaN];
  for (let i = 0; i < picture.size; i++) {
    while (knot < road.size - 1 && road.distance[knot + 1]! <= picture.distance[i]!) knot++;
    if (knot !== known) [known, throttle] = [knot, holdingThrottle(view, knot)];
    values.push(throttle);
  }
  return values;
}
