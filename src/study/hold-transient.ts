import type { FullSeries, HoldEvent, HoldEventKind } from '../loop/result.ts';
import type { Figure } from './findings.ts';
import type { HoldOff } from './hold-off.ts';

/** Said of a settling that something on the way, such as the next event or a change of set speed, cut short. */
export const NEXT_CAME = 'what came next on the way came first';

/** Said of one that had the time and the road for it. */
export const NOT_SETTLED = 'it was not within 1 km/h for 3 s in a minute';

/** Said of one that the drive had no force for. */
export const OUT_OF_RANGE = 'the drive could not hold the set speed there';

/**
 * What follows an event of the hold, over the whole time that it is followed: to the next event or change of set speed, to
 * where the set speed asks for more or less than the drive has, or for a minute; with hold off for 10 s. What the road
 * does in that time is in it too, alike for all candidates.
 */
export interface HoldMeasure {
  readonly candidate: string;
  readonly event: HoldEvent;
  /** Jump of the command at the event, within its limits, without its sign: 0 is bumpless. Of an override at the sample at which hold is back. */
  readonly commandStep: Figure;
  /**
   * Furthest below and above the set speed in that time, in true speed [m/s], signed: 0 where it never was on that side. Of
   * a resume from where the reference has arrived, of taps from where the speed has, behind an override from where hold is back.
   */
  readonly lowest: Figure;
  readonly highest: Figure;
  /**
   * From the event to the start of the first 3 s within 1 km/h of the set speed [s], as a recovery is measured: the next
   * hill counts for nothing in it. A slow loop may pass so and go on: that is in the extremes.
   */
  readonly settling: Figure;
  /** Greatest |da/dt| in that time, over 0.2 s [m/s3]; of an end by the rider's brake, for a bend too, none: it is the rider's. */
  readonly jerk: Figure;
}

/** The same with what people look at. */
export interface HoldTransient extends HoldMeasure {
  /** One sentence. */
  readonly words: string;
  /** Every sample from a few seconds before the event, thinned to at most 400 rows, extremes kept. */
  readonly picture: FullSeries;
}

/** The transients of all candidates, by candidate, in order along the way. */
export interface HoldTransients {
  readonly shown: readonly HoldTransient[];
  /** Figures of all of them, shown or not. */
  readonly measures: readonly HoldMeasure[];
  /** Those of a kind beyond the worst few, which have figures and no picture. */
  readonly leftOut: readonly {
    readonly candidate: string;
    readonly kind: HoldEventKind;
    readonly count: number;
  }[];
}

/** What became of the hold, as far as a figure counts it. */
export interface HoldRecord {
  readonly measures: readonly HoldMeasure[];
  /** Where hold was off. */
  readonly off: readonly HoldOff[];
  /** Where a rule of the unit ended it [m]. */
  readonly endedByRule: readonly number[];
}
