import type { Editable } from '../case/edit-case.ts';
import type { GivenValue } from '../case/given-values.ts';
import type { DefaultUsed } from '../case/list-defaults.ts';
import type { TuneDesign, TunePlan } from '../case/tune-of.ts';
import type { Candidate } from '../control/setup.ts';
import type { SupervisorSetup } from '../control/supervisor-setup.ts';
import type { HoldPlan, RiderPlan, RunStatus, SensorFault } from '../loop/plan.ts';
import type { Warning } from '../problems/warning.ts';
import type { Road } from '../road/road.ts';
import type { BendPlan } from '../study/bend-plan.ts';
import type { Figure, FigureValues, RequirementFinding } from '../study/findings.ts';
import type { CandidateLoop, LoopSheet } from '../study/loop-sheet.ts';
import type { RoadTrial } from '../study/tune-search.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { InputFile } from './run-result.ts';

/** Everything that the tuning of a case found. Plain data. */
export interface TuneResult {
  readonly schemaVersion: string;
  readonly toolVersion: string;
  readonly title: string;
  readonly caseName: string;
  readonly inputs: readonly InputFile[];
  readonly overrides: readonly string[];
  readonly road: Road;
  readonly vehicle: Vehicle;
  readonly hold: HoldPlan;
  readonly rider: RiderPlan;
  readonly supervisor: SupervisorSetup | null;
  readonly faults: readonly SensorFault[];
  /** Null where the case does not ask for bends. */
  readonly bends: BendPlan | null;
  readonly scheme: 'exact' | 'fast';
  /** Half-width of the band of the figures [m/s]. */
  readonly band: number;
  readonly plan: TunePlan;
  /** Where the loop will run, those points that the route visits first; and how every candidate and proposal stands there. */
  readonly sheet: LoopSheet;
  /** The candidates of the case, then the proposals, in their orders. */
  readonly tuned: readonly TunedCandidate[];
  readonly notProposed: readonly NotProposed[];
  /** Name of the proposal to take: of those that miss the fewest requirements that of the least cost; null: there is none. */
  readonly chosen: string | null;
  /** Gains tried on the road, in order; empty: none were. */
  readonly trials: readonly RoadTrial[];
  /** For the sampling of the proposals: kp [1/(m/s)] and the greatest ki under the bound [1/(m/s)/s], by rising kp. */
  readonly border: readonly { readonly kp: number; readonly ki: number }[];
  readonly defaults: readonly DefaultUsed[];
  readonly given: readonly GivenValue[];
  readonly warnings: readonly Warning[];
  /** `bound_not_kept`: a candidate of the case exceeds the bound at an operating point, or nothing could be proposed. */
  readonly status: 'ok' | 'bound_not_kept';
}

export interface TunedCandidate extends Candidate {
  /** null: a candidate of the case. */
  readonly proposal: Proposal | null;
  /** How it stands at each operating point, the worst of them first in its order. */
  readonly loop: CandidateLoop;
  /** The bound is kept at every point; null: nothing linear. */
  readonly keeps: boolean | null;
  /** Of the replay over the road of the case, as `run` finds them. */
  readonly figures: FigureValues;
  /** What each requirement of the case that speaks of it says, as `run` finds it. */
  readonly requirements: readonly RequirementFinding[];
  readonly cost: Figure;
  readonly runStatus: RunStatus;
}

/** How gains were come by, and what is written for them. */
export interface Proposal {
  readonly design: TuneDesign;
  /** The candidate as it stands in a case file. */
  readonly file: CandidateText;
  /** One sentence. */
  readonly words: string;
}
export type CandidateText = { readonly name: string; readonly [key: string]: Editable };

export interface NotProposed {
  readonly design: TuneDesign;
  readonly reason: string;
}
