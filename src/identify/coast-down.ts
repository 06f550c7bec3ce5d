import type { Estimate } from './estimate.ts';

/** Which way along the road a run went. */
export type Direction = 'there' | 'back';

/** One run of a coast-down: the vehicle rolls out of gear and is slowed by air, tyres and slope alone. SI. */
export interface CoastRun {
  readonly file: string;
  readonly name: string;
  readonly direction: Direction;
  /** Rising [s]. */
  readonly time: Float64Array;
  readonly speed: Float64Array;
  /** Height of the road [m]; null: not logged. */
  readonly elevation: Float64Array | null;
  /** tan(theta), positive uphill as the run goes; null: not logged. Where there is one, it beats the elevation. */
  readonly grade: Float64Array | null;
  /** Against travel [m/s]; null: not logged. */
  readonly headwind: Float64Array | null;
}

/** What is known of the vehicle and of the day. */
export interface CoastSetting {
  /** All that rolls and is carried [kg]. */
  readonly mass: number;
  /** Equivalent mass of what turns with the wheels [kg]. */
  readonly rotatingMass: number;
  /** [kg/m3] */
  readonly airDensity: number;
}

/** A run in the fit. */
export interface FittedRun {
  readonly name: string;
  readonly direction: Direction;
  /** Highest and lowest speed [m/s]. */
  readonly from: number;
  readonly to: number;
  readonly duration: number;
  readonly samples: number;
  /** Root mean square of what the fit leaves of the force, over its pieces [N]. */
  readonly rmsForce: number;
  /** Mean of it: a run that differs from the others shows here [N]. */
  readonly meanForce: number;
}

/** What the fit leaves, piece by piece of all runs. */
export interface CoastResiduals {
  /** Index of the run. */
  readonly run: Int32Array;
  /** Mean speed over the piece [m/s]. */
  readonly speed: Float64Array;
  /** Mean force that slowed the vehicle over the piece, in still air on the level: measured less wind and slope [N]. */
  readonly force: Float64Array;
  /** Measured less fitted [N]. */
  readonly residual: Float64Array;
}

/** A fit with a rolling coefficient that is Crr + growth v: a check of the model of two terms, and the form of three. */
export interface ThreeTermFit {
  readonly crr: Estimate;
  readonly cda: Estimate;
  /** [s/m] */
  readonly growth: Estimate;
}

/** Drag area and rolling coefficient of a coast-down. */
export interface CoastDownFit {
  readonly setting: CoastSetting;
  /** Drag area without yaw [m2]. */
  readonly cda: Estimate;
  /** Rolling resistance coefficient, the same at all speeds. */
  readonly crr: Estimate;
  /** Of the errors of both, as the speeds driven give it. */
  readonly correlation: number;
  /** Steady wind along the road, against the way there [m/s]; null: it was logged. */
  readonly wind: Estimate | null;
  /** Steady grade of the road, uphill on the way there; null: it was logged. */
  readonly grade: Estimate | null;
  /** The same runs with a third term; null: the speeds do not tell the three apart. */
  readonly threeTerms: ThreeTermFit | null;
  /** Degrees of freedom of the drag area's interval. */
  readonly degrees: number;
  readonly runs: readonly FittedRun[];
  readonly residuals: CoastResiduals;
  /** Root mean square over all pieces [N]. */
  readonly rmsForce: number;
}
