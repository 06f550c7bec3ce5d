import { givenValues } from '../case/given-values.ts';
import { segmentsOf, titleOf } from '../case/run-of.ts';
import { rideDefaults } from '../case/vehicle-of-case.ts';
import { linearController } from '../control/linear-controller.ts';
import type { Candidate } from '../control/setup.ts';
import type { LoopPlan } from '../loop/plan.ts';
import { replay } from '../loop/replay.ts';
import type { FullSeries, LoopResult } from '../loop/result.ts';
import { runLoop } from '../loop/run-loop.ts';
import type { Road } from '../road/road.ts';
import { askedHold } from '../study/asked-hold.ts';
import { compareCandidates } from '../study/compare-candidates.ts';
import { demandOf } from '../study/demand.ts';
import { figureSpread, spreadMethod } from '../study/figure-spread.ts';
import { findHills } from '../study/find-hills.ts';
import type { Demand, Replayed } from '../study/findings.ts';
import { followHolds } from '../study/hold-transients.ts';
import { judge } from '../study/judge.ts';
import { findLimitCycles } from '../study/limit-cycles.ts';
import { type LoopSheet, loopSheet } from '../study/loop-sheet.ts';
import { operatingPoints } from '../study/operating-points.ts';
import { outOfRange } from '../study/out-of-range.ts';
import { segmentRuns, segmentsByLength } from '../study/segments.ts';
import { segmentsByTerrain } from '../study/terrain-segments.ts';
import { visitsOfDemand, visitsOfRecord } from '../study/visited-points.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { caseNameOf } from './case-name.ts';
import { checkFullSeries, checkSize } from './check-size.ts';
import { faultWarnings } from './fault-warnings.ts';
import { holdWarnings } from './hold-warnings.ts';
import { InputLog, type Reader } from './input-log.ts';
import { loggedRidesOf, rideResults, rideWarnings } from './logged-rides.ts';
import { loopOfRun } from './loop-of-run.ts';
import { type MatrixWork, matrixRides } from './matrix-work.ts';
import { overrideWarnings } from './override-warnings.ts';
import { timesNotReached } from './places-on-road.ts';
import { prepareRun } from './prepare-run.ts';
import { runCell } from './run-cell.ts';
import type { CandidateResult, RunResult } from './run-result.ts';
import { runWarnings } from './run-warnings.ts';
import { SCHEMA_VERSION, TOOL_VERSION } from './tool-version.ts';
import { isMissed, matrixWords, shareBeforeMatrix, shareOfMatrix, withMatrix } from './with-matrix.ts';

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

/**
 * The main job: reads a case and its files, makes the road, replays every candidate over it, and finds what the
 * report and the data files tell; then every combination of its matrix, one after the other.
 *
 * @throws InputError for what the reader or a file refuses; a numerical failure is a status of the candidate
 */
export function runCase(request: RunRequest): RunResult {
  const { run, matrix } = runWithoutMatrix(request);
  if (matrix === null) return run;
  const { onProgress = () => {} } = request;
  const outcomes = matrix.cells.map((_, i) => {
    onProgress(shareOfMatrix(matrix, i), matrixWords(matrix, i));
    return runCell(matrix, i);
  });
  return withMatrix(run, matrix, outcomes);
}

/** The run of a case itself, and the matrix that is left to do; null: it has none. */
export interface CaseRun {
  readonly run: RunResult;
  readonly matrix: MatrixWork | null;
}

/**
 * The same without the matrix, for those who run its combinations side by side: `runCell` each, in whatever order and
 * place, then `withMatrix` of all of them in the order of the cells.
 */
