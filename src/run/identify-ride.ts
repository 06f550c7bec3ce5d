import { hasOwnPlaces, identifiedWarnings, withIdentified } from '../case/identified-vehicle.ts';
import { type CaseDocument, readCaseFile } from '../case/read-case-file.ts';
import { readVehicleFile, type VehicleDocument } from '../case/read-vehicle-file.ts';
import { segmentsOf } from '../case/run-of.ts';
import { vehicleOf } from '../case/vehicle-of.ts';
import { vehicleOfCase } from '../case/vehicle-of-case.ts';
import { placeOf } from '../case/yaml-source.ts';
import { FEWEST_PIECES, fitRide } from '../identify/fit-ride.ts';
import { type LoggedRun, readLog } from '../identify/read-log.ts';
import type { FittedUnknown, RideFit, RideStretch, RideUnknown, RideVehicle } from '../identify/ride.ts';
import { InputError } from '../problems/input-error.ts';
import { layRide } from '../study/lay-ride.ts';
import { decodeText } from '../track/decode-text.ts';
import { readRide } from '../track/read-ride.ts';
import { toKm } from '../units/convert.ts';
import { dragArea } from '../vehicle/road-load.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { GivenNumber, RideIdentification } from './identification.ts';
import type { IdentifyRequest } from './identify-request.ts';
import { InputLog } from './input-log.ts';
import { airOf } from './known-quantities.ts';
import { logNames, numberWords } from './provenance.ts';
import { rideFitWarnings } from './ride-fit-warnings.ts';
import { stretchesOfLog, stretchesOfLogOnRoad, stretchesOnRoad } from './ride-stretches.ts';
import { roadOfCase } from './road-of.ts';
import { TOOL_VERSION } from './tool-version.ts';

/** Length of the segments where no case says one [m]. */
const SEGMENT = 500;
const UNITS = { cda_m2: 'm2', crr: '', mass_kg: 'kg' } as const;

/** What a ride is held against. */
interface Held {
  readonly document: VehicleDocument;
  readonly vehicle: Vehicle;
  readonly stretches: readonly RideStretch[];
  readonly segment: number;
  readonly given: readonly GivenNumber[];
  readonly roadWords: string;
  readonly airAssumed: boolean;
  /** The log has the power at the wheel. */
  readonly byPower: boolean;
}

/**
 * A ride beside its vehicle: what it took over what the vehicle needs, segment by segment, and the numbers of the
 * vehicle that make both agree.
 *
 * @param runs of the logs by their own columns; null: they are laid along the road of the case
 */
export function identifyRide(
  request: IdentifyRequest,
  runs: readonly LoggedRun[] | null,
  log: InputLog,
): RideIdentification {
  const held = runs === null ? onRoadOfCase(request, log) : byItsColumns(request, runs, log);
  const { vehicle, document, stretches } = held;
  const unknowns = request.fit ?? ['cda_m2', 'crr'];
  const fit = fitRide(stretches, rideVehicleOf(vehicle), unknowns, held.segment);
  if (fit === null) throw tooShort(request, stretches);
  refuseImpossible(fit, request);
  const told = toldBy(fit, document);
  const value = (name: RideUnknown): number | null =>
    told.find((one) => one.name === name)?.estimate.value ?? null;
  const provenance = [
    `Fitted by ridgehold identify to the ride in ${logNames(request).join(', ')}, ${toKm(fit.fitted).toFixed(1)} km of it:`,
    ...fit.unknowns.map((one) => {
      const left = told.includes(one) ? '' : '; too uncertain, so it is left as it was';
      return `${one.name} ${numberWords(one.estimate, UNITS[one.name])}; it was ${Number(one.was.toPrecision(5))}${left}`;
    }),
  ];
  const { byPower } = held;
  const found = {
    cda: value('cda_m2'),
    crr: value('crr'),
    growth: vehicle.roadLoad,
    mass: value('mass_kg'),
    provenance,
  };
  return {
    kind: 'ride',
    toolVersion: TOOL_VERSION,
    logs: logNames(request),
    inputs: log.files,
    given: held.given.filter(({ name }) => name !== LOADED_MASS || !unknowns.includes('mass_kg')),
    warnings: [
      ...rideFitWarnings(fit, { byPower, airAssumed: held.airAssumed }),
      ...identifiedWarnings(document, found),
    ],
    fit,
    vehicleName: vehicle.name,
    roadWords: held.roadWords,
    driveWords: byPower
      ? 'power at the wheel, as logged'
      : "throttle, as logged, through the vehicle's drive",
    text: withIdentified(document, found),
  };
}

