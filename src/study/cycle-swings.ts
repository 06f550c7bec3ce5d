/** A turning point of a signal that swings: its sample, and the value there. */
export interface Turning {
  readonly at: number;
  readonly value: number;
}

/**
 * Peaks and troughs, in turn, between which a signal moves by at least `height`; smaller ripples are passed over.
 *
 * @param low least value of each sample, or of the bin that stands for it
 * @param high greatest value; `low` itself where a sample has one value
 * @param height > 0, in the unit of the signal
 * @returns turning points in order, the first excursion's start included; empty where the signal never moves that far
 */
export function turningsOf(low: Float64Array, high: Float64Array, height: number): Turning[] {
  const turnings: Turning[] = [];
  let top = { at: 0, value: Number.NEGATIVE_INFINITY };
  let bottom = { at: 0, value: Number.POSITIVE_INFINITY };
  // 1: going up since the last turning, -1: down, 0: not known yet.
  let way: -1 | 0 | 1 = 0;
  const pass = (at: number, value: number): void => {
    if (value >= top.value) top = { at, value };
    if (value <= bottom.value) bottom = { at, value };
    if (way >= 0 && top.value - value >= height) {
      turnings.push(top);
      way = -1;
      bottom = { at, value };
    } else if (way <= 0 && value - bottom.value >= height) {
      turnings.push(bottom);
      way = 1;
      top = { at, value };
    }
  };
  for (let i = 0; i < low.length; i++) {
    // Within a bin the order is not known: as if it went on before it turned.
    const rising = way > 0;
    pass(i, rising ? high[i] : low[i]);
    pass(i, rising ? low[i] : high[i]);
  }
  return turnings;
}

/**
 * Runs of turning points that follow each other without a pause.
 *
 * @param time of a sample [s]
 * @param pause longest time from one turning point to the next [s]
 * @param least turning points in a run
 */
export function chainsOf(
  turnings: readonly Turning[],
  time: Float64Array,
  pause: number,
  least: number,
): Turning[][] {
  const chains: Turning[][] = [];
  let chain: Turning[] = [];
  for (const turning of turnings) {
    const last = chain.at(-1);
    if (last !== undefined && time[turning.at] - time[last.at] > pause) {
      if (chain.length >= least) chains.push(chain);
      chain = [];
    }
    chain.push(turning);
  }
  if (chain.length >= least) chains.push(chain);
  return chains;
}
