import { type Html, html } from '../html.ts';
import { type ForceLine, forceLines } from '../model/force-lines.ts';
import type { View } from '../model/view.ts';
import type { Paint } from '../paint.ts';
import { fixed, speedText } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, leftAxis, scaleOf } from './axes.ts';
import { type Box, type Canvas, clip, clipped, drawing, filled, type LineLook, stroked } from './canvas.ts';
import { type DrawnLine, namesAbove, namesAtEnds, namesLeaving, ROW } from './force-labels.ts';
import { envelopePath, linePath } from './paths.ts';

/**
 * Wheel force over speed: what the drive gives (the engaged gear strong, with its range shaded; others thinner, the share
 * that the thinnest air takes as a ribbon under each) against what grades ask (thin, labelled); set speeds and grip marked.
 */
export function forceSpeedChart(view: View, canvas: Canvas): Html {
  const { paint, narrow, id } = canvas;
  const { lines, topSpeed } = forceLines(view);
  const many = lines.filter(({ kind }) => kind === 'full').length > 1;
  const box: Box = {
    left: narrow ? 44 : 52,
    top: 30 + ROW,
    width: canvas.width - (narrow ? 100 : 210),
    height: narrow ? 270 : many ? 400 : 340,
  };
  const domain = domainOf(lines);
  const x = scaleOf([0, view.speed.of(topSpeed)], box.left, box.left + box.width);
  const y = scaleOf(domain, box.top + box.height, box.top);
  const drawn = lines
    .filter(({ kind, force }) => kind !== 'grip' || (force[0]! <= domain[1] && force[0]! >= domain[0]))
    .map(
      (line): DrawnLine => ({
        line,
        points: line.speed.map((v, i) => [x(view.speed.of(v)), y(line.force[i]!)]),
      }),
    );
  const between = (gear: number | null, low: ForceLine['kind'], high: ForceLine['kind']): string => {
    const find = (kind: ForceLine['kind']) =>
      drawn.find(({ line }) => line.kind === kind && line.gear === gear)?.points ?? [];
    return envelopePath(find(low), find(high));
  };
  const gears = [...new Set(lines.filter(({ gear }) => gear !== null).map(({ gear }) => gear))];
  const own = lines.find(({ engaged }) => engaged)?.gear ?? null;
  const areas = html`${filled(between(own, 'least', 'full'), paint.band)}${gears.map((gear) =>
    filled(between(gear, 'thin', 'full'), paint.series[1]!, gear === own ? 0.3 : 0.18),
  )}`;
  const marks = drawn
    .toSorted((a, b) => Number(a.line.engaged) - Number(b.line.engaged))
    .map(({ line, points }) => stroked(linePath(points), lookOf(line, paint)));
  const sets = [...new Set([view.result.hold.setSpeed, ...view.result.hold.changes.map((c) => c.setSpeed)])];
  const setNames = sets.map((v) => {
    const text = speedText(v, view.speed, 0);
    return { at: x(view.speed.of(v)), text: narrow ? text : `set speed ${text}`, marked: true };
  });
  const words = {
    title: 'Wheel force against speed: what the drive has and what grades ask',
    desc: `At ${speedText(view.result.hold.setSpeed, view.speed, 0)}: ${lines
      .flatMap((line) => {
        const force = forceAt(line, view.result.hold.setSpeed);
        return force === null || (line.gear !== null && !line.engaged && line.kind !== 'full')
          ? []
          : [`${line.words} ${fixed(force)} N`];
      })
      .join(', ')}.`,
  };
  const body = html`<defs>${clip(`${id}-c`, box)}</defs>${clipped(`${id}-c`, areas)}${leftAxis(
    canvas,
    box,
    y,
    'wheel force / N',
  )}${clipped(`${id}-c`, marks)}${namesAbove([...setNames, ...namesLeaving(drawn, canvas, box)], canvas, box)}${namesAtEnds(
    drawn,
    canvas,
    box,
  )}${bottomAxis(canvas, box, x, `speed / ${view.speed.axis}`)}`;
  return drawing(canvas, box.top + box.height + BOTTOM_AXIS_HEIGHT, words, body);
}

/** From what the drive has; what grades ask, and the grip, may leave the plot. */
function domainOf(lines: readonly ForceLine[]): [number, number] {
  const of = (kinds: readonly ForceLine['kind'][]) =>
    lines.filter(({ kind }) => kinds.includes(kind)).flatMap(({ force }) => force);
  const own = of(['full', 'thin', 'least', 'ratio']);
  const asked = of(['required']);
  const most = own.reduce((a, b) => Math.max(a, b), 1) * 1.12;
  const least = [...own, ...asked].reduce((a, b) => Math.min(a, b), 0);
  const greatest = asked.reduce((a, b) => Math.max(a, b), 0);
  return [Math.max(least, -0.6 * most) * 1.1, Math.max(most, Math.min(greatest, 1.3 * most))];
}

function lookOf({ kind, engaged, gear }: ForceLine, paint: Paint): LineLook {
  const strong = engaged ? 2.6 : 1.3;
  switch (kind) {
    case 'full':
      return { stroke: paint.series[1]!, width: strong };
    case 'thin':
      return { stroke: paint.series[1]!, width: engaged ? 1.8 : 0.6, dash: '7 3' };
    case 'ratio':
      return { stroke: paint.series[1]!, width: 1.3, dash: '2 3' };
    case 'least':
      return { stroke: paint.series[2]!, width: engaged ? 2.4 : 0.9, dash: gear === null ? '' : '9 3 2 3' };
    case 'grip':
      return { stroke: paint.warn, width: 1.8, dash: '14 3 3 3 3 3' };
    case 'required':
      return { stroke: paint.muted };
  }
}

/** Force of a line at a speed; null where it does not reach. */
function forceAt({ speed, force }: ForceLine, at: number): number | null {
  const i = speed.findIndex((v) => v >= at);
  return i < 0 || (i === 0 && speed[0]! > at) ? null : force[i]!;
}
