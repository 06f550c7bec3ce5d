import { log } from './elementary.ts';

/** State of a stream: copy it to come back to this place. */
export interface RandomState {
  readonly words: Uint32Array;
  /** Second normal number of the last pair, not given out yet; NaN: none. */
  readonly spare: number;
}

/** Pseudo-random numbers that are the same for the same seed on every engine. */
export interface RandomStream {
  /** Uniform in [0, 1), 53 bits. */
  uniform(): number;
  /** Standard normal: mean 0, standard deviation 1. */
  normal(): number;
  /** A copy of the present state. */
  state(): RandomState;
  /** Goes back, or on, to a state that `state` gave. */
  restore(state: RandomState): void;
}

/**
 * A seeded stream: the generator sfc32 (C. Doty-Humphrey, PractRand, "small fast counting", 32-bit words, from memory),
 * its state filled by splitmix32, the 32-bit finaliser of MurmurHash3 over a Weyl sequence (G. Steele, D. Lea,
 * C. Flood, "Fast splittable pseudorandom number generators", OOPSLA 2014, in its 32-bit form), then 12 rounds thrown
 * away. Normal numbers by the polar method (G. Marsaglia, T. Bray, SIAM Review 6 (1964) 260-264).
 *
 * @param seed any finite number; its whole part counts, modulo 2^53
 */
export function seededStream(seed: number): RandomStream {
  const words = new Uint32Array(4);
  let spare = Number.NaN;
  const whole = Math.trunc(seed);
  let weyl =
    ((whole % 4294967296) >>> 0) ^ Math.imul(Math.floor(Math.abs(whole) / 4294967296) >>> 0, 0x85ebca6b);
  for (let i = 0; i < 3; i++) {
    weyl = (weyl + 0x9e3779b9) | 0;
    let z = weyl;
    z = Math.imul(z ^ (z >>> 16), 0x85ebca6b);
    z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35);
    words[i] = z ^ (z >>> 16);
  }
  words[3] = 1;

  function next(): number {
    const a = words[0]!;
    const b = words[1]!;
    const c = words[2]!;
    const sum = (a + b + words[3]!) >>> 0;
    words[3] = words[3]! + 1;
    words[0] = b ^ (b >>> 9);
    words[1] = c + (c << 3);
    words[2] = ((c << 21) | (c >>> 11)) + sum;
    return sum;
  }
  function uniform(): number {
    const high = next() >>> 5;
    return (high * 67108864 + (next() >>> 6)) / 9007199254740992;
  }
  function normal(): number {
    if (!Number.isNaN(spare)) {
      const kept = spare;
      spare = Number.NaN;
      return kept;
    }
    for (;;) {
      const x = 2 * uniform() - 1;
      const y = 2 * uniform() - 1;
      const square = x * x + y * y;
      if (square >= 1 || square === 0) continue;
      const factor = Math.sqrt((-2 * log(square)) / square);
      spare = y * factor;
      return x * factor;
    }
  }
  for (let i = 0; i < 12; i++) next();
  return {
    uniform,
    normal,
    state: () => ({ words: words.slice(), spare }),
    restore(state) {
      words.set(state.words);
      spare = state.spare;
    },
  };
}
