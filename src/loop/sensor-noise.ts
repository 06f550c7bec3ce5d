import { log } from '../numeric/elementary.ts';

/**
 * A standard normal number for a tick: no stream, so that a copy of the state is enough to go on from it. A word is
 * mixed from seed and tick by the 32-bit finaliser of MurmurHash3 (A. Appleby, public domain, from memory) and put
 * through the inverse of the normal law by M. J. Wichura, Algorithm AS 241, Applied Statistics 37 (1988) 477-484
 * (PPND7, good to 1e-7; coefficients from memory, checked against tables).
 *
 * @param first of the two words of `noiseWords`
 * @param second
 * @param tick whole, in [0, 2^32)
 */
export function normalAt(first: number, second: number, tick: number): number {
  const word = mix(mix(Math.imul(tick, 0x9e3779b9) + first) ^ second);
  return normalQuantile(((word >>> 0) + 0.5) * (1 / 4294967296));
}

/** The two words that a seed gives to every tick. @param seed its whole part counts, modulo 2^53 */
export function noiseWords(seed: number): readonly [number, number] {
  const whole = Math.trunc(seed);
  const high = Math.floor(Math.abs(whole) / 4294967296) | 0;
  return [(whole % 4294967296) | 0, mix(high ^ 0x5bd1e995)];
}

/** Value below which a standard normal number lies with probability p in (0, 1). */
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
