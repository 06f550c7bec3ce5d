import type { Controller } from '../control/controller.ts';
import type { DragTangent } from './crosswind.ts';

/** A run compiled to flat arrays: what a kernel works on. Places in layout.ts and record.ts. */
export interface Machine {
  readonly s: Float64Array;
  readonly p: Float64Array;
  /** Road table. */
  readonly rows: Float64Array;
  /** Drive cells in terms of vehicle speed, with the gear folded in, and their inner edges [m/s], [throttle]. */
  readonly cells: Float64Array;
  readonly speedEdges: Float64Array;
  readonly throttleEdges: Float64Array;
  readonly controller: Controller;
  readonly tangent: DragTangent;
  /** What the samples of the last chunk saw and did. */
  readonly log: Float64Array;
}

/**
 * Runs up to `ticks` samples (at most LOG_ROWS), none of which starts at or beyond the station `until`, and logs them.
 * Returns RUNNING, or why it ended within a sample.
 */
export type Kernel = (machine: Machine, ticks: number, until: number) => number;
