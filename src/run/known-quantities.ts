import type { VehicleDocument } from '../case/read-vehicle-file.ts';
import { rotatingMassKg } from '../case/vehicle-mass.ts';
import { airOfWeather, type TestAir } from '../identify/reference-conditions.ts';
import { InputError } from '../problems/input-error.ts';
import { fromCelsius, fromHpa } from '../units/convert.ts';
import type { GivenNumber } from './identification.ts';
import type { IdentifyRequest } from './identify-request.ts';

/** Masses of what rolled. */
export interface Masses {
  readonly mass: GivenNumber;
  readonly rotating: GivenNumber;
}

/**
 * Masses of a request: its own go before those of the vehicle file.
 *
 * @throws InputError `mass-unknown`
 */
export function massesOf({ massKg, rotatingKg }: IdentifyRequest, vehicle: VehicleDocument | null): Masses {
  if (massKg === undefined && vehicle === null)
    throw new InputError({
      code: 'mass-unknown',
      place: {},
      message: 'the mass that rolled is not known; every number follows from it',
      allowed: '--mass-kg with the mass of vehicle, rider and load, or --vehicle with a vehicle file',
    });
  const from = `vehicle file ${vehicle?.source.file.split(/[\\/]/).at(-1) ?? ''}`;
  const kg = (name: string, value: number, source: string, isDefault = false): GivenNumber => ({
    name,
    value,
    unit: 'kg',
    from: source,
    isDefault,
  });
  const { kerb_kg = 0, rider_kg = 0, payload_kg = 0, rotating_kg } = vehicle?.file.mass ?? {};
  const mass =
    massKg === undefined
      ? kg('loaded mass', kerb_kg + rider_kg + payload_kg, from)
      : kg('loaded mass', massKg, '--mass-kg');
  if (rotatingKg !== undefined) return { mass, rotating: kg('rotating mass', rotatingKg, '--rotating-kg') };
  if (vehicle !== null)
    return {
      mass,
      rotating: kg(
        'rotating mass',
        rotatingMassKg(vehicle.file),
        rotating_kg === undefined ? '4 % of the kerb mass, UN GTR No. 2' : from,
        rotating_kg === undefined,
      ),
    };
  return {
    mass,
    rotating: kg(
      'rotating mass',
      (mass.value * ROTATING_PCT) / 100,
      `not given: ${ROTATING_PCT} % of the loaded mass, as UN GTR No. 2 allows for wheels that were not measured`,
      true,
    ),
  };
}

const ROTATING_PCT = 4;

/** Air of the logs, and where its numbers are from. */
export interface KnownAir {
  readonly air: TestAir;
  readonly given: readonly GivenNumber[];
  readonly words: string;
  /** Nobody said what the air was. */
  readonly assumed: boolean;
}

/**
 * Air of a request; the standard atmosphere at sea level where it says nothing.
 *
 * @throws InputError `two-airs`
 */
export function airOf({ airTemperatureC, airPressureHpa, airDensityKgM3 }: IdentifyRequest): KnownAir {
  if (airDensityKgM3 !== undefined) {
    if (airTemperatureC !== undefined || airPressureHpa !== undefined)
      throw new InputError({
        code: 'two-airs',
        place: {},
        message: 'the air is given twice',
        found: '--air-density-kg-m3 beside temperature or pressure',
        allowed: '--air-temperature-c with --air-pressure-hpa, or --air-density-kg-m3',
      });
    const given = { name: 'air density', value: airDensityKgM3, unit: 'kg/m3', from: '--air-density-kg-m3' };
    return {
      air: { temperature: null, pressure: null, density: airDensityKgM3 },
      given: [{ ...given, isDefault: false }],
      words: 'given',
      assumed: false,
    };
  }
  const standard = 'not given: standard atmosphere at sea level, ISO 2533';
  const temperature: GivenNumber = {
    name: 'air temperature',
    value: airTemperatureC ?? 15,
    unit: 'deg C',
    from: airTemperatureC === undefined ? standard : '--air-temperature-c',
    isDefault: airTemperatureC === undefined,
  };
  const pressure: GivenNumber = {
    name: 'air pressure',
    value: airPressureHpa ?? 1013.25,
    unit: 'hPa',
    from: airPressureHpa === undefined ? standard : '--air-pressure-hpa',
    isDefault: airPressureHpa === undefined,
  };
  const assumed = temperature.isDefault || pressure.isDefault;
  const both = temperature.isDefault && pressure.isDefault;
  return {
    air: airOfWeather(fromCelsius(temperature.value), fromHpa(pressure.value)),
    given: [temperature, pressure],
    words: `${temperature.value} deg C, ${pressure.value} hPa${assumed ? (both ? ', assumed' : ', assumed in part') : ''}`,
    assumed,
  };
}
