import { atSeaLevel, candidatesOf } from '../case/candidates-of.ts';
import { caseOfCombination } from '../case/case-of-combination.ts';
import { givenValues } from '../case/given-values.ts';
import { ownCombination } from '../case/matrix-of.ts';
import { type CaseDocument, readCaseFile } from '../case/read-case-file.ts';
import { readVehicleFile, type VehicleDocument } from '../case/read-vehicle-file.ts';
import { outputOf, requirementsOf, schemeOf, titleOf } from '../case/run-of.ts';
import { type TunePlan, tuneDefaults, tuneOf } from '../case/tune-of.ts';
import { rideDefaults, vehicleOfCase } from '../case/vehicle-of-case.ts';
import { placeOf } from '../case/yaml-source.ts';
import type { Candidate, ControllerSetup } from '../control/setup.ts';
import type { LoopPlan } from '../loop/plan.ts';
import { runLoop } from '../loop/run-loop.ts';
import { InputError } from '../problems/input-error.ts';
import type { Road } from '../road/road.ts';
import { askedHold } from '../study/asked-hold.ts';
import { demandOf } from '../study/demand.ts';
import { askDetail } from '../study/figure-table.ts';
import { isNone, type Replayed } from '../study/findings.ts';
import { trueSpeedFactor } from '../study/hold-course.ts';
import { loopSheet } from '../study/loop-sheet.ts';
import { figureValues } from '../study/measure-figure.ts';
import { type OperatingPoints, operatingPoints } from '../study/operating-points.ts';
import { slowestRecoveries } from '../study/slowest-recoveries.ts';
import { costOf } from '../study/tune-cost.ts';
import { visitsOfDemand } from '../study/visited-points.ts';
import { decodeText } from '../track/decode-text.ts';
import { toKm } from '../units/convert.ts';
import { caseNameOf } from './case-name.ts';
import { checkSize } from './check-size.ts';
import { InputLog } from './input-log.ts';
import { judgeTuned } from './judge-tuned.ts';
import { bandOf, bandsOf, loopPlans } from './loop-plans.ts';
import { placesOnRoad } from './places-on-road.ts';
import { type Ride, rideOf } from './ride-of.ts';
import { roadMaker } from './road-of.ts';
import type { RunRequest } from './run-case.ts';
import { SCHEMA_VERSION, TOOL_VERSION } from './tool-version.ts';
import { firstChoice } from './tune-choice.ts';
import { type Proposed, proposalsOf } from './tune-proposals.ts';
import type { TunedCandidate, TuneResult } from './tune-result.ts';

/** Shares of the time up to the end of the operating points, the proposals, the margins. */
const POINTS = 0.05;
const PROPOSED = 0.8;
const MARGINS = 0.85;

/**
 * Finds gains for a case: where its loop will run, how its candidates stand there, gains by every way that it asks for,
 * each with its margins, the figures of its replay over the road, and what the requirements of the case say of it. Every proposal keeps the bound of the sensitivity at
 * every operating point, and `run` on a case with it finds the same figures and verdicts.
 *
 * @throws InputError for what the reader or a file refuses, as `runCase`; `nothing-to-tune` where the drive holds no
 *   speed of the case anywhere
 */
