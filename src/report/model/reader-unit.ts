import { fromKmh } from '../../units/convert.ts';
import { fixed, type SpeedUnit, significant } from '../quantity.ts';

const NUMBER = /(\d+(?:\.\d+)?(?:e[+-]?\d+)?)([ \u00a0]% per)?([ \u00a0])km\/h/g;

/** Integrals of the squared error. */
const SQUARED = /(\d+(?:\.\d+)?(?:e[+-]?\d+)?)([ \u00a0])\(km\/h\)²/g;

/**
 * A sentence of the study or of a design, whose speeds are in km/h, in the reader's unit: numbers right before `km/h` are
 * speeds, those before `(km/h)²` their squares, those before `% per km/h` are gains.
 */
export function inReaderUnit(words: string, speed: SpeedUnit): string {
  if (speed.name === 'km/h') return words;
  const squared = words.replace(SQUARED, (_, number: string, gap: string) => {
    const value = speed.of(fromKmh(speed.of(fromKmh(Number(number)))));
    return `${fixed(value, value < 100 ? 1 : 0)}${gap}${speed.name}²`;
  });
  return squared.replace(NUMBER, (_, number: string, per: string | undefined, gap: string) => {
    if (per !== undefined)
      return `${significant(Number(number) / speed.of(fromKmh(1)))}${per}${gap}${speed.name}`;
    const value = speed.of(fromKmh(Number(number)));
    return `${fixed(value, value < 100 ? 1 : 0)}${gap}${speed.name}`;
  });
}
