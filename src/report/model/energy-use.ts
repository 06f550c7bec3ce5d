import type { LoopResult } from '../../loop/result.ts';
import { toKm, toLitre, toPct, toWh } from '../../units/convert.ts';
import type { EnergySource } from '../../vehicle/energy-source.ts';
import { fixed, NO_VALUE, significant } from '../quantity.ts';

/** What a run took from its tank or battery. */
export interface EnergyUse {
  readonly kind: EnergySource['kind'];
  /** [J]; of a battery less what came back. */
  readonly drawn: number;
  /** Fuel [m3], and fuel over distance [m3/m]; null: a battery, or no way was driven. */
  readonly volume: number | null;
  readonly volumePerDistance: number | null;
  /** Share of the battery at the start and the end; null: no battery of known capacity. */
  readonly charge: { readonly start: number; readonly end: number } | null;
  /**
   * Distance [m] that the full tank, or the battery from its charge at the start down to its reserve, lasts at the mean
   * use per distance of this run; null: capacity not known, nothing used on the whole, or no way driven.
   */
  readonly range: number | null;
}

/** Use of energy of a run; null for a drive without a source, or a run that failed numerically. */
export function energyUse(
  source: EnergySource | null,
  { ledger, endDistance }: Pick<LoopResult, 'ledger' | 'endDistance'>,
): EnergyUse | null {
  const { drawn, chargeAtEnd } = ledger;
  if (source === null || drawn === null || !Number.isFinite(drawn)) return null;
  const usable =
    source.capacity === null
      ? null
      : source.kind === 'fuel'
        ? source.capacity
        : Math.max(0, source.charge - source.reserve) * source.capacity;
  const range = usable === null || !(drawn > 0) || !(endDistance > 0) ? null : (usable / drawn) * endDistance;
  if (source.kind === 'battery')
    return {
      kind: 'battery',
      drawn,
      volume: null,
      volumePerDistance: null,
      charge: chargeAtEnd === null ? null : { start: source.charge, end: chargeAtEnd },
      range,
    };
  const volume = drawn / source.heat;
  return {
    kind: 'fuel',
    drawn,
    volume,
    volumePerDistance: endDistance > 0 ? volume / endDistance : null,
    charge: null,
    range,
  };
}

/** A column of the table of energy, for people. */
export interface UseColumn {
  readonly head: string;
  readonly text: (use: EnergyUse) => string;
}

/** 1 m3/m is 10^8 litres over 100 km. */
export const toLitrePer100Km = (volumePerDistance: number): number => toLitre(volumePerDistance) * 100_000;

const textOf = (value: number | null, text: (value: number) => string): string =>
  value === null ? NO_VALUE : text(value);

const RANGE: UseColumn = {
  head: 'range / km',
  text: ({ range }) => textOf(range, (value) => significant(toKm(value), 3)),
};

/** What to tell of a source, in the order of the columns. */
export function useColumns(source: EnergySource): readonly UseColumn[] {
  if (source.kind === 'fuel')
    return [
      { head: 'fuel / l', text: ({ volume }) => textOf(volume, (value) => significant(toLitre(value))) },
      {
        head: 'fuel / (l/100 km)',
        text: ({ volumePerDistance }) =>
          textOf(volumePerDistance, (value) => fixed(toLitrePer100Km(value), 2)),
      },
      ...(source.capacity === null ? [] : [RANGE]),
    ];
  return [
    { head: 'from the battery / Wh', text: ({ drawn }) => fixed(toWh(drawn)) },
    ...(source.capacity === null
      ? []
      : [
          {
            head: 'charge at the end / %',
            text: ({ charge }: EnergyUse) => textOf(charge?.end ?? null, (value) => fixed(toPct(value), 1)),
          },
          RANGE,
        ]),
  ];
}

/** What those columns mean, in whole sentences. */
export function useDefinitions(source: EnergySource): string {
  if (source.kind === 'fuel') {
    const range =
      source.capacity === null
        ? ''
        : ` Range: the distance that a full tank lasts at the mean use per distance of this run.`;
    return `Fuel: the integral of fuel power over the run, overrun with its fuel cut and idling at shifts counted as the fuel map has them, over the lower heating value by volume; per 100 km of horizontal distance.${range}`;
  }
  const range =
    source.capacity === null
      ? ''
      : ` Charge: what is left of the usable capacity, from ${fixed(toPct(source.charge))}\u00a0% at the start. Range: the distance from that charge down to the reserve of ${fixed(toPct(source.reserve))}\u00a0%, at the mean use per distance of this run.`;
  return `From the battery: the integral of its power by the loss map of the drive, regeneration taken off.${range}`;
}
