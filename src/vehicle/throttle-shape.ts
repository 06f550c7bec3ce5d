import { exp, log } from '../numeric/elementary.ts';

/** Largest part of full torque that a straight line between two nodes may differ from the shape. */
const TOLERANCE = 0.002;

/** Below it the shape is that of its first order in k: in the closed form the digits cancel. */
const NEARLY_LINEAR = 1e-5;

/**
 * Share of the torque between closed and full throttle, s(x) = (1 - e^(-k x)) / (1 - e^(-k)), and at k = 0 its limit x:
 * a throttle plate lets most of the air in over the first part of its way.
 *
 * @param shape k, >= 0
 * @returns s over x in [0, 1]
 */
export function throttleShape(shape: number): (throttle: number) => number {
  if (shape === 0) return (x) => x;
  if (shape < NEARLY_LINEAR) return (x) => x + (shape / 2) * x * (1 - x);
  const whole = 1 - exp(-shape);
  return (x) => (x === 1 ? 1 : (1 - exp(-shape * x)) / whole);
}

/**
 * Throttles between which the shape may be taken as straight, with an error below 0.2 % of full torque; few, denser where
 * the shape bends more. The error of a short chord of length h is h^2 |s''| / 8, and |s''| goes with e^(-k x), so that
 * equal errors stand at equal steps of e^(-k x / 2); the longest chords decide how many steps there are.
 *
 * @param shape k, >= 0
 * @returns from 0 to 1, increasing; 15 cells at k = 5
 */
export function shapeNodes(shape: number): Float64Array {
  if (shape === 0) return Float64Array.of(0, 1);
  const end = 1 - exp(-shape / 2);
  for (let count = 1; ; count++) {
    const nodes = Float64Array.from({ length: count + 1 }, (_, i) =>
      i === 0 ? 0 : i === count ? 1 : (-2 / shape) * log(1 - (i / count) * end),
    );
    if (nodes.every((x, i) => i === 0 || chordError(shape, nodes[i - 1]!, x) < TOLERANCE)) return nodes;
  }
}

/** Largest gap between the shape and its chord: where the slopes are equal, k e^(-k x) = (e^(-k from) - e^(-k to)) / (to - from). */
function chordError(shape: number, from: number, to: number): number {
  const low = exp(-shape * from);
  const drop = low - exp(-shape * to);
  const there = drop / (shape * (to - from));
  const share = log(low / there) / (shape * (to - from));
  return (low - share * drop - there) / (1 - exp(-shape));
}
