import { atSeaLevel, candidatesOf } from '../case/candidates-of.ts';
import { givenValues } from '../case/given-values.ts';
import { type CaseDocument, readCaseFile } from '../case/read-case-file.ts';
import { readVehicleFile, type VehicleDocument } from '../case/read-vehicle-file.ts';
import { holdOf, outputOf, requirementsOf, riderOf, schemeOf, segmentsOf, titleOf } from '../case/run-of.ts';
import { rideDefaults, vehicleOfCase } from '../case/vehicle-of-case.ts';
import { placeOf } from '../case/yaml-source.ts';
import { loopStability } from '../control/loop-stability.ts';
import type { Candidate } from '../control/setup.ts';
import type { HoldPlan, LoopPlan } from '../loop/plan.ts';
import { replay } from '../loop/replay.ts';
import type { FullSeries, LoopResult } from '../loop/result.ts';
import { runLoop } from '../loop/run-loop.ts';
import { InputError } from '../problems/input-error.ts';
import { compareCandidates } from '../study/compare-candidates.ts';
import { demandOf } from '../study/demand.ts';
import { figureSpread, spreadMethod } from '../study/figure-spread.ts';
import { findHills } from '../study/find-hills.ts';
import type { Replayed } from '../study/findings.ts';
import { judge } from '../study/judge.ts';
import { findLimitCycles } from '../study/limit-cycles.ts';
import { segmentRuns, segmentsByLength } from '../study/segments.ts';
import { segmentsByTerrain } from '../study/terrain-segments.ts';
import { decodeText } from '../track/decode-text.ts';
import { toKmh } from '../units/convert.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { caseNameOf } from './case-name.ts';
import { checkFullSeries, checkSize } from './check-size.ts';
import { InputLog, type Reader } from './input-log.ts';
import { bandOf, bandsOf, loopPlans } from './loop-plans.ts';
import { changesNotReached, placesOnRoad } from './places-on-road.ts';
import { roadOfCase } from './road-of.ts';
import type { CandidateResult, RunResult } from './run-result.ts';
import { runWarnings } from './run-warnings.ts';
import { SCHEMA_VERSION, TOOL_VERSION } from './tool-version.ts';

export interface RunRequest {
  /** Name of the case. */
  readonly file: string;
  /** Gives the bytes of the case and of the files that it names, by those names. */
  readonly read: Reader;
  /** Changes given beside the case: `hold.set_speed_kmh=70`. */
  readonly overrides?: readonly string[];
  /** Told now and then what is being done, and the share of the work that is done, 0 to 1. */
  readonly onProgress?: (share: number, words: string) => void;
}

/** A part of the work with its usual shares of the time. */
interface Stage {
  readonly from: number;
  readonly to: number;
  readonly words: string;
}
const HILLS: Stage = { from: 0.15, to: 0.47, words: 'hills' };
const CYCLES: Stage = { from: 0.47, to: 0.5, words: 'limit cycles' };
const SPREAD: Stage = { from: 0.5, to: 0.95, words: "roads drawn from the grade's uncertainty" };

/** Bands that one run can count in. */
const MOST_BANDS = 4;

/**
 * The main job: reads a case and its files, makes the road, replays every candidate over it, and finds what the
 * report and the data files tell.
 *
 * @throws InputError for what the reader or a file refuses; a numerical failure is a status of the candidate
 */
