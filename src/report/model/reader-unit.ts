import { fromKmh } from '../../units/convert.ts';
import { fixed, type SpeedUnit } from '../quantity.ts';

/**
 * A sentence of the study, whose speeds are in km/h, in the reader's unit. Only numbers that stand right before `km/h`
 * are speeds: a gain in `% per km/h` stays as it is.
 */
export function inReaderUnit(words: string, speed: SpeedUnit): string {
  if (speed.name === 'km/h') return words;
  return words.replace(/(\d+(?:\.\d+)?)([ \u00a0])km\/h/g, (_, number: string, gap: string) => {
    const value = speed.of(fromKmh(Number(number)));
    return `${fixed(value, value < 100 ? 1 : 0)}${gap}${speed.name}`;
  });
}