/**
 * The numbers that the ride tells: those whose interval does not take in zero. A road load whose form has no place for one
 * of drag area and rolling coefficient alone takes both or neither.
 */
function toldBy({ unknowns }: RideFit, { file }: VehicleDocument): readonly FittedUnknown[] {
  const told = unknowns.filter(({ estimate }) => estimate.low > 0);
  if (hasOwnPlaces(file.road_load)) return told;
  const both = (['cda_m2', 'crr'] as const).every((name) => told.some((one) => one.name === name));
  return both ? told : told.filter(({ name }) => name === 'mass_kg');
}

function onRoadOfCase(request: IdentifyRequest, log: InputLog): Held {
  const { file, read } = request.case!;
  const name = request.logs[0]!;
  if (request.logs.length > 1)
    throw new InputError({
      code: 'one-ride',
      place: { file: request.logs[1]! },
      message: 'one ride is held against a case at a time',
      found: `${request.logs.length} logs`,
      allowed: '1',
    });
  const bytes = log.read(name);
  const files = new InputLog(read);
  const document = readCaseFile(decodeText(files.read(file), file), file);
  const vehicleDocument = vehicleDocumentOf(request, document, files, log);
  const vehicle = vehicleOfCase(document, vehicleDocument);
  const road = roadOfCase(document, files, file, placeOf(document.source, ['track', 'file']));
  const text = decodeText(bytes, name);
  const powered = hasWheelPower(text) ? readLog(text, name) : null;
  if (powered === null) refuseShifts(document);
  const laid = powered === null ? layRide(readRide({ name, bytes }), road, name, name) : null;
  log.files.push(...files.files);
  const segments = segmentsOf(document);
  return {
    document: vehicleDocument,
    vehicle,
    stretches:
      laid === null
        ? powered!.flatMap((run) => stretchesOfLogOnRoad(run, road, vehicle))
        : stretchesOnRoad(laid, road, vehicle, name),
    byPower: powered !== null,
    segment: segments.by === 'length' ? segments.length : SEGMENT,
    given: massesGiven(vehicle, vehicleDocument),
    roadWords: `the road of ${file.split(/[\\/]/).at(-1)}${laid === null ? '' : `, the ride laid on it by ${laid.laidBy}`}`,
    airAssumed: false,
  };
}

function vehicleDocumentOf(
  { vehicle: name }: IdentifyRequest,
  document: CaseDocument,
  files: InputLog,
  log: InputLog,
): VehicleDocument {
  if (name !== undefined) return readVehicleFile(decodeText(log.read(name), name), name);
  const { vehicleFile, source } = document;
  if (vehicleFile === null)
    throw new InputError({
      code: 'vehicle-inline',
      place: placeOf(source, ['vehicle']),
      message: 'the vehicle stands in the case itself, and there is no file of it to take the numbers',
      allowed: 'a vehicle file that the case names, or --vehicle',
    });
  const bytes = files.read(vehicleFile, placeOf(source, ['vehicle']));
  return readVehicleFile(decodeText(bytes, vehicleFile), vehicleFile);
}

/** Whether the header names a power at the wheel, which the readers of tracks do not know. */
const hasWheelPower = (text: string): boolean =>
  /\bwheel_power_kw\b/.test(text.trimStart().split(/[\r\n]/, 1)[0]!);

/** Between shifts nobody logged the gear. */
function refuseShifts({ file, source }: CaseDocument): void {
  if (file.hold.shifts.length === 0) return;
  throw new InputError({
    code: 'shifts-in-ride',
    place: placeOf(source, ['hold', 'shifts']),
    message:
      'a log of the throttle does not say which gear was in: a ride with shifts cannot be held against it',
    allowed: 'a ride in one gear, or wheel_power_kw in the log',
  });
}

