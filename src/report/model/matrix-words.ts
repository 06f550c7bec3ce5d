import type { Combination, MatrixList } from '../../case/matrix-of.ts';
import type { MatrixCell } from '../../run/matrix-result.ts';
import { fromKmh } from '../../units/convert.ts';
import { type SpeedUnit, speedText, withUnit } from '../quantity.ts';

/** Columns of a matrix's lists, in words. */
export const LIST_WORDS: Readonly<Record<MatrixList, string>> = {
  loads: 'load',
  winds: 'wind',
  directions: 'direction',
  gears: 'gear',
  set_speeds_kmh: 'set speed',
};

/** `load, wind and direction`. */
export function listWords(lists: readonly MatrixList[]): string {
  const words = lists.map((list) => LIST_WORDS[list]);
  const last = words.pop() ?? '';
  return words.length === 0 ? last : `${words.join(', ')} and ${last}`;
}

/** What a combination has of a list. */
export function itemText(combination: Combination, list: MatrixList, speed: SpeedUnit): string {
  switch (list) {
    case 'loads':
      return combination.load.label;
    case 'winds':
      return combination.wind.label.replace(/ deg$/, '\u00b0');
    case 'directions':
      return combination.direction;
    case 'gears':
      return combination.gear === null ? 'no gears' : `gear ${combination.gear}`;
    case 'set_speeds_kmh': {
      const value = speed.of(fromKmh(combination.setSpeedKmh));
      return speedText(fromKmh(combination.setSpeedKmh), speed, Number.isInteger(value) ? 0 : 1);
    }
  }
}

/** Rider, payload and pillion in words: `75 kg`, `75 + 15 + 75 kg`. */
export function loadText({ load }: Combination): string {
  const parts = [load.riderKg, load.payloadKg, load.pillionKg].filter((mass) => mass > 0);
  return withUnit(parts.length === 0 ? '0' : parts.join(' + '), 'kg');
}

/** A combination by what it has of every list: `two up, east wind, back, 60 km/h`. */
export function combinationText(
  { combination }: Pick<MatrixCell, 'combination'>,
  lists: readonly MatrixList[],
  speed: SpeedUnit,
): string {
  return lists.map((list) => itemText(combination, list, speed)).join(', ');
}
