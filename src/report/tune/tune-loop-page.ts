import { PAGE_PAINT } from '../paint.ts';
import type { LoopPage } from '../sections/loop-section.ts';
import { type TunedView, type TuneView, tunedKey } from './tune-view.ts';

/** The loops of a tuning that are told of at length: those of the case, and that of the proposal to take. */
export function tuneLoopPage({ result, speed, tuned }: TuneView): LoopPage {
  const named = (name: string): TunedView | undefined => tuned.find((one) => one.name === name);
  const loops = result.sheet.loops.filter(
    ({ name }) => name === result.chosen || named(name)?.proposal === null,
  );
  return {
    sheet: { ...result.sheet, loops },
    speed,
    colourOf: (name) => named(name)?.colour ?? 0,
    keyOf: (name) => {
      const one = named(name);
      return one === undefined ? null : tunedKey(one, PAGE_PAINT);
    },
    file: 'margins.csv',
  };
}
