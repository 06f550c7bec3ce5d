import type { Stretch } from '../../study/findings.ts';
import { toKm } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { offOf, overridesOf } from '../model/hold-away.ts';
import { endsByRule } from '../model/hold-tally.ts';
import { CAUSE_NAMES, unfitWords } from '../model/hold-words.ts';
import type { CandidateView, View } from '../model/view.ts';
import { placeText, speedText, stretchText } from '../quantity.ts';
import { BOTTOM_AXIS_HEIGHT, bottomAxis, type Scale, scaleOf } from './axes.ts';
import { type Box, type Canvas, drawing, hatch, label, rectangle, segment, tenth } from './canvas.ts';

const BAR = 18;

/**
 * Where hold was on along the road: a row for the bends and the places where hold does not belong, a row for each
 * candidate: filled where it was on, hatched where off, half as high where the grip had the throttle.
 */
export function holdStrip(view: View, canvas: Canvas): Html {
  const { narrow, id, paint } = canvas;
  const { bends } = view.result;
  const left = narrow ? 8 : 130;
  const row = narrow ? 40 : 27;
  const names = [...(bends === null ? [] : ['bends']), ...view.candidates.map(({ name }) => name)];
  const box: Box = { left, top: 4, width: canvas.width - left - 16, height: row * names.length };
  const x = scaleOf([0, toKm(view.length)], box.left, box.left + box.width);
  const topOf = (i: number): number => box.top + i * row + (narrow ? 18 : 4);
  const titles = names.map((name, i) =>
    narrow
      ? label(box.left, topOf(i) - 5, name, { size: 11, fill: paint.ink })
      : label(box.left - 8, topOf(i) + 13, name, { anchor: 'end', fill: paint.ink }),
  );
  const first = bends === null ? 0 : 1;
  const rows = view.candidates.map((candidate, i) => oneRow(view, candidate, topOf(i + first), x, canvas));
  const words = {
    title: 'Where hold was on',
    desc: view.candidates
      .map((candidate) => {
        const off = offOf(view.result, candidate.result);
        return `${candidate.name}: ${off.length === 0 ? 'on all the way' : `off ${off.map(({ from, to }) => stretchText(from, to)).join(', ')}`}.`;
      })
      .join(' '),
  };
  return drawing(
    canvas,
    box.top + box.height + 6 + BOTTOM_AXIS_HEIGHT,
    words,
    html`<defs>${hatch(`${id}-off`, 'rising', paint.muted, 6)}${hatch(`${id}-unfit`, 'falling', paint.warn, 4)}</defs>${titles}${
      bends !== null && bendRow(view, topOf(0), x, canvas)
    }${rows}${bottomAxis(canvas, { ...box, height: box.height + 6 }, x, `${view.distanceName} / km`)}`,
  );
}

const bar = ({ from, to }: Stretch, x: Scale, top: number, height: number): Box => ({
  left: x(toKm(from)),
  top,
  width: Math.max(1.5, x(toKm(to)) - x(toKm(from))),
  height,
});

function oneRow(view: View, candidate: CandidateView, top: number, x: Scale, { paint, id }: Canvas): Html {
  const { result, colour } = candidate;
  const off = offOf(view.result, result);
  const whole = bar({ from: 0, to: result.endDistance }, x, top, BAR);
  return html`<g>${rectangle(whole, paint.series[colour]!, 0.75)}${off.map((stretch) => {
    const box = bar(stretch, x, top, BAR);
    const why = stretch.ended === null ? 'from the start' : `ended by ${CAUSE_NAMES[stretch.ended.cause]}`;
    return html`<g><title>${`${candidate.name}: hold off ${stretchText(stretch.from, stretch.to)}, ${why}`}</title>${rectangle(box, paint.page)}${rectangle(box, `url(#${id}-off)`)}</g>`;
  })}${overridesOf(result).map((stretch) => {
    const box = bar(stretch, x, top, BAR / 2);
    return html`<g><title>${`${candidate.name}: the grip has the throttle ${stretchText(stretch.from, stretch.to)}`}</title>${rectangle(box, paint.page)}</g>`;
  })}${endsByRule(candidate).map(({ distance, cause }) => {
    const at = x(toKm(distance));
    return html`<g><title>${`${candidate.name}: hold ended at ${placeText(distance)}, ${CAUSE_NAMES[cause]}`}</title><path d="M${tenth(at - 5)},${tenth(top - 2)}h10l-5,9Z" fill="${paint.warn}" stroke="${paint.page}" stroke-width="1"/></g>`;
  })}</g>`;
}

function bendRow({ result: { bends }, speed }: View, top: number, x: Scale, { paint, id }: Canvas): Html {
  const middle = top + BAR / 2;
  return html`<g>${(bends?.unfit ?? []).map((place) => {
    const box = bar(place, x, top, BAR);
    return html`<g><title>${`no hold, ${stretchText(place.from, place.to)}: ${unfitWords(place, speed)}`}</title>${rectangle(box, `url(#${id}-unfit)`)}</g>`;
  })}${(bends?.bends ?? []).map((bend) => {
    const right = bend.side === 'right';
    const box = bar(bend, x, right ? middle : top, BAR / 2);
    return html`<g><title>${`bend to the ${bend.side} at ${placeText(bend.sharpestAt)}, ${speedText(bend.speed, speed, 0)}`}</title>${rectangle({ ...box, left: box.left - 1, width: box.width + 2 }, paint.page)}${rectangle(box, paint.ink)}</g>`;
  })}${segment(x.range()[0]!, middle, x.range()[1]!, middle, { stroke: paint.muted })}</g>`;
}
