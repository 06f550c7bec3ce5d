// The public library: text and bytes in, plain data and text out. The same in Node, a page and a worker.

export { editCase } from './case/edit-case.ts';
export { caseJsonSchema, vehicleJsonSchema } from './case/json-schema.ts';
export { starterCase } from './case/starter-case.ts';
export { designDroop } from './control/design-droop.ts';
export { designSettling } from './control/design-settling.ts';
export type {
  Candidate,
  ControllerSetup,
  IntegerSetup,
  LockedSetup,
  PidSetup,
  PiSetup,
} from './control/setup.ts';
export { solveContinuous } from './loop/continuous.ts';
export type { HoldPlan, LoopPlan, RiderPlan, RunStatus } from './loop/plan.ts';
export { replay } from './loop/replay.ts';
export type {
  BinDetail,
  BinRecord,
  Checkpoint,
  Distribution,
  FullSeries,
  Ledger,
  LoopResult,
} from './loop/result.ts';
export { runLoop } from './loop/run-loop.ts';
export { formatProblem, InputError, type Problem } from './problems/input-error.ts';
export { formatPlace, type Place } from './problems/place.ts';
export type { Warning } from './problems/warning.ts';
export type { ChartFile } from './report/chart-file.ts';
export { chartFiles } from './report/chart-files.ts';
export { type Comparison, compareResults } from './report/compare/compare-results.ts';
export { comparisonJson, type Folders } from './report/compare/comparison-json.ts';
export { readSeries, type Series, type SeriesPair } from './report/compare/read-series.ts';
export { type ResultSummary, readSummary } from './report/compare/read-summary.ts';
export { type ComparisonOptions, renderComparison } from './report/compare/render-comparison.ts';
export { dataFiles, roadFiles, type TextFile } from './report/data/data-files.ts';
export { NotFiniteError } from './report/data/fixed.ts';
export { roadJson } from './report/data/road-json.ts';
export { summaryJson } from './report/data/summary.ts';
export { identificationJson } from './report/identify/identification-json.ts';
export {
  type IdentificationOptions,
  renderIdentification,
} from './report/identify/render-identification.ts';
export { junitXml } from './report/junit-xml.ts';
export { renderReport } from './report/render-report.ts';
export { renderTune } from './report/tune/render-tune.ts';
export { tuneJson } from './report/tune/tune-json.ts';
export type { ProfileOptions, RoadOptions } from './road/options.ts';
export type { Road } from './road/road.ts';
export { roadOfProfile } from './road/road-of-profile.ts';
export { roadOfTrack } from './road/road-of-track.ts';
export { addProposals } from './run/add-proposals.ts';
export type {
  CoastDownIdentification,
  Identification,
  RideIdentification,
  StepIdentification,
} from './run/identification.ts';
export { identifyLogs } from './run/identify-logs.ts';
export type { IdentifyRequest } from './run/identify-request.ts';
export type { CellOutcome, CellPicture, MatrixCell, MatrixResult } from './run/matrix-result.ts';
export type { MatrixWork } from './run/matrix-work.ts';
export { type RoadRequest, roadOf } from './run/road-of.ts';
export type { RoadResult } from './run/road-result.ts';
export { type CaseRun, type RunRequest, runCase, runWithoutMatrix } from './run/run-case.ts';
export { plansOfCell, runCell } from './run/run-cell.ts';
export type { CandidateResult, InputFile, RunResult } from './run/run-result.ts';
export { SCHEMA_VERSION, TOOL_VERSION } from './run/tool-version.ts';
export { tuneCase } from './run/tune-case.ts';
export type { TunedCandidate, TuneResult } from './run/tune-result.ts';
export { withMatrix } from './run/with-matrix.ts';
export { demandOf } from './study/demand.ts';
export { FIGURES, type FigureRow } from './study/figure-table.ts';
export { findHills } from './study/find-hills.ts';
export type {
  Demand,
  Figure,
  FigureValues,
  Hill,
  HillOutcome,
  LimitCycle,
  None,
  Requirement,
  RequirementFinding,
  Segment,
} from './study/findings.ts';
export { layRide } from './study/lay-ride.ts';
export { type CycleSearch, findLimitCycles } from './study/limit-cycles.ts';
export type { LoggedRide, RidePause } from './study/logged-ride.ts';
export { type CandidateLoop, type LoopSheet, loopSheet } from './study/loop-sheet.ts';
export type { OperatingPoint, PointMargins, PointNotHeld } from './study/operating-point.ts';
export { type OperatingPoints, operatingPoints, type PointGrid } from './study/operating-points.ts';
export { type PointFigures, pointFigures } from './study/point-figures.ts';
export { pointMargins } from './study/point-margins.ts';
export type { CandidateBeside, RideResult } from './study/ride-figures.ts';
export { type RideLog, readRide } from './track/read-ride.ts';
export { readTrack } from './track/read-track.ts';
export type { Profile, Repair, Track } from './track/track.ts';
export type { Belt, Drive, Gear, Gearbox } from './vehicle/drive.ts';
export { type ElectricDriveSpec, electricDrive } from './vehicle/electric-drive.ts';
export { engineDrive } from './vehicle/engine-drive.ts';
export type { CombustionSpec, EngineDriveSpec, VariatorDriveSpec } from './vehicle/engine-spec.ts';
export { type ForceDriveSpec, forceDrive } from './vehicle/force-drive.ts';
export { variatorDrive } from './vehicle/variator-drive.ts';
export type { RoadLoad, Vehicle } from './vehicle/vehicle.ts';
