import type { GainRegion } from '../control/gain-region.ts';
import type { Gains } from '../control/sampled-loop.ts';
import { exp, log } from '../numeric/elementary.ts';

/** A search for gains on a road. */
export interface RoadSearch {
  /** Where gains keep the bound at every operating point. */
  readonly region: GainRegion;
  /** Gains as they would be written and surely keep the bound; null: none near these. */
  readonly settle: (gains: Gains) => Gains | null;
  /** Replays the road; Infinity: it did not get to the end. */
  readonly costAt: (gains: Gains) => number;
  /** Replays that the search may take, at least 20. */
  readonly mostReplays: number;
  /** Gains that are known already: the search ends with none that cost more. */
  readonly starts?: readonly Gains[];
  readonly onReplay?: (done: number) => void;
}

/** Gains that were tried. */
export interface RoadTrial extends Gains {
  readonly cost: number;
}

/** Grid at the start: steps of kp below the greatest, and shares of the greatest ki at each; half of the replays at most. */
const STEP_OF_KP = (2.5 / 7) * log(10);
/** At the greatest kp itself there is no ki left. */
const BELOW_EDGE = 0.03;
const KP_COUNT = 8;
const SHARES = [1, 0.3, 0.1, 0.03];
/** The search ends when its step is less: 1 % of the gains. */
const LEAST_STEP = 0.01;
/** Steps along the axes first, then across. */
const DIRECTIONS = [
  [1, 0],
  [-1, 0],
  [0, -1],
  [0, 1],
  [1, -1],
  [-1, 1],
  [1, 1],
  [-1, -1],
] as const;

/**
 * Gains of the least cost on a road among those that keep the bound. The greatest ki at a kp is known in closed form, so
 * the search goes over the logarithms of kp and of ki as a share of that: the bound is then an edge of the field, and a
 * point beyond it is set onto it. A grid over the field and the gains that are known already are followed by a pattern search from its best point (R. Hooke, T. A. Jeeves, J. ACM 8 (1961) 212-229, from
 * memory), whose step is halved where none of eight neighbours is better. Nothing in it is random.
 *
 * @returns every trial in its order; empty where the region is
 */
export function searchOnRoad({
  region,
  settle,
  costAt,
  mostReplays,
  starts = [],
  onReplay = () => {},
}: RoadSearch): readonly RoadTrial[] {
  const trials: RoadTrial[] = [];
  const known = new Map<string, RoadTrial>();
  const at = ({ x, y }: Place): RoadTrial | null => {
    const kp = exp(x);
    const greatest = region.greatestIntegral(kp);
    const gains = greatest > 0 ? settle({ kp, ki: greatest * exp(y) }) : null;
    if (gains === null) return null;
    const key = `${gains.kp} ${gains.ki}`;
    const before = known.get(key);
    if (before !== undefined) return before;
    if (trials.length >= mostReplays) return null;
    const trial = { kp: gains.kp, ki: gains.ki, cost: costAt(gains) };
    known.set(key, trial);
    trials.push(trial);
    onReplay(trials.length);
    return trial;
  };

  let best: { readonly place: Place; readonly cost: number } | null = null;
  for (const place of [...placesOf(starts, region), ...gridOf(region, mostReplays / 2)]) {
    const trial = at(place);
    if (trial !== null && trial.cost < (best?.cost ?? Number.POSITIVE_INFINITY))
      best = { place, cost: trial.cost };
  }
  if (best === null) return trials;

  let step: Place = { x: STEP_OF_KP / 2, y: -log(SHARES[1]!) / 2 };
  let { place, cost } = best;
  while (Math.max(step.x, step.y) > LEAST_STEP && trials.length < mostReplays) {
    const from = place;
    for (const [dx, dy] of DIRECTIONS) {
      const next = { x: from.x + dx * step.x, y: Math.min(0, from.y + dy * step.y) };
      const trial = at(next);
      if (trial === null || !(trial.cost < cost)) continue;
      [place, cost] = [next, trial.cost];
      // The way that was good may be so again.
      const further = { x: next.x + dx * step.x, y: Math.min(0, next.y + dy * step.y) };
      const again = at(further);
      if (again !== null && again.cost < cost) [place, cost] = [further, again.cost];
      break;
    }
    if (place === from) step = { x: step.x / 2, y: step.y / 2 };
  }
  return trials;
}

/** Where gains lie in the field; those outside are left out. */
function placesOf(gains: readonly Gains[], region: GainRegion): readonly Place[] {
  return gains.flatMap(({ kp, ki }) => {
    const greatest = region.greatestIntegral(kp);
    return greatest > 0 && ki > 0 ? [{ x: log(kp), y: Math.min(0, log(ki / greatest)) }] : [];
  });
}

/** The whole field, from its greatest kp down; in each range no more than so many places. */
function gridOf({ ranges }: GainRegion, most: number): readonly Place[] {
  const count = Math.min(KP_COUNT, Math.floor(most / SHARES.length));
  return ranges.flatMap(({ low, high }) =>
    Array.from({ length: count }, (_, i) => log(high) - BELOW_EDGE - i * STEP_OF_KP)
      .filter((x) => x >= log(low))
      .flatMap((x) => SHARES.map((share) => ({ x, y: log(share) }))),
  );
}

/** Logarithms of kp and of the share of the greatest ki, 0 or less. */
interface Place {
  readonly x: number;
  readonly y: number;
}
