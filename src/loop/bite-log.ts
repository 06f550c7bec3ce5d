import { BITES, bitesSoFar } from '../control/bites.ts';
import { BUS_BITES } from '../control/bus.ts';
import type { BiteRecord } from './result.ts';

/** Finds where something that is wrong in a controller first had a say. */
export interface BiteLog {
  /** Looks at the counts after a stretch that began at a horizontal distance [m]. */
  readonly note: (distance: number) => void;
  readonly finish: () => readonly BiteRecord[];
}

/** @param s state of the run, whose counts the controller keeps */
export function biteLog(s: Float64Array): BiteLog {
  const first = new Map<number, number>();
  return {
    note: (distance) => {
      // Asked at every bin: without a copy of the counts.
      for (let i = 0; i < BITES.length; i++)
        if (s[BUS_BITES + i] > 0 && !first.has(i)) first.set(i, distance);
    },
    finish: () => {
      const counts = bitesSoFar(s);
      return [...first].map(([i, distance]) => ({ bite: BITES[i]!, samples: counts[i]!, distance }));
    },
  };
}
