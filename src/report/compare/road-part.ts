import { fromKmh } from '../../units/convert.ts';
import { segment } from '../charts/canvas.ts';
import { afterLook, beforeLook, type TwoCurves, twoRunsChart } from '../charts/two-runs.ts';
import { type Html, html } from '../html.ts';
import { type Curve, extentOf } from '../model/columns.ts';
import { PAGE_PAINT } from '../paint.ts';
import { changeText, type SpeedUnit } from '../quantity.ts';
import { chartFigure } from '../sections/chart-figure.ts';
import type { Section } from '../sections/section.ts';
import type { Comparison } from './compare-results.ts';
import type { Series, SeriesPair } from './read-series.ts';

/** 4: speed error and throttle of every candidate over the distance, before and after, on the same scales. */
export function roadPart(
  { before, after, candidates }: Comparison,
  series: ReadonlyMap<string, SeriesPair>,
  speed: SpeedUnit,
): Section {
  const length = Math.max(before.route.length_m, after.route.length_m);
  const pairs = candidates.flatMap(({ name, locked }) => {
    const pair = series.get(name);
    return pair === undefined ? [] : [{ name, locked, pair }];
  });
  const scaleOf = (wanted: boolean) => {
    const own = pairs.filter(({ locked }) => locked === wanted).map(({ pair }) => pair);
    return { error: errorDomain(own, speed, before.hold.band_kmh), throttle: throttleDomain(own) };
  };
  const scales = { design: scaleOf(false), locked: scaleOf(true) };
  const band = before.hold.band_kmh === after.hold.band_kmh ? speed.of(fromKmh(after.hold.band_kmh)) : null;
  const charts = pairs.map(({ name, locked, pair }) => {
    const scale = locked ? scales.locked : scales.design;
    if (isSame(pair)) return html`<h3>${name}</h3>\n<p>The same record in both, sample for sample.</p>\n`;
    const lanes: TwoCurves[] = [
      {
        name: `speed error / ${speed.axis}`,
        before: pair.before.error,
        after: pair.after.error,
        of: speed.of,
        domain: scale.error,
        height: 150,
        band,
      },
      {
        name: 'throttle / %',
        before: pair.before.throttle,
        after: pair.after.throttle,
        of: (value) => value,
        domain: scale.throttle,
        height: 110,
        band: null,
      },
    ];
    const words = {
      title: `Speed error and throttle of ${name} over distance, before and after`,
      desc: `Before: ${rangeWords(pair.before, speed)}. After: ${rangeWords(pair.after, speed)}.`,
    };
    return html`<h3>${name}</h3>
${chartFigure(`two-${name}`, (canvas) => twoRunsChart(words, lanes, length, canvas), words.desc)}`;
  });
  const body =
    pairs.length === 0
      ? html`<p>No candidate is in both results.</p>`
      : html`${key()}
<p class="note">Lines: mean of each stretch that is one line of the picture wide; shade: least to greatest in it.${scaleWords(pairs.map(({ locked }) => locked))}${band !== null && ' Shaded across: the band.'} A mark across a plot is where a run ended on the way.</p>
${charts}`;
  return { id: 'along', number: 4, title: 'Along the road', body };
}

function scaleWords(locked: readonly boolean[]): string {
  const mixed = locked.includes(true) && locked.includes(false);
  return mixed
    ? ' All designs are drawn on the same scales; a locked throttle, which strays further, on its own.'
    : ' All candidates are drawn on the same scales.';
}

function key(): Html {
  const line = (look: typeof beforeLook | typeof afterLook, words: string) =>
    html`<li><svg class="key" viewBox="0 0 28 10" width="28" height="10" aria-hidden="true">${segment(1, 5, 27, 5, { stroke: PAGE_PAINT.series[look.colour]!, width: 2.5, dash: look.dash })}</svg> ${words}</li>`;
  return html`<ul class="keys">${line(beforeLook, 'before')}${line(afterLook, 'after')}</ul>`;
}

function errorDomain(
  pairs: readonly SeriesPair[],
  speed: SpeedUnit,
  bandKmh: number,
): readonly [number, number] {
  const least = speed.of(fromKmh(bandKmh)) * 1.5;
  const [low, high] = extentOf(pairs.flatMap(({ before, after }) => [before.error, after.error])) ?? [0, 0];
  const [from, to] = [Math.min(-least, speed.of(low)), Math.max(least, speed.of(high))];
  return [from - (to - from) * 0.04, to + (to - from) * 0.04];
}

function throttleDomain(pairs: readonly SeriesPair[]): readonly [number, number] {
  const [low, high] = extentOf(pairs.flatMap(({ before, after }) => [before.throttle, after.throttle])) ?? [
    0, 0,
  ];
  return [Math.min(0, low), Math.max(100, high)];
}

function isSame({ before, after }: SeriesPair): boolean {
  const same = (a: Curve, b: Curve) =>
    a.size === b.size &&
    [0, 1, 2, 3].every((k) => {
      const [x, y] = [[a.at, a.low, a.mean, a.high][k]!, [b.at, b.low, b.mean, b.high][k]!];
      for (let i = 0; i < a.size; i++) if (!Object.is(x[i], y[i]) && x[i] !== y[i]) return false;
      return true;
    });
  return same(before.error, after.error) && same(before.throttle, after.throttle);
}

function rangeWords({ error }: Series, speed: SpeedUnit): string {
  const extent = extentOf([error]);
  return extent === null
    ? 'no record'
    : `speed error from ${changeText(extent[0], speed)} to ${changeText(extent[1], speed)}`;
}
