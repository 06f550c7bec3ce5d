import type { Estimate } from './estimate.ts';

/** A step of the throttle and what the speed did, cut out of a log. Times from the step [s], so negative before it. */
export interface StepRecord {
  readonly file: string;
  readonly name: string;
  /** Time of the step in its log [s]. */
  readonly at: number;
  /** Throttle before and after, -1 to 1. */
  readonly from: number;
  readonly to: number;
  readonly time: Float64Array;
  readonly speed: Float64Array;
}

/** The numbers of a first-order response with dead time: gain [m/s per whole throttle], time constant and delay [s]. */
export interface StepNumbers<T> {
  readonly gain: T;
  readonly timeConstant: T;
  readonly delay: T;
}

/** A step and its fit. */
export interface FittedStep {
  readonly record: StepRecord;
  /** By two points of the response, where the fit starts. */
  readonly twoPoint: StepNumbers<number>;
  readonly fit: StepNumbers<Estimate>;
  /** Speed before the step, and where it would settle [m/s]. */
  readonly before: number;
  readonly settled: number;
  /** Root mean square of what the fit leaves [m/s]. */
  readonly rmsSpeed: number;
}

/** All steps of a test. */
export interface StepTestFit {
  readonly steps: readonly FittedStep[];
  /** Over all steps: their mean, its interval by their scatter; of a single step its own. */
  readonly all: StepNumbers<Estimate>;
  /** The same of steps up and of steps down; null: there are none. */
  readonly up: StepNumbers<Estimate> | null;
  readonly down: StepNumbers<Estimate> | null;
}
