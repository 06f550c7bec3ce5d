import type { LoopResult } from '../../loop/result.ts';
import { figureRow } from '../../study/figure-table.ts';
import { toLitre, toPct, toWh } from '../../units/convert.ts';
import type { EnergySource } from '../../vehicle/energy-source.ts';
import { fixed, significant, withUnit } from '../quantity.ts';

/** What a run took from its tank or battery. */
export interface EnergyUse {
  readonly kind: EnergySource['kind'];
  /** [J]; of a battery less what came back. */
  readonly drawn: number;
  /** Fuel [m3]; null: a battery. */
  readonly volume: number | null;
  /** Share of the battery that is left at the end; null: no battery of known capacity. */
  readonly chargeAtEnd: number | null;
}

/** Use of energy of a run; null for a drive without a source, or a run that failed numerically. */
export function energyUse(
  source: EnergySource | null,
  { ledger: { drawn, chargeAtEnd } }: Pick<LoopResult, 'ledger'>,
): EnergyUse | null {
  if (source === null || drawn === null || !Number.isFinite(drawn)) return null;
  const volume = source.kind === 'fuel' ? drawn / source.heat : null;
  return { kind: source.kind, drawn, volume, chargeAtEnd };
}

/** The use in words: litres, or watt hours and what is left. */
export function useText({ drawn, volume, chargeAtEnd }: EnergyUse): string {
  if (volume !== null) return withUnit(significant(toLitre(volume)), 'l');
  const left = chargeAtEnd === null ? '' : `, ${withUnit(fixed(toPct(chargeAtEnd), 1), '%')} left`;
  return `${withUnit(fixed(toWh(drawn)), 'Wh')}${left}`;
}

/** Figures that tell the use over distance, of the table of figures. */
export const useFigures = ({ kind, capacity }: EnergySource): readonly string[] => [
  kind === 'fuel' ? 'fuel_l_per_100km' : 'drawn_wh_per_km',
  ...(capacity === null ? [] : ['range_km']),
];

/** What all of that means, in whole sentences. */
export function useDefinitions(source: EnergySource): string {
  const fuel = source.kind === 'fuel';
  const own = fuel
    ? 'Used: the integral of fuel power over the run, as the fuel map has it at each sample (idling while the clutch is open), over the lower heating value by volume.'
    : `Used: the integral of the power of the battery over the run, regeneration taken off.${
        source.capacity === null
          ? ''
          : ` Left: of the usable capacity, ${withUnit(fixed(toPct(source.charge)), '%')} of it at the start; the reserve is ${withUnit(fixed(toPct(source.reserve)), '%')}.`
      }`;
  const figures = useFigures(source).flatMap((name) => {
    const row = figureRow(name);
    return row === undefined ? [] : [`${row.label}: ${row.definition}`];
  });
  return [own, ...figures].join(' ');
}
