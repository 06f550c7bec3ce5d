import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import { stationAt } from './places.ts';
import type { LoopPlan, RoutePlace } from './plan.ts';

/** What a plan has at places and times along the way, in order, in a run under way. */
export interface RouteSchedule<T> {
  /** Takes the next one where it is due at the sample that starts now; null: it is not, or there is none left. */
  readonly take: () => T | null;
  /** Samples until the next one is due by its time; Infinity: by its distance, or none. */
  readonly ticksLeft: () => number;
  /** Station from which on the next one is due by its distance; Infinity: by its time, or none. */
  readonly nextPlace: () => number;
}

/** Samples until so many seconds have passed; a hair early counts as passed. */
export function ticksOf({ p }: Machine, time: number): number {
  return Math.ceil(time / p[at.P_SAMPLE] - 1e-9);
}

/** @param taken place of the state that counts those that have been taken */
export function routeSchedule<T extends { readonly at: RoutePlace }>(
  machine: Machine,
  plan: LoopPlan,
  list: readonly T[],
  taken: number,
): RouteSchedule<T> {
  const { s } = machine;
  const whens = list.map(({ at: place }) =>
    'distance' in place
      ? { station: stationAt(plan.road, place.distance), tick: Number.POSITIVE_INFINITY }
      : { station: Number.POSITIVE_INFINITY, tick: ticksOf(machine, place.time) },
  );
  return {
    take: () => {
      const when = whens[s[taken]];
      if (when === undefined || (s[at.STATION] < when.station && s[at.TICK] < when.tick)) return null;
      s[taken] += 1;
      return list[s[taken] - 1]!;
    },
    ticksLeft: () => Math.max(0, (whens[s[taken]]?.tick ?? Number.POSITIVE_INFINITY) - s[at.TICK]),
    nextPlace: () => whens[s[taken]]?.station ?? Number.POSITIVE_INFINITY,
  };
}
