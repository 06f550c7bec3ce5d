import { area, line } from 'd3';

export type Point = readonly [x: number, y: number];

/** Between two parts of a line: nothing is drawn. */
export const BREAK: Point = [Number.NaN, Number.NaN];

/** A tenth of a user unit is finer than any screen shows. */
const DIGITS = 1;
/** How far a left-out point may lie from the line that is drawn [user units]. */
const TOLERANCE = 0.15;

/**
 * Leaves out points that the line through the others meets within twice the tolerance: the swinging-door rule (Bristol 1990,
 * ISA 90-493, from memory), in one pass. First and last points, steps in x and every peak stay.
 *
 * @param points x does not decrease
 */
export function thinned(points: readonly Point[], tolerance = TOLERANCE): readonly Point[] {
  if (points.length < 3) return points;
  const kept: Point[] = [points[0]!];
  let [x0, y0] = points[0]!;
  let low = Number.NEGATIVE_INFINITY;
  let high = Number.POSITIVE_INFINITY;
  for (let i = 1; i < points.length; i++) {
    const [x, y] = points[i]!;
    const slope = (y - y0) / (x - x0);
    if (x > x0 && slope >= low && slope <= high) {
      low = Math.max(low, (y - tolerance - y0) / (x - x0));
      high = Math.min(high, (y + tolerance - y0) / (x - x0));
      continue;
    }
    const before = points[i - 1]!;
    if (before !== kept[kept.length - 1]) kept.push(before);
    [x0, y0] = before;
    low = Number.NEGATIVE_INFINITY;
    high = Number.POSITIVE_INFINITY;
    if (x > x0) {
      low = (y - tolerance - y0) / (x - x0);
      high = (y + tolerance - y0) / (x - x0);
    } else {
      kept.push(points[i]!);
      [x0, y0] = points[i]!;
    }
  }
  const last = points[points.length - 1]!;
  if (last !== kept[kept.length - 1]) kept.push(last);
  return kept;
}

const finite = ([x, y]: Point) => Number.isFinite(x) && Number.isFinite(y);

/** Stretches of points without a gap between them: what is not finite is not drawn. */
function stretches(points: readonly Point[]): readonly (readonly Point[])[] {
  const found: Point[][] = [];
  let open = false;
  for (const point of points) {
    if (!finite(point)) {
      open = false;
      continue;
    }
    if (open) found[found.length - 1]!.push(point);
    else found.push([point]);
    open = true;
  }
  return found;
}

const lineOf = line<Point>()
  .x((p) => p[0])
  .y((p) => p[1])
  .digits(DIGITS);

/** Path through the points, broken where one is not finite. */
export const linePath = (points: readonly Point[]): string =>
  stretches(points)
    .map((stretch) => lineOf(thinned(stretch)) ?? '')
    .join('');

const areaOf = area<Point>()
  .x((p) => p[0])
  .y0((p) => p[1])
  .digits(DIGITS);

/** Path around what lies between the points and a level. */
export const areaPath = (points: readonly Point[], base: number): string =>
  stretches(points)
    .map((stretch) => areaOf.y1(base)(thinned(stretch)) ?? '')
    .join('');

/** Path around an envelope; both edges at the same x. */
export function envelopePath(low: readonly Point[], high: readonly Point[]): string {
  const [below, above] = [stretches(low), stretches(high)];
  return below
    .map((stretch, i) => {
      const forth = lineOf(thinned(above[i] ?? [])) ?? '';
      const back = lineOf([...thinned(stretch)].reverse()) ?? '';
      return forth === '' || back === '' ? '' : `${forth}L${back.slice(1)}Z`;
    })
    .join('');
}