function byItsColumns(request: IdentifyRequest, runs: readonly LoggedRun[], log: InputLog): Held {
  const { vehicle: name } = request;
  if (name === undefined)
    throw new InputError({
      code: 'vehicle-unknown',
      place: { file: request.logs.join(', ') },
      message: 'a ride is held against a vehicle, and there is none',
      allowed: '--vehicle with a vehicle file, or --case with a case that names one',
    });
  const document = readVehicleFile(decodeText(log.read(name), name), name);
  const vehicle = vehicleOf(document);
  if (document.file.drive === undefined && runs.some(({ wheelPower }) => wheelPower === null))
    throw new InputError({
      code: 'no-drive',
      place: placeOf(document.source, []),
      message: 'the vehicle has no drive that would turn a throttle into a force',
      allowed: 'a drive in the vehicle file, or wheel_power_kw in the log',
    });
  const air = airOf(request);
  const stretches = runs.flatMap((run) =>
    stretchesOfLog(run, { density: air.air.density, temperature: air.air.temperature ?? 288.15 }, vehicle),
  );
  const windy = runs.every(({ headwind }) => headwind !== null);
  return {
    document,
    vehicle,
    stretches,
    segment: SEGMENT,
    given: [...massesGiven(vehicle, document), ...air.given],
    roadWords: `the log's own ${runs[0]!.grade === null ? 'elevation' : 'grade'}${windy ? ' and headwind' : ', in still air'}`,
    airAssumed: air.assumed,
    byPower: runs.every(({ wheelPower }) => wheelPower !== null),
  };
}

const LOADED_MASS = 'loaded mass';

function massesGiven(
  { mass, rotatingMass, drive }: Vehicle,
  { source }: VehicleDocument,
): readonly GivenNumber[] {
  const from = `vehicle file ${source.file.split(/[\\/]/).at(-1) ?? ''}`;
  const turning = rotatingMass + drive.gears[drive.gear]!.inertia;
  return [
    { name: LOADED_MASS, value: mass, unit: 'kg', from, isDefault: false },
    {
      name: 'rotating mass in gear',
      value: Number(turning.toPrecision(4)),
      unit: 'kg',
      from,
      isDefault: false,
    },
  ];
}

function rideVehicleOf({ mass, rotatingMass, roadLoad, drive }: Vehicle): RideVehicle {
  return {
    mass,
    rotatingMass: rotatingMass + drive.gears[drive.gear]!.inertia,
    cda: roadLoad.cda,
    yawFactor: (yaw) => (roadLoad.cda > 0 ? dragArea(roadLoad, yaw) / roadLoad.cda : 1),
    crr: roadLoad.c0,
    c1: roadLoad.c1,
    c2: roadLoad.c2,
  };
}

function tooShort(request: IdentifyRequest, stretches: readonly RideStretch[]): InputError {
  const time = stretches.reduce((sum, { time: t }) => sum + t[t.length - 1]! - t[0]!, 0);
  return new InputError({
    code: 'ride-too-short',
    place: { file: request.logs.join(', ') },
    message: 'the ride is too short, or too much alike, to tell the numbers apart',
    found: `${(time / 60).toFixed(1)} min that can be used`,
    allowed: `${FEWEST_PIECES} pieces of 20 s with the drive on, at the very least, with hills or speeds that differ: ride half an hour at two speeds, 50 and 80 km/h say, without brakes`,
  });
}

function refuseImpossible({ unknowns }: RideFit, request: IdentifyRequest): void {
  const wrong = unknowns.find(({ estimate }) => !(estimate.value > 0));
  if (wrong === undefined) return;
  throw new InputError({
    code: 'not-physical',
    place: { file: request.logs.join(', ') },
    message: `the fit gives a ${wrong.name} that no vehicle has`,
    found: wrong.estimate.value.toPrecision(3),
    allowed:
      'above 0; fit fewer numbers (--fit), or look at the units, at the gear and at the power of the log',
  });
}
