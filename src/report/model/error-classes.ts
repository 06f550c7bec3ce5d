import { trimmed } from '../quantity.ts';
import type { View } from './view.ts';

/** Signed error in seven classes by multiples of the band: beyond 3, 1 to 3, within, and the same above. */
export interface ErrorClass {
  /** Index into Paint.diverging. */
  readonly index: number;
  readonly words: string;
}

const EDGES = [-3, -1, -0.25, 0.25, 1, 3] as const;

/** Class of an error [m/s] for a band [m/s]: 0 far too slow, 3 right, 6 far too fast. */
export function errorClass(error: number, band: number): number {
  let index = 0;
  while (index < EDGES.length && error > EDGES[index]! * band) index++;
  return index;
}

/** The classes in words, with their limits in the reader's unit. */
export function errorClasses(view: View): readonly ErrorClass[] {
  const { speed, result } = view;
  const at = (edge: number) => trimmed(speed.of(Math.abs(edge) * result.band), 1);
  const unit = speed.name;
  return [
    { index: 0, words: `more than ${at(3)} ${unit} too slow` },
    { index: 1, words: `${at(1)} to ${at(3)} too slow` },
    { index: 2, words: `${at(0.25)} to ${at(1)} too slow` },
    { index: 3, words: `within ±${at(0.25)} ${unit}` },
    { index: 4, words: `${at(0.25)} to ${at(1)} too fast` },
    { index: 5, words: `${at(1)} to ${at(3)} too fast` },
    { index: 6, words: `more than ${at(3)} ${unit} too fast` },
  ];
}
