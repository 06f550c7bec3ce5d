import type { Place } from './place.ts';

/** Something the user should know and that stops nothing. Data in the result; printed by the programs. */
export interface Warning {
  /** Stable, kebab-case. */
  readonly code: string;
  /** A whole sentence, with figures and units. */
  readonly message: string;
  readonly place?: Place;
  /** Stretch of the driven road it speaks of, horizontal distance [m]. */
  readonly from?: number;
  readonly to?: number;
}
