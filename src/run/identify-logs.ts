import { type IdentifiedVehicle, newIdentifiedVehicle, withIdentified } from '../case/identified-vehicle.ts';
import { readVehicleFile, type VehicleDocument } from '../case/read-vehicle-file.ts';
import { rotatingMassKg } from '../case/vehicle-mass.ts';
import { checkCoastDown } from '../identify/check-fit.ts';
import { coastRunsOf } from '../identify/coast-runs.ts';
import type { Estimate } from '../identify/estimate.ts';
import { fitCoastDown } from '../identify/fit-coast-down.ts';
import { type LogKind, logKindOf } from '../identify/log-kind.ts';
import { type LoggedRun, readLog } from '../identify/read-log.ts';
import {
  airOfWeather,
  formAtReference,
  measuredForm,
  type TestAir,
} from '../identify/reference-conditions.ts';
import { InputError } from '../problems/input-error.ts';
import type { Warning } from '../problems/warning.ts';
import { decodeText } from '../track/decode-text.ts';
import { fromCelsius, fromHpa } from '../units/convert.ts';
import { coastDownWarnings } from './coast-down-warnings.ts';
import type { CoastDownIdentification, GivenNumber, Identification } from './identification.ts';
import { InputLog, type Reader } from './input-log.ts';
import { TOOL_VERSION } from './tool-version.ts';

export interface IdentifyRequest {
  /** Names of the logs, one or more. */
  readonly logs: readonly string[];
  readonly read: Reader;
  /** What the logs are of; left out, it is told from their columns. */
  readonly kind?: LogKind | undefined;
  /** Name of a vehicle file: gives what is not measured, and takes what is. */
  readonly vehicle?: string | undefined;
  /** Loaded mass, and that of what turns with the wheels; they go before those of the vehicle file. */
  readonly massKg?: number | undefined;
  readonly rotatingKg?: number | undefined;
  /** Air where and when the logs were made: temperature and pressure there, or the density alone. */
  readonly airTemperatureC?: number | undefined;
  readonly airPressureHpa?: number | undefined;
  readonly airDensityKgM3?: number | undefined;
}

/**
 * Turns logs into numbers of a vehicle: text in, plain data out.
 *
 * @throws InputError for what a log or the vehicle file refuses, and for logs that are too thin, with what was found
 *   and what to measure
 */
export function identifyLogs(request: IdentifyRequest): Identification {
  const log = new InputLog(request.read);
  const runs = request.logs.flatMap((name) => readLog(decodeText(log.read(name), name), name));
  const vehicle = vehicleOf(request, log);
  const kind = request.kind ?? logKindOf(runs);
  if (kind !== 'coast-down')
    throw new InputError({ code: 'log-kind', place: { file: request.logs.join(', ') }, message: 'not yet' });
  return identifyCoastDown(request, runs, vehicle, log);
}

function vehicleOf({ vehicle: name }: IdentifyRequest, log: InputLog): VehicleDocument | null {
  return name === undefined ? null : readVehicleFile(decodeText(log.read(name), name), name);
}

function identifyCoastDown(
  request: IdentifyRequest,
  logs: readonly LoggedRun[],
  vehicle: VehicleDocument | null,
  log: InputLog,
): CoastDownIdentification {
  const masses = massesOf(request, vehicle);
  const air = airOf(request);
  const runs = coastRunsOf(logs);
  const fit = checkCoastDown(
    fitCoastDown(runs, {
      mass: masses.mass.value,
      rotatingMass: masses.rotating.value,
      airDensity: air.air.density,
    }),
    request.logs.join(', '),
  );
  const measured = measuredForm(fit);
  const provenance = [
    `Measured by ridgehold identify from ${counted(fit.runs.length, 'coast-down run')} in ${logNames(request).join(', ')}:`,
    `cda_m2 ${numberWords(fit.cda, 'm2')}`,
    `crr ${numberWords(fit.crr, '')}`,
    `correlation ${fit.correlation.toFixed(2)}; air ${air.air.density.toFixed(3)} kg/m3 (${air.words}), loaded mass ${masses.mass.value} kg (${masses.mass.from})`,
  ];
  const found: IdentifiedVehicle = { cda: fit.cda.value, crr: fit.crr.value, mass: null, provenance };
  const warnings: Warning[] = [...coastDownWarnings(fit, logs, air.assumed)];
  return {
    kind: 'coast-down',
    toolVersion: TOOL_VERSION,
    logs: logNames(request),
    inputs: log.files,
    given: [masses.mass, masses.rotating, ...air.given],
    warnings,
    fit,
    air: air.air,
    measured,
    atReference: formAtReference(measured, air.air),
    vehicle:
      vehicle === null
        ? newIdentifiedVehicle({
            cda: fit.cda.value,
            crr: fit.crr.value,
            mass: masses.mass.value,
            rotatingMass: masses.rotating.value,
            provenance,
            massWords: `Given: ${masses.mass.value} kg loaded (${masses.mass.from}), ${masses.rotating.value} kg of it as if it turned with the wheels (${masses.rotating.from}).`,
          })
        : withIdentified(vehicle, found),
  };
}

const logNames = ({ logs }: IdentifyRequest): readonly string[] =>
  logs.map((name) => name.split(/[\\/]/).at(-1) ?? name);

function numberWords({ value, standardError, low, high }: Estimate, unit: string): string {
  const digits = (x: number): string => String(Number(x.toPrecision(4)));
  const end = unit === '' ? '' : ` ${unit}`;
  return `${digits(value)}${end}: standard error ${digits(standardError)}, 95 % interval ${digits(low)} to ${digits(high)}`;
}

const counted = (count: number, what: string): string => `${count} ${what}${count === 1 ? '' : 's'}`;

interface Masses {
  readonly mass: GivenNumber;
  readonly rotating: GivenNumber;
}

function massesOf({ massKg, rotatingKg }: IdentifyRequest, vehicle: VehicleDocument | null): Masses {
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

interface KnownAir {
  readonly air: TestAir;
  readonly given: readonly GivenNumber[];
  readonly words: string;
  /** Nobody said what the air was. */
  readonly assumed: boolean;
}

function airOf({ airTemperatureC, airPressureHpa, airDensityKgM3 }: IdentifyRequest): KnownAir {
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
  return {
    air: airOfWeather(fromCelsius(temperature.value), fromHpa(pressure.value)),
    given: [temperature, pressure],
    words: `${temperature.value} deg C, ${pressure.value} hPa${assumed ? ', assumed in part' : ''}`,
    assumed,
  };
}
