import { pow } from '../numeric/elementary.ts';
import {
  DRY_AIR_GAS_CONSTANT,
  SEA_LEVEL_TEMPERATURE,
  STANDARD_GRAVITY,
  TEMPERATURE_LAPSE_RATE,
} from '../units/constants.ts';
import type { Air } from './options.ts';

/** Exponent of pressure over temperature in an atmosphere of constant lapse rate, 5.25588. */
const PRESSURE_EXPONENT = STANDARD_GRAVITY / (TEMPERATURE_LAPSE_RATE * DRY_AIR_GAS_CONSTANT);

/**
 * Density [kg/m3] and temperature [K] of the air along a road, by the standard atmosphere's lapse rate of 6.5 K/km
 * (ISO 2533:1975) above the given temperature and pressure at sea level; a given density holds everywhere, with the
 * temperature of the standard atmosphere. Elevations count as geopotential altitude: at 3,000 m that is 1.4 m.
 */
export function airAlong(
  elevation: Float64Array,
  air: Air,
): { readonly density: Float64Array; readonly temperature: Float64Array } {
  const base = air.kind === 'standard' ? air.temperature : SEA_LEVEL_TEMPERATURE;
  const temperature = elevation.map((z) => base - TEMPERATURE_LAPSE_RATE * z);
  if (air.kind === 'density') return { density: temperature.map(() => air.density), temperature };
  const density = temperature.map(
    (t) => (air.pressure * pow(t / base, PRESSURE_EXPONENT)) / (DRY_AIR_GAS_CONSTANT * t),
  );
  return { density, temperature };
}
