import type { GivenValue } from '../case/given-values.ts';
import type { DefaultUsed } from '../case/list-defaults.ts';
import type { LoopStability } from '../control/loop-stability.ts';
import type { Candidate } from '../control/setup.ts';
import type { SupervisorSetup } from '../control/supervisor-setup.ts';
import type { HoldPlan, RiderPlan, SensorFault } from '../loop/plan.ts';
import type { FullSeries, LoopResult } from '../loop/result.ts';
import type { Warning } from '../problems/warning.ts';
import type { Road } from '../road/road.ts';
import type { BendPlan } from '../study/bend-plan.ts';
import type {
  Demand,
  FigureValues,
  Hill,
  LimitCycle,
  RequirementFinding,
  Segment,
} from '../study/findings.ts';
import type { HoldTransients } from '../study/hold-transient.ts';
import type { LoopSheet } from '../study/loop-sheet.ts';
import type { RideResult } from '../study/ride-figures.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { MatrixResult } from './matrix-result.ts';

/** Everything one run of a case found: what the report, the files and both programs read. Plain data. */
export interface RunResult {
  /** Version of the shape of summary.json. */
  readonly schemaVersion: string;
  readonly toolVersion: string;
  readonly title: string;
  /** Name of the case file without folder and ending. */
  readonly caseName: string;
  /** Files read, by the name written in the case (the case itself first). */
  readonly inputs: readonly InputFile[];
  /** Changes given beside the case, as typed: `hold.set_speed_kmh=70`. */
  readonly overrides: readonly string[];
  readonly road: Road;
  readonly vehicle: Vehicle;
  readonly hold: HoldPlan;
  /** What is written and what bends ask for, in order along the way. */
  readonly rider: RiderPlan;
  /** Rules of the speed-hold unit; null: nothing in the case asks anything of it. */
  readonly supervisor: SupervisorSetup | null;
  readonly faults: readonly SensorFault[];
  /** Bends, what the rider does for them, and where speed hold does not belong; null: the case does not ask for bends. */
  readonly bends: BendPlan | null;
  readonly scheme: 'exact' | 'fast';
  /** Half-width of the band that the figures and charts use [m/s]. */
  readonly band: number;
  readonly candidates: readonly CandidateResult[];
  readonly demand: Demand;
  readonly hills: readonly Hill[];
  /** Oscillations that loops sustain by themselves, by candidate and place. */
  readonly cycles: readonly LimitCycle[];
  /** What followed each event of the hold: engaging, resuming, taps, overrides, ends. */
  readonly transients: HoldTransients;
  /** Rides that were logged on the same road, laid along it; no candidates: nothing is asked of them. */
  readonly loggedRides: readonly RideResult[];
  /** The linear loops at the operating points that the runs visit. */
  readonly loops: LoopSheet;
  readonly segmentsBy: 'length' | 'terrain';
  readonly segments: readonly Segment[];
  readonly requirements: readonly RequirementFinding[];
  readonly spread: SpreadMethod;
  readonly defaults: readonly DefaultUsed[];
  /** What case and vehicle gave. */
  readonly given: readonly GivenValue[];
  readonly warnings: readonly Warning[];
  /** Every combination of the case's matrix; null: it has none. */
  readonly matrix: MatrixResult | null;
  /** `requirement_not_met` when any requirement is not met or could not be judged, in the run itself or in a combination; else `incomplete` when a candidate did not reach the end. */
  readonly status: 'ok' | 'requirement_not_met' | 'incomplete';
}

/** How the spread of the figures in `requirements` was found. */
export interface SpreadMethod {
  /** Roads drawn from the grade's uncertainty, 0 where it has none or nothing is asked; and the seed of the draw. */
  readonly roads: number;
  readonly seed: number;
  /** One sentence. */
  readonly words: string;
}

export interface InputFile {
  readonly name: string;
  readonly sha256: string;
  readonly bytes: number;
}

export interface CandidateResult extends Candidate {
  readonly result: LoopResult;
  readonly figures: FigureValues;
  /** The linear loop at the set speeds on the level; null for a locked throttle, and where the drive holds none of them. */
  readonly loop: LoopStability | null;
  /** Every controller sample, where the case asks for `series: full`. */
  readonly full: FullSeries | null;
}

export type { DefaultUsed };