export function runCase({ file, read, overrides = [], onProgress = () => {} }: RunRequest): RunResult {
  const log = new InputLog(read);
  onProgress(0, 'reading');
  const document = readCaseFile(decodeText(log.read(file), file), file, overrides);
  const vehicleDocument = vehicleDocumentOf(document, log);
  const vehicle = vehicleOfCase(document, vehicleDocument);
  const road = roadOfCase(document, log, file, placeOf(document.source, ['track', 'file']));
  const hold = holdOf(document);
  const rider = riderOf(document);
  const requirements = requirementsOf(document);
  const band = bandOf(requirements);
  const bands = bandsOf(requirements);
  if (bands.length > MOST_BANDS) throw tooManyBands(document, bands);
  const placeWarnings = placesOnRoad(document, requirements, hold, road);
  const output = outputOf(document);
  const segmenting = segmentsOf(document);
  const scheme = schemeOf(document);
  const candidates = candidatesOf(document, vehicle);
  const plans = loopPlans({ road, vehicle, hold, rider, scheme, bands, bin: output.bin }, candidates);
  checkSize(document, plans, output, segmenting);
  const demand = demandOf(road, vehicle, hold, rider);
  const replayed = replayAll(candidates, plans, onProgress);
  if (output.series === 'full') checkFullSeries(document, replayed);
  const within = (stage: Stage) => (done: number, of: number) =>
    onProgress(stage.from + ((stage.to - stage.from) * done) / of, stage.words);
  const hills = findHills({ road, demand, replayed, band, onHill: within(HILLS) });
  const cycles = findLimitCycles({ road, demand, replayed, onCandidate: within(CYCLES) });
  const segments =
    segmenting.by === 'length' ? segmentsByLength(road, segmenting.length) : segmentsByTerrain(road);
  const context = { road, demand, hills };
  const figures = compareCandidates(replayed, context, band);
  const spread = figureSpread(requirements, replayed, context, { onRoad: within(SPREAD) });
  const findings = judge(requirements, replayed, context, spread);
  onProgress(SPREAD.to, 'series');
  const speeds = trueSetSpeeds(hold, vehicle);
  const results = replayed.map(({ plan, result }, i): CandidateResult => {
    const full = output.series === 'full' ? fullSeries(plan, result) : null;
    const candidate = candidates[i] as Candidate;
    const loop =
      candidate.controller.kind === 'pi'
        ? loopStability(vehicle, candidate.controller, speeds, atSeaLevel(document), gearsDriven(result))
        : null;
    return { ...candidate, result, figures: figures[i]?.all ?? {}, loop, full };
  });
  return {
    schemaVersion: SCHEMA_VERSION,
    toolVersion: TOOL_VERSION,
    title: titleOf(document) ?? caseNameOf(file),
    caseName: caseNameOf(file),
    inputs: log.files,
    overrides,
    road,
    vehicle,
    hold,
    rider,
    scheme,
    band,
    candidates: results,
    demand,
    hills,
    cycles,
    segmentsBy: segmenting.by,
    segments: segmentRuns(segments, replayed),
    requirements: findings,
    spread: { roads: spread.roads, seed: spread.seed, words: spreadMethod(spread) },
    defaults: rideDefaults(document, vehicleDocument),
    given: givenValues(document, vehicleDocument),
    warnings: [
      ...runWarnings({ road, vehicle, rider, demand, replayed, candidates: results }),
      ...placeWarnings,
      ...changesNotReached(document, hold, results),
    ],
    status: statusOf(results, findings),
  };
}

/** The true speeds that the set speeds of a run stand for [m/s]. */
function trueSetSpeeds(hold: HoldPlan, { sensor }: Vehicle): readonly number[] {
  const shown = hold.setSpeedIs === 'indicated' ? 1 + sensor.scaleError : 1;
  return [hold.setSpeed, ...hold.changes.map(({ setSpeed }) => setSpeed)].map((speed) => speed / shown);
}

function vehicleDocumentOf(document: CaseDocument, log: InputLog): VehicleDocument {
  if (document.vehicle !== null) return document.vehicle;
  const name = document.vehicleFile ?? '';
  const bytes = log.read(name, placeOf(document.source, ['vehicle']));
  return readVehicleFile(decodeText(bytes, name), name, document.vehicleOverrides);
}

function replayAll(
  candidates: readonly Candidate[],
  plans: readonly LoopPlan[],
  onProgress: (share: number, words: string) => void,
): readonly Replayed[] {
  return plans.map((plan, i) => {
    const name = candidates[i]?.name ?? '';
    onProgress((HILLS.from * i) / plans.length, name);
    return { name, plan, result: runLoop(plan) };
  });
}

/** Every sample of a run, by replay from its start. */
function fullSeries(plan: LoopPlan, result: LoopResult): FullSeries {
  const end = plan.road.distance[plan.road.size - 1] ?? 0;
  return replay(plan, result.checkpoints[0] ?? { settledAt: 0 }, end).series;
}

function statusOf(
  candidates: readonly CandidateResult[],
  findings: RunResult['requirements'],
): RunResult['status'] {
  if (findings.some(({ verdict }) => verdict === 'not met' || verdict === 'not judged'))
    return 'requirement_not_met';
  return candidates.every(({ result }) => result.status === 'completed') ? 'ok' : 'incomplete';
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

/** Gears in which a run was driven, indices into the drive's gears. */
function gearsDriven({ bins }: LoopResult): number[] {
  return [...new Set(bins.gear.subarray(0, bins.size))];
}