export function runWithoutMatrix({
  file,
  read,
  overrides = [],
  onProgress: onShare = () => {},
}: RunRequest): CaseRun {
  const log = new InputLog(read);
  onShare(0, 'reading');
  const prepared = prepareRun({ file, log, overrides });
  const { document, vehicleDocument, vehicle, makeRoad, road, ride, requirements } = prepared;
  const { band, bands, output, scheme, candidates, plans } = prepared;
  const { hold, rider } = ride;
  const loggedRides = loggedRidesOf(document, log, road);
  const segmenting = segmentsOf(document);
  const rides = matrixRides({ document, vehicle: vehicleDocument, road, makeRoad });
  checkSize(document, plans, output, segmenting, rides?.cells.length);
  const whole = shareBeforeMatrix(rides?.cells.length ?? 0);
  const onProgress = (share: number, words: string): void => onShare(whole * share, words);
  const demand = demandOf(road, vehicle, askedHold(hold, rider, ride.supervisor ?? {}, vehicle), rider);
  const replayed = replayAll(candidates, plans, onProgress);
  if (output.series === 'full') checkFullSeries(document, replayed);
  const within = (stage: Stage) => (done: number, of: number) =>
    onProgress(stage.from + ((stage.to - stage.from) * done) / of, stage.words);
  const hills = findHills({ road, demand, replayed, band, onHill: within(HILLS) });
  const cycles = findLimitCycles({ road, demand, replayed, onCandidate: within(CYCLES) });
  const segments =
    segmenting.by === 'length' ? segmentsByLength(road, segmenting.length) : segmentsByTerrain(road);
  const followed = followHolds(replayed, outOfRange(road, demand));
  const context = { road, demand, hills, holds: followed.measures };
  const figures = compareCandidates(replayed, context, band);
  const spread = figureSpread(requirements, replayed, context, { onRoad: within(SPREAD) });
  const findings = judge(requirements, replayed, context, spread);
  onProgress(SPREAD.to, 'series');
  const results = replayed.map(({ plan, result }, i): CandidateResult => {
    const full = output.series === 'full' ? fullSeries(plan, result) : null;
    const candidate = candidates[i] as Candidate;
    const loop = loopOfRun(document, vehicle, hold, candidate, result);
    return { ...candidate, result, figures: figures[i]?.all ?? {}, loop, full };
  });
  const run: RunResult = {
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
    supervisor: ride.supervisor ?? null,
    faults: ride.faults ?? [],
    bends: prepared.bends,
    scheme,
    band,
    candidates: results,
    demand,
    hills,
    cycles,
    loops: loopsOnPaper(road, vehicle, demand, results),
    transients: followed.transients,
    loggedRides: rideResults(loggedRides, { ...context, vehicle, hold, rider, band, replayed }),
    segmentsBy: segmenting.by,
    segments: segmentRuns(segments, replayed),
    requirements: findings,
    spread: { roads: spread.roads, seed: spread.seed, words: spreadMethod(spread) },
    defaults: rideDefaults(document, vehicleDocument),
    given: givenValues(document, vehicleDocument),
    warnings: [
      ...runWarnings({ road, vehicle, rider, demand, replayed, candidates: results }),
      ...prepared.warnings,
      ...rideWarnings(loggedRides, road),
      ...holdWarnings(document, prepared.bends, replayed),
      ...faultWarnings(document, replayed),
      ...overrideWarnings(document, overrides),
      ...timesNotReached(document, ride, results),
    ],
    status: statusOf(results, findings),
    matrix: null,
  };
  const { bin } = output;
  return { run, matrix: rides === null ? null : { ...rides, candidates, scheme, bands, bin, spread } };
}

/**
 * The linear loops of all candidates at the operating points of the route: where an ideal hold is, so that no candidate
 * changes what is told of another; of a gearbox that shifts by itself, where the runs were, since they know its gears.
 */
function loopsOnPaper(
  road: Road,
  vehicle: Vehicle,
  demand: Demand,
  runs: readonly CandidateResult[],
): LoopSheet {
  const linear = runs.filter(({ controller }) => !('none' in linearController(controller)));
  if (linear.length === 0) return { points: [], notHeld: [], loops: [] };
  const visits =
    vehicle.drive.gearbox.kind === 'automatic'
      ? linear.flatMap(({ result }) => visitsOfRecord(road, result.bins))
      : visitsOfDemand(road, demand);
  return loopSheet(operatingPoints({ rides: [{ vehicle, load: null, visits }], grid: null }), runs);
}

function replayAll(
  candidates: readonly Candidate[],
  plans: readonly LoopPlan[],
  onProgress: (share: number, words: string) => void,
): readonly Replayed[] {
  return plans.map((plan, i) => {
    const name = candidates[i]?.name ?? '';
    onProgress((HILLS.from * i) / plans.length, name);
    // The plan itself asks for no detail: what is replayed from it later needs none.
    return { name, plan, result: runLoop({ ...plan, detail: true }) };
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
  if (findings.some(isMissed)) return 'requirement_not_met';
  return candidates.every(({ result }) => result.status === 'completed') ? 'ok' : 'incomplete';
}
