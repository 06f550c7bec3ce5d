import { pow } from '../numeric/elementary.ts';
import { DRY_AIR_GAS_CONSTANT } from '../units/constants.ts';
import type { Drive } from './drive.ts';

/** Range of the correction factor for which ISO 1585 vouches. */
export const CORRECTION_RANGE = { least: 0.93, greatest: 1.07 } as const;

/**
 * Correction factor of ISO 1585 (and UN R85) for spark-ignition engines without supercharging,
 * alpha = (99 kPa / p)^1.2 (T / 298 K)^0.6: the power at reference conditions over the power here. Formula from memory.
 * The pressure is that of dry air of this density and temperature.
 *
 * @param airDensity [kg/m3]
 * @param airTemperature [K]
 * @returns ratio, above 1 in thin or warm air
 */
export function correctionFactor(airDensity: number, airTemperature: number): number {
  const pressure = airDensity * DRY_AIR_GAS_CONSTANT * airTemperature;
  return pow(99_000 / pressure, 1.2) * pow(airTemperature / 298, 0.6);
}

/**
 * Share of the rated full-throttle torque that the engine has in this air: min(1, 1 / alpha); 1 for a drive without
 * altitude derating. Beyond `CORRECTION_RANGE` (from 890 m of the standard atmosphere up) it extrapolates: see `deratingExtrapolates`.
 */
export function derateFactor(
  drive: Pick<Drive, 'derate'>,
  airDensity: number,
  airTemperature: number,
): number {
  if (drive.derate === 'none') return 1;
  return Math.min(1, 1 / correctionFactor(airDensity, airTemperature));
}

/** True where the derating of this drive rests on a correction factor above the range that ISO 1585 vouches for. */
export function deratingExtrapolates(
  drive: Pick<Drive, 'derate'>,
  airDensity: number,
  airTemperature: number,
): boolean {
  return drive.derate !== 'none' && correctionFactor(airDensity, airTemperature) > CORRECTION_RANGE.greatest;
}