export function tuneCase({ file, read, overrides = [], onProgress = () => {} }: RunRequest): TuneResult {
  const log = new InputLog(read);
  onProgress(0, 'reading');
  const document = readCaseFile(decodeText(log.read(file), file), file, overrides);
  const vehicleDocument = vehicleDocumentOf(document, log);
  const vehicle = vehicleOfCase(document, vehicleDocument);
  const plan = tuneOf(document, vehicleDocument);
  const road = roadMaker(document, log, file, placeOf(document.source, ['track', 'file']))(document);
  const { bends, ...ride } = rideOf(document, vehicle, road);
  const requirements = requirementsOf(document);
  const warnings = placesOnRoad(document, requirements, ride, road, plan.cost);
  const scheme = schemeOf(document);
  const band = bandOf(requirements);
  const output = outputOf(document);
  const setting = { road, vehicle, ...ride, scheme, bands: bandsOf(requirements), bin: output.bin };
  const candidates = candidatesOf(document, vehicle);
  const plans = loopPlans(setting, candidates);
  checkSize(
    document,
    plans,
    { ...output, series: 'bins' },
    { by: 'terrain' },
    plan.mostReplays / plans.length,
  );
  onProgress(0.01, 'operating points');
  const { points, notHeld } = pointsOf({ document, vehicle: vehicleDocument, road, plan });
  if (points.length === 0) throw nothingToTune(document);
  const asked = askedHold(ride.hold, ride.rider, ride.supervisor ?? {}, vehicle);
  const demand = demandOf(road, vehicle, asked, ride.rider);
  const replay = (
    { name }: Pick<Candidate, 'name'>,
    planned: LoopPlan,
    how: Partial<LoopPlan> = { detail: true },
  ): Replayed => ({ name, plan: planned, result: runLoop({ ...planned, ...how }) });
  const replayed = candidates.map((candidate, i) => replay(candidate, plans[i]!));
  const detail = askDetail(plan.cost.map(({ figure }) => figure));
  const recovers = plan.cost.some(({ figure }) => figure === 'recovery_s');
  const planOf = (controller: ControllerSetup): LoopPlan =>
    loopPlans(setting, [{ name: 'tuned', controller }])[0]!;
  const proposals = proposalsOf({
    document,
    vehicle,
    surroundings: atSeaLevel(document),
    speed: ride.hold.setSpeed * trueSpeedFactor(ride.hold, vehicle),
    plan,
    points,
    costOf: (controller, purpose) => {
      const how: Partial<LoopPlan> = purpose === 'search' ? { scheme: 'fast', detail } : { detail };
      const run = replay({ name: 'tuned' }, planOf(controller), how);
      const hills = recovers ? slowestRecoveries(road, demand, [...replayed, run], band) : [];
      const cost = costOf(plan.cost, run, { road, demand, hills }, band);
      return isNone(cost) ? Number.POSITIVE_INFINITY : cost;
    },
    onProgress: (share, words) => onProgress(POINTS + (PROPOSED - POINTS) * share, words),
  });

  const all: readonly (Candidate & Partial<Proposed>)[] = [...candidates, ...proposals.proposed];
  onProgress(PROPOSED, 'margins');
  const sheet = loopSheet({ points, notHeld }, all);
  const runs = [...replayed, ...proposals.proposed.map((one) => replay(one, planOf(one.controller)))];
  const tuned = all.map((candidate, i): TunedCandidate => {
    const run = runs[i]!;
    // A hill is what any candidate makes one: as `run` finds them of the case, and of the case with this proposal added.
    const among = i < candidates.length ? replayed : [...replayed, run];
    const context = { road, demand, hills: slowestRecoveries(road, demand, among, band) };
    const figures = figureValues(run, context, 'all', band);
    const loop = sheet.loops[i]!;
    const within = loop.figures.every(
      ({ margins: { sensitivity } }) => sensitivity !== null && sensitivity <= plan.sensitivity,
    );
    onProgress(MARGINS + ((1 - MARGINS) * i) / all.length, candidate.name);
    return {
      name: candidate.name,
      controller: candidate.controller,
      proposal: candidate.proposal ?? null,
      loop,
      keeps: loop.notLinear === null ? within : null,
      figures,
      requirements: judgeTuned(run, among, { requirements, demand, band }),
      cost: costOf(plan.cost, run, context, band),
      runStatus: run.result.status,
    };
  });
  const ofProposals = tuned.slice(candidates.length);
  return {
    schemaVersion: SCHEMA_VERSION,
    toolVersion: TOOL_VERSION,
    title: titleOf(document) ?? caseNameOf(file),
    caseName: caseNameOf(file),
    inputs: log.files,
    overrides,
    road,
    vehicle,
    hold: ride.hold,
    rider: ride.rider,
    supervisor: ride.supervisor ?? null,
    faults: ride.faults ?? [],
    bends,
    scheme,
    band,
    plan,
    sheet,
    tuned,
    notProposed: proposals.notProposed,
    chosen: firstChoice(ofProposals)?.name ?? null,
    trials: proposals.trials,
    border: proposals.border,
    defaults: [...tuneDefaults(document), ...rideDefaults(document, vehicleDocument)],
    given: givenValues(document, vehicleDocument),
    warnings,
    status: ofProposals.length === 0 || tuned.some(({ keeps }) => keeps === false) ? 'bound_not_kept' : 'ok',
  };
}

function vehicleDocumentOf(document: CaseDocument, log: InputLog): VehicleDocument {
  if (document.vehicle !== null) return document.vehicle;
  const name = document.vehicleFile ?? '';
  const bytes = log.read(name, placeOf(document.source, ['vehicle']));
  return readVehicleFile(decodeText(bytes, name), name, document.vehicleOverrides);
}

interface PointsBase {
  readonly document: CaseDocument;
  readonly vehicle: VehicleDocument;
  readonly road: Road;
  readonly plan: TunePlan;
}

/** What an ideal hold visits with each load, and the grid. */
function pointsOf({ document, vehicle, road, plan }: PointsBase): OperatingPoints {
  const own = ownCombination(document, vehicle);
  const length = toKm(road.distance[road.size - 1] ?? 0);
  const loads = plan.loads.map((load) => {
    const here = caseOfCombination(document, vehicle, { ...own, load }, length);
    return {
      load: load.label === own.load.label ? null : load.label,
      vehicle: vehicleOfCase(here.document, here.vehicle),
    };
  });
  const rides = loads.map(({ load, vehicle: loaded }) => {
    const { hold, rider }: Ride = rideOf(document, loaded, road);
    return { vehicle: loaded, load, visits: visitsOfDemand(road, demandOf(road, loaded, hold, rider)) };
  });
  const { speeds, grades, headwinds, gears } = plan;
  return operatingPoints({
    rides,
    grid: { speeds, grades, headwinds, gears, loads, air: atSeaLevel(document) },
  });
}

function nothingToTune(document: CaseDocument): InputError {
  return new InputError({
    code: 'nothing-to-tune',
    place: placeOf(document.source, ['hold', 'set_speed_kmh']),
    message: 'the drive holds no speed of this case at any operating point, so there is no loop to tune',
    found: `${document.file.hold.set_speed_kmh} km/h`,
    allowed: 'a set speed, a gear or a vehicle with a drive that holds it somewhere on the road',
  });
}
