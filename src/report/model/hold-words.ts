import type { HoldEventCause, HoldEventKind } from '../../loop/result.ts';
import type { UnfitPlace } from '../../study/bend-plan.ts';
import type { HoldMeasure } from '../../study/hold-transient.ts';
import { transientWords } from '../../study/transient-words.ts';
import { type SpeedUnit, speedText } from '../quantity.ts';
import { inReaderUnit } from './reader-unit.ts';
import type { View } from './view.ts';

/** An event in a table. */
export const EVENT_NAMES: Readonly<Record<HoldEventKind, string>> = {
  engaged: 'engaged',
  resumed: 'resumed',
  tapped: 'tapped',
  override_began: 'grip opened',
  override_ended: 'grip let go',
  reentered: 'back behind the grip',
  ended: 'ended',
  refused: 'refused',
};

/** Who or what was behind it, in a table. */
export const CAUSE_NAMES: Readonly<Record<HoldEventCause, string>> = {
  rider: 'the rider',
  bend: 'a bend',
  brake: 'the brake',
  clutch: 'the clutch',
  gear_change: 'a change of gear',
  too_slow: 'rule: too slow',
  too_fast: 'rule: too fast',
  below_lowest_speed: 'rule: below the lowest speed',
  sensor_not_believed: 'rule: sensor not believed',
};

/** A transient in one sentence, in the reader's unit. */
export const readerWords = ({ speed }: Pick<View, 'speed'>, measure: HoldMeasure): string =>
  inReaderUnit(transientWords(measure), speed);

/** Why speed hold does not belong at a place. */
export function unfitWords({ reason, bends, lowestSpeed }: UnfitPlace, speed: SpeedUnit): string {
  const many = bends === 1 ? 'A bend' : `${bends} bends`;
  const down = `${many} down to ${speedText(lowestSpeed, speed, 0)}`;
  return reason === 'below_lowest'
    ? `${down}, slower than the unit holds.`
    : `${down}, so near to each other that hold would not be worth resuming.`;
}
