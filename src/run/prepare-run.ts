import { atSeaLevel, candidateOf, candidatesOf } from '../case/candidates-of.ts';
import { type CaseDocument, readCaseFile } from '../case/read-case-file.ts';
import { readVehicleFile, type VehicleDocument } from '../case/read-vehicle-file.ts';
import { type Output, outputOf, requirementsOf, schemeOf } from '../case/run-of.ts';
import { vehicleOfCase } from '../case/vehicle-of-case.ts';
import { placeOf } from '../case/yaml-source.ts';
import type { Candidate } from '../control/setup.ts';
import type { LoopPlan } from '../loop/plan.ts';
import { InputError } from '../problems/input-error.ts';
import type { Warning } from '../problems/warning.ts';
import type { Road } from '../road/road.ts';
import type { BendPlan } from '../study/bend-plan.ts';
import type { Requirement } from '../study/findings.ts';
import { decodeText } from '../track/decode-text.ts';
import { readTrack } from '../track/read-track.ts';
import { toKmh } from '../units/convert.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { InputLog } from './input-log.ts';
import { bandOf, bandsOf, loopPlans } from './loop-plans.ts';
import { placesOnRoad } from './places-on-road.ts';
import { type Ride, rideOf } from './ride-of.ts';
import { roadMaker } from './road-of.ts';

/** Bands that one run can count in. */
const MOST_BANDS = 4;

/** A case with all that it names, checked and brought to plans: what is left is to run them. */
export interface PreparedRun {
  readonly document: CaseDocument;
  readonly vehicleDocument: VehicleDocument;
  readonly vehicle: Vehicle;
  /** Makes the road of this case in another wind, direction or set speed. */
  readonly makeRoad: (document: CaseDocument) => Road;
  readonly road: Road;
  readonly ride: Omit<Ride, 'bends'>;
  /** Null where the case does not ask for bends. */
  readonly bends: BendPlan | null;
  readonly requirements: readonly Requirement[];
  /** Of the figures; and all that something is counted in, that one first [m/s]. */
  readonly band: number;
  readonly bands: readonly number[];
  readonly output: Output;
  readonly scheme: 'exact' | 'fast';
  readonly candidates: readonly Candidate[];
  /** Of the candidates, in their order. */
  readonly plans: readonly LoopPlan[];
  readonly warnings: readonly Warning[];
}

export interface PrepareRequest {
  /** Name of the case. */
  readonly file: string;
  /** Reads case, vehicle and track, in this order. */
  readonly log: InputLog;
  readonly overrides?: readonly string[];
  /** What does the parts that take time: one that keeps what it made spares them to those who change other things. */
  readonly makers?: Makers;
}

export interface Makers {
  readonly track: typeof readTrack;
  readonly road: (document: CaseDocument, make: (document: CaseDocument) => Road) => Road;
  readonly candidate: typeof candidateOf;
}

const ANEW: Makers = {
  track: readTrack,
  road: (document, make) => make(document),
  candidate: candidateOf,
};

/**
 * Reads a case and the files that it names, and checks all that can be checked before anything runs.
 *
 * @throws InputError for what the reader or a file refuses, and `too-many-bands`
 */
export function prepareRun({ file, log, overrides = [], makers = ANEW }: PrepareRequest): PreparedRun {
  const document = readCaseFile(decodeText(log.read(file), file), file, overrides);
  const vehicleDocument = vehicleDocumentOf(document, log);
  const vehicle = vehicleOfCase(document, vehicleDocument);
  const makeRoad = roadMaker(document, log, file, placeOf(document.source, ['track', 'file']), makers.track);
  const road = makers.road(document, makeRoad);
  const { bends, ...ride } = rideOf(document, vehicle, road);
  const requirements = requirementsOf(document);
  const bands = bandsOf(requirements);
  if (bands.length > MOST_BANDS) throw tooManyBands(document, bands);
  const warnings = placesOnRoad(document, requirements, ride, road);
  const output = outputOf(document);
  const scheme = schemeOf(document);
  const candidates = candidatesOf(document, vehicle, atSeaLevel(document), makers.candidate);
  const plans = loopPlans({ road, vehicle, ...ride, scheme, bands, bin: output.bin }, candidates);
  const band = bandOf(requirements);
  return {
    document,
    vehicleDocument,
    vehicle,
    makeRoad,
    road,
    ride,
    bends,
    requirements,
    band,
    bands,
    output,
    scheme,
    candidates,
    plans,
    warnings,
  };
}

function vehicleDocumentOf(document: CaseDocument, log: InputLog): VehicleDocument {
  if (document.vehicle !== null) return document.vehicle;
  const name = document.vehicleFile ?? '';
  const bytes = log.read(name, placeOf(document.source, ['vehicle']));
  return readVehicleFile(decodeText(bytes, name), name, document.vehicleOverrides);
}

function tooManyBands(document: CaseDocument, bands: readonly number[]): InputError {
  return new InputError({
    code: 'too-many-bands',
    place: { ...placeOf(document.source, ['requirements']), key: 'requirements' },
    message: 'the requirements count time in too many different bands',
    found: bands.map((one) => `${toKmh(one).toFixed(2)} km/h`).join(', '),
    allowed: `at most ${MOST_BANDS} bands`,
  });
}
