import type { View } from './view.ts';

/**
 * How hard the drive must work to hold the set speed, in classes: from `none` (it must hold back, and closed throttle
 * is enough) through three shares of what there is to the two that it cannot do.
 */
export type DemandClass = 'hold-back' | 'light' | 'strong' | 'near-limit' | 'above' | 'below';

export const DEMAND_CLASSES: readonly { readonly name: DemandClass; readonly words: string }[] = [
  { name: 'hold-back', words: 'drive holds back, enough' },
  { name: 'light', words: 'below 60 % of what there is' },
  { name: 'strong', words: '60 to 90 %' },
  { name: 'near-limit', words: '90 to 100 %' },
  { name: 'above', words: 'above 100 %: more than there is' },
  { name: 'below', words: 'even the least force is too much' },
];

/** @param share see Demand.share */
export function demandClass(share: number): DemandClass {
  if (share > 1) return 'above';
  if (share < -1) return 'below';
  if (share >= 0.9) return 'near-limit';
  if (share >= 0.6) return 'strong';
  return share < 0 ? 'hold-back' : 'light';
}

/** How telling a class is: of the knots in one pixel column the most telling one is shown. */
const WEIGHT: Readonly<Record<DemandClass, number>> = {
  light: 0,
  'hold-back': 1,
  strong: 2,
  'near-limit': 3,
  below: 4,
  above: 5,
};

export interface DemandRun {
  readonly name: DemandClass;
  /** Horizontal distance [m]. */
  readonly from: number;
  readonly to: number;
}

/** The road cut into runs of one class, no finer than columns of `width` [m]; what cannot be held is never lost. */
export function demandRuns(view: View, width: number): readonly DemandRun[] {
  const { road, demand } = view.result;
  const runs: { name: DemandClass; from: number; to: number }[] = [];
  const columns = Math.max(1, Math.ceil(view.length / width));
  let knot = 0;
  let last: DemandClass = demandClass(demand.share[0] ?? 0);
  for (let column = 0; column < columns; column++) {
    const to = column === columns - 1 ? view.length : (column + 1) * width;
    let name: DemandClass | null = null;
    for (; knot < road.size && (road.distance[knot]! < to || column === columns - 1); knot++) {
      const here = demandClass(demand.share[knot]!);
      if (name === null || WEIGHT[here] > WEIGHT[name]) name = here;
    }
    // Knots wider apart than columns: the class of the one before holds on.
    name ??= last;
    last = name;
    const open = runs[runs.length - 1];
    if (open?.name === name) open.to = to;
    else runs.push({ name, from: column * width, to });
  }
  return runs;
}
