import { bracketedRoot } from '../numeric/root.ts';
import type { CombustionCurves } from './combustion-curves.ts';
import { type CombustionRow, combustionRow, GOVERNOR_BAND, governedTorque } from './combustion-row.ts';
import type { CombustionSpec } from './engine-spec.ts';
import { fittedNodes } from './fitted-nodes.ts';

/** Into so many parts the throttles are divided over which the driveline turns from giving to taking. */
const TURNING_STEPS = 3;
/** Nodes no further apart are one [rad/s, or throttle]. */
const SAME = 1e-9;
/** How far straight lines over throttle, and over shaft speed, may be from an engine whose share bends [of full torque]. */
const GAP_OVER_THROTTLE = 0.0014;
const GAP_OVER_SPEED = 0.001;
/** Shaft speeds at which the throttles are looked at lie no further apart [rad/s]. */
const SEEN_EVERY = 25;
/** Where between two nodes the gap is looked for. */
const PROBES = [0.25, 0.5, 0.75] as const;

/**
 * Nodes of an engine's table: the corners of its curves, with a few throttles at which its driveline turns; where it turns,
 * or the share changes with shaft speed, as few more as keep bilinear torque within 0.3 % of full torque, up to the limiter.
 *
 * @returns shaft speeds from 0 [rad/s] and throttles from 0 to 1, both increasing
 */
export function combustionNodes(
  spec: CombustionSpec,
  curves: CombustionCurves,
): { readonly shaftSpeed: Float64Array; readonly throttle: Float64Array } {
  const corners = speedNodes(spec, curves);
  const edges = [...curves.throttle, ...(spec.fuelCut === null ? [] : [spec.fuelCut.throttle])];
  const turning = curves.bends ? [] : turningThrottles(spec, curves, corners);
  if (!curves.bends && turning.length === 0) return { shaftSpeed: corners, throttle: merged(edges) };
  const row = (w: number): CombustionRow => combustionRow(spec, curves, w);
  const limit = spec.revLimit ?? Number.POSITIVE_INFINITY;
  const within = corners.filter((w) => w <= limit);
  const throttle = fittedThrottles(row, within, merged([...edges, ...turning]));
  return { shaftSpeed: merged([...fittedSpeeds(row, within, throttle), ...corners]), throttle };
}

/** Shaft speeds to an end, close enough to see where the driveline turns. */
function between(from: number, to: number): number[] {
  const parts = Math.max(2, Math.ceil((to - from) / SEEN_EVERY));
  return Array.from({ length: parts }, (_, k) => from + ((to - from) * (k + 1)) / parts);
}

/** Throttles between which the torque is nearly straight, at all shaft speeds. */
function fittedThrottles(
  row: (w: number) => CombustionRow,
  corners: Float64Array,
  throttle: Float64Array,
): Float64Array {
  const rows = Array.from(merged([...corners].flatMap((w, i) => between(corners[i - 1] ?? w, w))), row);
  const least = leastAllowed(rows);
  return fittedNodes(throttle, (from, to) =>
    rows.reduce((worst, { torque, span }) => {
      const gap = chordGap(torque, from, to);
      return Math.max(worst, gap / (GAP_OVER_THROTTLE * Math.max(span, least)));
    }, 0),
  );
}

/** Shaft speeds between which the torque is nearly straight, at these throttles and half-way between them. */
function fittedSpeeds(
  row: (w: number) => CombustionRow,
  corners: Float64Array,
  throttle: Float64Array,
): Float64Array {
  const throttles = [...throttle].flatMap((x, j) => (j === 0 ? [x] : [(throttle[j - 1]! + x) / 2, x]));
  const least = leastAllowed(Array.from(corners, row));
  return fittedNodes(corners, (from, to) => {
    const probes = [from, ...PROBES.map((part) => from + part * (to - from)), to].map(row);
    const span = Math.max(least, Math.min(...probes.map((one) => one.span)));
    let worst = 0;
    for (const x of throttles) {
      const torques = probes.map(({ torque }) => torque(x));
      const [first, last] = [torques[0]!, torques.at(-1)!];
      PROBES.forEach((part, k) => {
        worst = Math.max(worst, Math.abs(torques[k + 1]! - first - part * (last - first)));
      });
    }
    return worst / (GAP_OVER_SPEED * span);
  });
}

/** Where full throttle gives next to nothing, a share of it is not looked for. */
const leastAllowed = (rows: readonly CombustionRow[]): number =>
  rows.reduce((greatest, { span }) => Math.max(greatest, span), 0) / 2;

/** Largest of the gaps between a function and its chord. */
function chordGap(of: (x: number) => number, from: number, to: number): number {
  const [first, last] = [of(from), of(to)];
  return PROBES.reduce(
    (worst, part) => Math.max(worst, Math.abs(of(from + part * (to - from)) - first - part * (last - first))),
    0,
  );
}

function speedNodes(spec: CombustionSpec, curves: CombustionCurves): Float64Array {
  const { idle, revLimit, limitBand, fuelCut } = spec;
  const drags = curves.corners.some((w) => curves.closed(w) < 0);
  return merged([
    0,
    ...curves.corners.filter((w) => w > 0),
    ...(drags ? [idle, idle + GOVERNOR_BAND] : []),
    ...(revLimit === null ? [] : [revLimit, revLimit + limitBand]),
    ...(fuelCut === null ? [] : [fuelCut.above, fuelCut.above + fuelCut.blend]),
  ]);
}

/**
 * Throttles at which torque turns from holding back to driving, and the driveline with it: a few between the least and
 * the greatest of all shaft speeds.
 */
function turningThrottles(
  { idle, efficiency, revLimit }: CombustionSpec,
  curves: CombustionCurves,
  shaftSpeed: Float64Array,
): number[] {
  if (efficiency === 1) return [];
  let [least, greatest] = [1, 0];
  for (const w of shaftSpeed) {
    const closed = governedTorque(curves, idle, w);
    const full = curves.full(w);
    if (closed >= 0 || full <= 0 || w > (revLimit ?? w)) continue;
    const share = curves.share(w);
    const turn = bracketedRoot((x) => closed + share(x) * (full - closed), 0, 1, SAME).x;
    least = Math.min(least, turn);
    greatest = Math.max(greatest, turn);
  }
  if (least > greatest) return [];
  const steps = greatest - least > SAME ? TURNING_STEPS : 0;
  return Array.from({ length: steps + 1 }, (_, i) => least + ((greatest - least) * i) / Math.max(1, steps));
}

/** In rising order, what differs by rounding only taken once. */
function merged(places: readonly number[]): Float64Array {
  const sorted = [...places].sort((a, b) => a - b);
  return Float64Array.from(sorted.filter((x, i) => i === 0 || x - sorted[i - 1]! > SAME));
}
