import { log } from '../numeric/elementary.ts';
import type { HeatingSpec } from './battery-spec.ts';
import { checkSpec } from './check-spec.ts';
import type { Heating } from './energy-source.ts';

/**
 * First-order heat of motor and controller from what a data sheet says. From cold, peak power brings
 * h(t) = (P_peak / P_cont)^2 (1 - e^(-t / tau)), which is 1 at the stated time for
 *
 *     tau = -t / ln(1 - (P_cont / P_peak)^2).
 *
 * At h = 1 the share P_cont / P_peak of the force is left, which gives continuous power and keeps h at 1. Since force
 * falls from the onset on, full power lasts less than the stated time and h comes close to 1 without passing it.
 *
 * @param peakPower at the wheel [W]; null: no power limit, which heating needs
 * @returns null where the drive gives its peak power for ever
 * @throws InputError `out-of-range`
 */
export function heatingOf(spec: HeatingSpec, peakPower: number | null): Heating | null {
  const { continuousPower, peakPowerTime, onset } = spec;
  checkSpec('heating', [
    { key: 'peakPower', value: peakPower ?? Number.NaN, unit: 'W', least: 0, above: true },
    { key: 'heating.continuousPower', value: continuousPower, unit: 'W', least: 0, above: true },
    { key: 'heating.peakPowerTime', value: peakPowerTime, unit: 's', least: 0, above: true },
    { key: 'heating.onset', value: onset, unit: '', least: 0, greatest: 0.999 },
  ]);
  const least = continuousPower / peakPower!;
  if (least >= 1) return null;
  return { continuousPower, time: -peakPowerTime / log(1 - least * least), onset, least };
}
