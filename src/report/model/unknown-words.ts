import type { RideUnknown } from '../../identify/ride.ts';

/** What an unknown of a ride is called, and its unit. */
export const UNKNOWN_WORDS: Readonly<Record<RideUnknown, { readonly name: string; readonly unit: string }>> =
  {
    cda_m2: { name: 'drag area CdA', unit: 'm²' },
    crr: { name: 'rolling coefficient Crr', unit: '' },
    mass_kg: { name: 'loaded mass', unit: 'kg' },
  };
