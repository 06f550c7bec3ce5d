import { END_OF_ROAD, NON_FINITE, STALLED, STOPPED } from './layout.ts';
import type { RunStatus } from './plan.ts';

/** How a kernel's event ends a run; null: it goes on. */
export function statusOf(event: number): RunStatus | null {
  switch (event) {
    case END_OF_ROAD:
      return 'completed';
    case STOPPED:
      return 'stopped';
    case STALLED:
      return 'stalled';
    case NON_FINITE:
      return 'non_finite';
    default:
      return null;
  }
}
