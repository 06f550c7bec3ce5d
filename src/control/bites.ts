import { BUS_BITES } from './bus.ts';

/** What can be wrong in a controller, in the order of its counts on the bus. */
export const BITES = [
  /** The increment of the integral rounds to nothing though there is an error. */
  'increment_lost',
  /** A word overflows: it wraps around or stays at its end. */
  'overflow',
  /** Anti-windup by signs fails at limits of one sign: it lets the integral run on, or stops it where it should not. */
  'sign_test',
  /** A cap in the wrong unit holds the integral. */
  'integral_cap',
  /** The integral runs on inside the dead band. */
  'dead_band',
] as const;

export type Bite = (typeof BITES)[number];

export const BITE_INCREMENT_LOST = 24;
export const BITE_OVERFLOW = 25;
export const BITE_SIGN_TEST = 26;
export const BITE_INTEGRAL_CAP = 27;
export const BITE_DEAD_BAND = 28;

/** Samples in which each has had a say so far, in the order of BITES. */
export function bitesSoFar(bus: Float64Array): Float64Array {
  return bus.slice(BUS_BITES, BUS_BITES + BITES.length);
}
