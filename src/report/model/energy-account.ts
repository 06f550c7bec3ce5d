import type { Ledger } from '../../loop/result.ts';
import type { View } from './view.ts';

export type EnergyTerm = 'aero' | 'rolling' | 'climb' | 'brake' | 'kinetic' | 'regeneration' | 'shifts';

/** Where the drive's work goes, in the order of the bars. */
const ENERGY_TERMS: readonly {
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
  { name: 'shifts', words: 'left in the clutch at shifts', short: 'clutch' },
];

/** The terms that this run has: shifts only where somebody shifted. */
export const energyTerms = ({ candidates }: Pick<View, 'candidates'>): typeof ENERGY_TERMS =>
  ENERGY_TERMS.filter(
    ({ name }) => name !== 'shifts' || candidates.some(({ result }) => result.ledger.shifts !== 0),
  );

export type EnergyAccount = Readonly<Record<EnergyTerm, number>>;

/** False for a run that failed numerically: there is nothing to draw. */
export const isWhole = (account: EnergyAccount): boolean =>
  ENERGY_TERMS.every((term) => Number.isFinite(account[term.name]));

/** The account as uses of the drive's pushing work [J]: drive = aero + rolling + climb + brake + kinetic + shifts + what the drive took back. */
export function energyAccount(ledger: Ledger): EnergyAccount {
  return {
    aero: ledger.aero,
    rolling: ledger.rolling,
    climb: ledger.climb,
    brake: ledger.brake,
    kinetic: ledger.kinetic,
    shifts: ledger.shifts,
    regeneration: -ledger.regeneration,
  };
}
