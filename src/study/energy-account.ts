import type { Figure, Replayed } from './findings.ts';

/** Where the energy went, all at the wheel [J]; `battery` at the battery. */
export interface EnergyAccount {
  readonly candidate: string;
  /** In: work of the drive while it pushed. */
  readonly drive: number;
  /** Out, each positive where it took energy. */
  readonly aero: number;
  readonly rolling: number;
  /** Height gained; negative on a road that falls. */
  readonly climb: number;
  /** Held back by the drive: engine drag or regeneration. */
  readonly heldBack: number;
  readonly brake: number;
  /** Into speed. */
  readonly kinetic: number;
  /** What does not close: drive less the sum of the rest. */
  readonly open: number;
  readonly battery: Figure;
}

/** Each candidate's account of energy over its whole run, from the ledger of the loop. */
export function energyAccounts(replayed: readonly Replayed[]): EnergyAccount[] {
  return replayed.map(({ name, result: { ledger } }) => {
    const heldBack = -ledger.regeneration;
    const { drive, aero, rolling, climb, brake, kinetic } = ledger;
    return {
      candidate: name,
      drive,
      aero,
      rolling,
      climb,
      heldBack,
      brake,
      kinetic,
      open: drive - heldBack - aero - rolling - climb - brake - kinetic,
      battery: ledger.battery ?? { none: 'the drive has no efficiency' },
    };
  });
}
