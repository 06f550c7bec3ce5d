import { DRY_AIR_GAS_CONSTANT, STANDARD_GRAVITY } from '../units/constants.ts';
import type { CoastDownFit, CoastSetting, ThreeTermFit } from './coast-down.ts';
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

/** Road load F = f0 + f1 v + f2 v^2 in still air on the level, in SI. */
export interface RoadLoadForm {
  readonly f0: Estimate;
  /** Null: the form of two terms, without it. */
  readonly f1: Estimate | null;
  readonly f2: Estimate;
  /** [kg/m3] */
  readonly airDensity: number;
}

/**
 * Road load of a coast-down as regulations write it, in the air of the test: f0 = m g Crr, f1 = m g times the growth of
 * Crr with speed, f2 = 1/2 rho CdA.
 *
 * @param fit of two terms or of three
 */
export function measuredForm(
  { crr, cda, growth }: Pick<CoastDownFit, 'crr' | 'cda'> & Partial<Pick<ThreeTermFit, 'growth'>>,
  setting: CoastSetting,
): RoadLoadForm {
  const weight = setting.mass * STANDARD_GRAVITY;
  return {
    f0: scaledEstimate(crr, weight),
    f1: growth === undefined ? null : scaledEstimate(growth, weight),
    f2: scaledEstimate(cda, setting.airDensity / 2),
    airDensity: setting.airDensity,
  };
}

/**
 * The same at the standard ambient conditions of UN GTR No. 2, annex 7 (also Regulation (EU) 134/2014; from memory):
 * f0* = f0 (1 + K0 (T - T0)) with K0 = 0.006 1/K, f2* = f2 (T / T0) (p0 / p). A third term is corrected as the first, f1* =
 * f1 (1 + K0 (T - T0)): the form of ISO 10521-1 and UN GTR No. 15 (from memory), whose K0 is another, for cars. Where only the density is known f2 alone
 * is corrected, f2* = f2 rho0 / rho.
 */
export function formAtReference(
  form: RoadLoadForm,
  { temperature, pressure, density }: TestAir,
): RoadLoadForm {
  const airDensity = airOfWeather(REFERENCE_TEMPERATURE, REFERENCE_PRESSURE).density;
  if (temperature === null || pressure === null)
    return { ...form, f2: scaledEstimate(form.f2, airDensity / density), airDensity };
  const rolling = 1 + ROLLING_BY_TEMPERATURE * (temperature - REFERENCE_TEMPERATURE);
  const air = (temperature / REFERENCE_TEMPERATURE) * (REFERENCE_PRESSURE / pressure);
  return {
    f0: scaledEstimate(form.f0, rolling),
    f1: form.f1 === null ? null : scaledEstimate(form.f1, rolling),
    f2: scaledEstimate(form.f2, air),
    airDensity,
  };
}
