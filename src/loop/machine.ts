import type { Controller } from '../control/controller.ts';
import type { Belt } from '../vehicle/drive.ts';
import type { DragTangent } from './crosswind.ts';
import type { Fittings } from './fittings.ts';

/** A run compiled to flat arrays: what a kernel works on. Places in layout.ts. */
export interface Machine {
  readonly s: Float64Array;
  readonly p: Float64Array;
  /** Road table. */
  readonly rows: Float64Array;
  /** Drive cells and losses over shaft speed and throttle, and their inner edges; the ratio in hand is s[RATIO]. */
  readonly cells: Float64Array;
  readonly losses: Float64Array;
  readonly speedEdges: Float64Array;
  readonly throttleEdges: Float64Array;
  /** Ratio [1/m] and equivalent mass before the gear [kg] of every gear. */
  readonly gears: Float64Array;
  /** Steps a sample, with the clutch open and in every gear. */
  readonly stepsInGear: Float64Array;
  readonly belt: Belt | null;
  /** Devices that work once a sample. */
  readonly fittings: Fittings;
  readonly controller: Controller;
  readonly tangent: DragTangent;
  /** Decays of the lags over a step. */
  readonly lags: Float64Array;
  /** The cells of road and drive at hand. */
  readonly here: Float64Array;
  /** The samples of the last chunk, and the sums over them. */
  readonly log: Float64Array;
  readonly chunk: Float64Array;
}

/**
 * Runs up to `ticks` samples (at most LOG_ROWS), none of which starts at or beyond the station `until`, logs them and
 * sums over them; fewer where an automatic gearbox wants to shift before the next. Returns RUNNING, or why it ended
 * within a sample; NON_FINITE leaves the state as it was, and no sums.
 */
export type Kernel = (machine: Machine, ticks: number, until: number) => number;
