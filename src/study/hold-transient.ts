import type { FullSeries, HoldEvent } from '../loop/result.ts';
import type { Figure } from './findings.ts';

/** What follows an event of the hold, from a few seconds before it to where the speed has settled or the next one comes. */
export interface HoldTransient {
  readonly candidate: string;
  readonly event: HoldEvent;
  /** Jump of the command at the event, without its sign: 0 is bumpless. */
  readonly commandStep: number;
  /** Furthest below and above the set speed on the way, in true speed [m/s], signed; of a resume: from where the reference has arrived. */
  readonly lowest: Figure;
  readonly highest: Figure;
  /** From the event to the start of 3 s within 1 km/h of the set speed [s]. */
  readonly settling: Figure;
  /** Greatest |da/dt| on the way, over 0.2 s [m/s3]. */
  readonly jerk: Figure;
  /** One sentence. */
  readonly words: string;
  /** Every sample, thinned to at most 400 rows, extremes kept. */
  readonly picture: FullSeries;
}
