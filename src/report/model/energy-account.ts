import type { Ledger } from '../../loop/result.ts';

export type EnergyTerm = 'aero' | 'rolling' | 'climb' | 'brake' | 'kinetic' | 'regeneration';

/** Where the drive's work goes, in the order of the bars. */
export const ENERGY_TERMS: readonly {
  readonly name: EnergyTerm;
  readonly words: string;
  readonly short: string;
}[] = [
  { name: 'aero', words: 'air', short: 'air' },
  { name: 'rolling', words: 'rolling', short: 'rolling' },
  { name: 'climb', words: 'height gained', short: 'climb' },
  { name: 'brake', words: 'brake', short: 'brake' },
  { name: 'regeneration', words: 'held back by the drive', short: 'drive' },
  { name: 'kinetic', words: 'speed gained', short: 'speed' },
];

export type EnergyAccount = Readonly<Record<EnergyTerm, number>>;

/** False for a run that failed numerically: there is nothing to draw. */
export const isWhole = (account: EnergyAccount): boolean =>
  ENERGY_TERMS.every((term) => Number.isFinite(account[term.name]));

/** The account as uses of the drive's pushing work [J]: drive = aero + rolling + climb + brake + kinetic + what the drive took back. */
export function energyAccount(ledger: Ledger): EnergyAccount {
  return {
    aero: ledger.aero,
    rolling: ledger.rolling,
    climb: ledger.climb,
    brake: ledger.brake,
    kinetic: ledger.kinetic,
    regeneration: -ledger.regeneration,
  };
}
