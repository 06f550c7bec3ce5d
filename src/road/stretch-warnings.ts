import type { Warning } from '../problems/warning.ts';
import { toKm } from '../units/convert.ts';

/** A stretch may run over the end by this much without a word: places are written in km, to a metre [m]. */
const OVERRUN = 1;

/** What is left to say of the stretches of one kind that were given for a road. */
interface StretchesGiven {
  readonly kind: 'mask' | 'shelter';
  readonly given: readonly { readonly from: number; readonly to: number }[];
  /** How many of them touch no driven place. */
  readonly lost: number;
  /** Of the file's track or the written road [m]. */
  readonly length: number;
}

/** Warns of stretches that lie outside of the driven road, and of those that reach past the end of the given one. */
export function stretchWarnings({ kind, given, lost, length }: StretchesGiven): Warning[] {
  const warnings: Warning[] = [];
  const stretches =
    kind === 'mask' ? ['mask lies', 'masks lie'] : ['sheltered stretch lies', 'sheltered stretches lie'];
  if (lost > 0)
    warnings.push({
      code: `${kind}-outside-road`,
      message: `${lost} ${stretches[lost === 1 ? 0 : 1]} outside of the driven part of the road and ${lost === 1 ? 'changes' : 'change'} nothing.`,
    });
  for (const { from, to } of given)
    if (from < length && to > length + OVERRUN)
      warnings.push({
        code: `${kind}-past-end`,
        message: `A ${kind === 'mask' ? 'mask' : 'sheltered stretch'} from km ${toKm(from).toFixed(2)} reaches to km ${toKm(to).toFixed(2)}, past the end of the road at km ${toKm(length).toFixed(2)}: is it the right place?`,
      });
  return warnings;
}
