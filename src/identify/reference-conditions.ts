import { DRY_AIR_GAS_CONSTANT, STANDARD_GRAVITY } from '../units/constants.ts';
import type { CoastDownFit } from './coast-down.ts';
import { type Estimate, scaledEstimate } from './estimate.ts';

/** The air of a test. */
export interface TestAir {
  /** [K]; null: only the density is known. */
  readonly temperature: number | null;
  /** Where the test was, not brought to sea level [Pa]; null: only the density is known. */
  readonly pressure: number | null;
  /** [kg/m3] */
  readonly density: number;
}

/** Air of a temperature [K] and a pressure [Pa], dry. */
export const airOfWeather = (temperature: number, pressure: number): TestAir => ({
  temperature,
  pressure,
  density: pressure / (DRY_AIR_GAS_CONSTANT * temperature),
});

/** Standard ambient conditions of motorcycle road load tests: 293 K and 100 kPa (UN GTR No. 2, annex 7, from memory). */
export const REFERENCE_TEMPERATURE = 293;
export const REFERENCE_PRESSURE = 100_000;
/** Loss of rolling resistance with temperature [1/K], the default of the same annex (from memory). */
export const ROLLING_BY_TEMPERATURE = 6e-3;

/** Road load F = f0 + f1 v + f2 v^2 in still air on the level, in SI; f1 is nothing in the two-term form. */
export interface RoadLoadForm {
  readonly f0: Estimate;
  readonly f2: Estimate;
  /** [kg/m3] */
  readonly airDensity: number;
}

/** Road load of a coast-down as regulations write it: f0 = m g Crr and f2 = 1/2 rho CdA, in the air of the test. */
export function measuredForm({ setting, crr, cda }: CoastDownFit): RoadLoadForm {
  return {
    f0: scaledEstimate(crr, setting.mass * STANDARD_GRAVITY),
    f2: scaledEstimate(cda, setting.airDensity / 2),
    airDensity: setting.airDensity,
  };
}

/**
 * The same at the standard ambient conditions of UN GTR No. 2, annex 7 (also Regulation (EU) 134/2014; from memory):
 * f0* = f0 (1 + K0 (T - T0)) with K0 = 0.006 1/K, f2* = f2 (T / T0) (p0 / p). Where only the density is known f2 alone
 * is corrected, f2* = f2 rho0 / rho.
 */
export function formAtReference(
  form: RoadLoadForm,
  { temperature, pressure, density }: TestAir,
): RoadLoadForm {
  const airDensity = airOfWeather(REFERENCE_TEMPERATURE, REFERENCE_PRESSURE).density;
  if (temperature === null || pressure === null)
    return { f0: form.f0, f2: scaledEstimate(form.f2, airDensity / density), airDensity };
  const rolling = 1 + ROLLING_BY_TEMPERATURE * (temperature - REFERENCE_TEMPERATURE);
  const air = (temperature / REFERENCE_TEMPERATURE) * (REFERENCE_PRESSURE / pressure);
  return { f0: scaledEstimate(form.f0, rolling), f2: scaledEstimate(form.f2, air), airDensity };
}
