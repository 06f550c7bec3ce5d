import { log } from '../numeric/elementary.ts';

/** Cells of equal probability in which the inverse of the normal law is a line, and how many at each end are not. */
const CELLS = 1024;
const TAIL = 16;
/** Bits of a word within a cell. */
const BITS = 22;

/** Numbers that are made at a time, a power of 2: one by one, each waits for its own mixing. */
const BLOCK = 32;

// Places of a noise: two words of its seed; the inverse of the normal law at the edges of the cells; the ticks of a block,
// first and one behind the last, and its numbers.
const EDGES = 2;
const FIRST = EDGES + CELLS + 1;
const BEHIND = FIRST + 1;
const NUMBERS = BEHIND + 1;
export const NOISE_SIZE = NUMBERS + BLOCK;

/**
 * What `normalAt` reads.
 *
 * @param seed its whole part counts, modulo 2^53
 */
export function noiseOf(seed: number): Float64Array {
  const whole = Math.trunc(seed);
  const high = Math.floor(Math.abs(whole) / 4294967296) | 0;
  const noise = new Float64Array(NOISE_SIZE);
  noise[0] = (whole % 4294967296) | 0;
  noise[1] = mix(high ^ 0x5bd1e995);
  for (let cell = TAIL; cell <= CELLS - TAIL; cell++) noise[EDGES + cell] = normalQuantile(cell / CELLS);
  return noise;
}

/**
 * A standard normal number for a tick: no stream, so that a copy of the state is enough to go on from it. A word is
 * mixed from seed and tick by the 32-bit finaliser of MurmurHash3 (A. Appleby, public domain, from memory) and put
 * through the inverse of the normal law, which between tabulated values is taken as a line (2e-4 off at most, without a
 * logarithm a sample), and in the tails as it is.
 *
 * @param f with a noise from a place on
 * @param tick whole, in [0, 2^32)
 */
export function normalAt(f: Float64Array, place: number, tick: number): number {
  if (!(tick >= f[place + FIRST] && tick < f[place + BEHIND])) makeBlock(f, place, tick);
  return f[place + NUMBERS + ((tick - f[place + FIRST]) | 0)];
}

function makeBlock(f: Float64Array, place: number, tick: number): void {
  const first = tick - (tick & (BLOCK - 1));
  f[place + FIRST] = first;
  f[place + BEHIND] = first + BLOCK;
  const start = first | 0;
  const low = f[place] | 0;
  const high = f[place + 1] | 0;
  for (let i = 0; i < BLOCK; i++) {
    const word = mix(mix((Math.imul(start + i, 0x9e3779b9) + low) | 0) ^ high);
    const cell = word >>> BITS;
    const out = place + NUMBERS + i;
    if (cell < TAIL || cell >= CELLS - TAIL) f[out] = normalQuantile(((word >>> 0) + 0.5) * (1 / 4294967296));
    else {
      const below = f[place + EDGES + cell];
      const share = ((word & ((1 << BITS) - 1)) + 0.5) * (1 / (1 << BITS));
      f[out] = below + share * (f[place + EDGES + 1 + cell] - below);
    }
  }
}

/**
 * Value below which a standard normal number lies with probability p in (0, 1). M. J. Wichura, Algorithm AS 241, Applied
 * Statistics 37 (1988) 477-484 (PPND7, good to 1e-7; coefficients from memory, checked against tables).
 */
export function normalQuantile(p: number): number {
  const q = p - 0.5;
  if (q <= 0.425 && q >= -0.425) {
    const r = 0.180625 - q * q;
    return (
      (q * (((59.10937472 * r + 159.29113202) * r + 50.434271938) * r + 3.3871327179)) /
      (((67.1875636 * r + 78.757757664) * r + 17.895169469) * r + 1)
    );
  }
  let r = Math.sqrt(-log(q < 0 ? p : 1 - p));
  let size = 0;
  if (r <= 5) {
    r -= 1.6;
    size =
      (((0.17023821103 * r + 1.3067284816) * r + 2.75681539) * r + 1.4234372777) /
      ((0.12021132975 * r + 0.7370016425) * r + 1);
  } else {
    r -= 5;
    size =
      (((0.017337203997 * r + 0.42868294337) * r + 3.081226386) * r + 6.657905115) /
      ((0.012258202635 * r + 0.24197894225) * r + 1);
  }
  return q < 0 ? -size : size;
}

function mix(word: number): number {
  let z = word | 0;
  z = Math.imul(z ^ (z >>> 16), 0x85ebca6b);
  z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35);
  return z ^ (z >>> 16);
}
