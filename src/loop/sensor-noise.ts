import { cos, log } from '../numeric/elementary.ts';

/**
 * A standard normal number for a tick: no stream, so that a copy of the state is enough to go on from it. Two words are
 * mixed from seed and tick by the 32-bit finaliser of MurmurHash3 (A. Appleby, public domain, from memory), and turned
 * into a normal number by G. E. P. Box and M. E. Muller, Annals of Mathematical Statistics 29 (1958) 610-611.
 *
 * @param low low word of the seed
 * @param high high word of the seed
 * @param tick whole, in [0, 2^32)
 */
export function normalAt(low: number, high: number, tick: number): number {
  const first = mix(mix(Math.imul(tick, 0x9e3779b9) + low) ^ high);
  const second = mix(mix((Math.imul(tick, 0x85ebca77) ^ high) + 0x27d4eb2f) + low);
  const radius = Math.sqrt(-2 * log((first + 0.5) / 4294967296));
  return radius * cos(second * (6.283185307179586 / 4294967296));
}

function mix(word: number): number {
  let z = word | 0;
  z = Math.imul(z ^ (z >>> 16), 0x85ebca6b);
  z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35);
  return (z ^ (z >>> 16)) >>> 0;
}
