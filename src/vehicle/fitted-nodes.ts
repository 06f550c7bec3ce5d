/** Halvings between a step that is narrow enough and one twice as wide that is not. */
const HALVINGS = 5;

/**
 * Nodes between which a function may be taken as straight: the given ones, and as few more in between as its gap allows,
 * found from the left, each step as wide as it may be.
 *
 * @param corners increasing; each is a node
 * @param gap how far the function is from its chord over an interval, as a share of what is allowed; falls to 0 with its width
 * @returns increasing, the corners among them
 */
export function fittedNodes(corners: Float64Array, gap: (from: number, to: number) => number): Float64Array {
  const nodes = [corners[0]!];
  for (let i = 1; i < corners.length; i++) {
    let from = corners[i - 1]!;
    const end = corners[i]!;
    while (gap(from, end) > 1) {
      let step = (end - from) / 2;
      while (gap(from, from + step) > 1) step /= 2;
      let most = Math.min(2 * step, end - from);
      for (let k = 0; k < HALVINGS; k++) {
        const middle = (step + most) / 2;
        if (gap(from, from + middle) > 1) most = middle;
        else step = middle;
      }
      // No sliver before the corner: what is left is at least half as wide.
      from += Math.min(step, (end - from) / 1.5);
      nodes.push(from);
    }
    nodes.push(end);
  }
  return Float64Array.from(nodes);
}
