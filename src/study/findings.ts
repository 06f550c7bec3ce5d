import type { LoopPlan } from '../loop/plan.ts';
import type { Checkpoint, FullSeries, LoopResult } from '../loop/result.ts';

/** A figure that does not exist, and why; never NaN. */
export interface None {
  readonly none: string;
}
export type Figure = number | None;
export const isNone = (figure: Figure): figure is None => typeof figure !== 'number';

/** A candidate after its run: what every study starts from. */
export interface Replayed {
  readonly name: string;
  readonly plan: LoopPlan;
  readonly result: LoopResult;
}

/** What the road asks at the set speed, and what the drive has, knot by knot of the road (equal lengths, SI). */
export interface Demand {
  readonly setSpeed: Float64Array;
  /** Wheel force that holds the set speed steadily [N]. */
  readonly required: Float64Array;
  /** Greatest and least wheel force there [N]: full throttle; closed throttle or full regeneration; of a battery cold and at its charge at the start. */
  readonly upper: Float64Array;
  readonly lower: Float64Array;
  /** Greatest wheel force that the driven wheel passes on with the front wheel on the road [N], `upper` and `lower` kept within the grip; null: grip not known. */
  readonly grip: Float64Array | null;
  /** The same road in every gear, first gear first; one entry for a drive without gears. */
  readonly gears: readonly GearDemand[];
  /** Index of the gear that is engaged, or that the rider's plan has there, knot by knot; of an automatic gearbox the highest that holds, or the one that comes nearest, of those that its up line at full throttle does not leave. */
  readonly gear: Uint8Array;
  /**
   * Share of the range in use: required / upper while the drive must push; minus required / lower while it must hold back.
   * Above 1: more than there is. Below -1: even the least force is too much. Limited to [-9.99, 9.99].
   */
  readonly share: Float64Array;
  /** Speed to which full throttle sinks from the set speed and holds for ever; the set speed where that is held [m/s]; 0 where it stops. */
  readonly sustained: Float64Array;
  /** Where the least force is too much: the speed it runs away to [m/s] and the brake power that holds the set speed [W]; else set speed, 0. */
  readonly runaway: Float64Array;
  readonly brakePower: Float64Array;
  /** Speed of the ideal hold (see quasi-steady.ts) over the whole road, changes of set speed included [m/s]. */
  readonly ideal: Float64Array;
  /**
   * 1 where a hold can be asked for: the demand is in range, the ideal hold is back within half a km/h of the set
   * speed since 10 s, and no change of set speed is still settling. Share of the road's length for which that is so.
   */
  readonly holdable: Uint8Array;
  readonly holdableShare: number;
  /** Where a change of set speed is being followed by the road's own reckoning (nominalCourse); candidates have their own. */
  readonly settling: readonly Stretch[];
}

/** Demand and authority in one gear, knot by knot [N]; see Demand. Where the gear cannot turn at the set speed there is no force. */
export interface GearDemand {
  readonly upper: Float64Array;
  readonly lower: Float64Array;
  readonly share: Float64Array;
  /** Shaft speed at the set speed, in the unit of the drive's law; of a belt that at the throttle which holds it. */
  readonly shaftSpeed: Float64Array;
}

/** `rolling`: neither way on the whole; `level`: a stretch without height. */
export type HillKind = 'climb' | 'descent' | 'rolling' | 'level';

export type Cause =
  | 'torque'
  | 'power'
  | 'closed_throttle'
  | 'gains'
  | 'rate'
  | 'slack'
  | 'windup'
  | 'derating'
  | 'wind'
  | 'gear'
  | 'traction'
  /** The speed sensor told the controller something else. */
  | 'sensor';

/** What takes the force under the cause `derating`: thin air; heat, voltage or emptiness of a battery; a battery too full to take regeneration. */
export type Derating = 'altitude' | 'heat' | 'voltage' | 'empty' | 'full';

/** A stretch of the road where demand leaves the range, or a candidate leaves its band or sits on a limit. Shared by all candidates. */
export interface Hill {
  /** From 1, in order along the way. */
  readonly number: number;
  readonly kind: HillKind;
  /** Horizontal distance [m]. */
  readonly from: number;
  readonly to: number;
  /** End of what the hill is answerable for: 15 s behind its own end, or the end of an overshoot begun there, but no further than the next hill [m]. */
  readonly until: number;
  readonly meanGrade: number;
  readonly meanGradeSd: number;
  /** Steepest grade, with its sign. */
  readonly maxGrade: number;
  /** Extreme share of demand (see Demand.share), of a descent the least unless more than full force is asked for; with the forces there [N] and the sustained (or runaway) speed [m/s]. */
  readonly share: number;
  /** Where that is [m]. */
  readonly shareAt: number;
  readonly requiredForce: number;
  readonly availableForce: number;
  /** What the drive itself has there, where the grip of its wheel passes on less [N]. */
  readonly beforeGrip?: number;
  readonly sustainedSpeed: number;
  /** Shorter than the smoothing can resolve. */
  readonly unresolved: boolean;
  /** Of a drive with gears; null: without. */
  readonly gears: HillGears | null;
  /** Braking that holds the set speed beside the least throttle: greatest power [W], energy over the hill [J]. */
  readonly brakePower: number;
  readonly brakeEnergy: number;
  readonly outcomes: readonly HillOutcome[];
}

/** Gears on a hill, indices into the drive's gears. */
export interface HillGears {
  /** Engaged at the place of greatest demand. */
  readonly engaged: number;
  /** Highest gear in which the demand stays in range all over the hill; null: none does. */
  readonly needed: number | null;
  /** Speed that each gear sustains at the place of greatest demand, first gear first [m/s]; 0: none. */
  readonly sustained: readonly number[];
}

/** What one candidate did on a hill. */
export interface HillOutcome {
  readonly candidate: string;
  /** It left its band, sat on a limit, or went beyond the grip of its driven wheel here. */
  readonly affected: boolean;
  /** Extreme error on what the hill is answerable for, signed [m/s]: lost (negative) or gained; so are the times. */
  readonly speedChange: number;
  /** By the hand formula (quasi-steady plus momentum) [m/s]. */
  readonly predictedChange: Figure;
  /** Simulated and predicted differ by more than 15 %. */
  readonly predictionDiffers: boolean;
  readonly timeLost: number;
  readonly timeAtLimit: number;
  /** From where the demand comes back into range, or where it stays there from leaving the band, to within 1 km/h for 3 s [s] (see recoveryOf). */
  readonly recovery: Figure;
  readonly cause: Cause | None;
  /** Of the cause `derating`. */
  readonly derating?: Derating;
  /** One sentence: why. */
  readonly why: string;
  readonly wouldHold: readonly Remedy[];
  /** Every sample from a little before the hill to the recovery, thinned to at most 400 rows, extremes kept. */
  readonly picture: FullSeries;
}

/** What the figure of recoveries needs of a hill. */
export interface RecoveredHill extends Pick<Hill, 'number' | 'from' | 'to' | 'until'> {
  readonly outcomes: readonly Pick<HillOutcome, 'candidate' | 'affected' | 'recovery'>[];
}

export interface Remedy {
  readonly lever: 'set_speed' | 'power' | 'load' | 'gear';
  /** Of the lever `gear`: where the rider changes down, horizontal distance [m]; null: nowhere, or another lever. */
  readonly at?: number | null;
  /**
   * The value that holds and the next step that does not; {none} where the lever cannot help. Set speed [m/s], true or indicated as the plan has it; power at
   * the wheel at the set speed under full throttle at sea level [W]; payload [kg]; gear, counted from 1.
   */
  readonly holds: Figure;
  readonly fails: Figure;
  /** One sentence with units. */
  readonly words: string;
}

/** Why a limit cycle runs. */
export type CycleCause =
  | 'slack'
  | 'fuel_cut'
  | 'pulse_counting'
  | 'resolution'
  | 'shifting'
  | 'gains'
  | 'unknown';

/** An oscillation that a loop sustains by itself: found in the speed error, not asked for by the road. */
export interface LimitCycle {
  readonly candidate: string;
  /** Horizontal distance [m]. */
  readonly from: number;
  readonly to: number;
  /** [s], and how many of them were driven. */
  readonly period: number;
  readonly turns: number;
  /** Half of peak to peak: speed [m/s], throttle. */
  readonly speedAmplitude: number;
  readonly throttleAmplitude: number;
  readonly cause: CycleCause;
  /** One sentence: what was taken away, and what was left of the amplitude. */
  readonly why: string;
}

/** Part of the road, horizontal distances [m]. */
export interface Stretch {
  readonly from: number;
  readonly to: number;
}

export interface RoadSegment extends Stretch {
  /** From 1, in order along the way. */
  readonly number: number;
  readonly meanGrade: number;
  readonly meanHeadwind: number;
}
export interface Segment extends RoadSegment {
  readonly runs: readonly SegmentRun[];
}
export interface SegmentRun {
  readonly candidate: string;
  /** [m/s]; {none} where the run ended before. */
  readonly meanError: Figure;
  readonly rmsError: Figure;
  readonly worstError: Figure;
  readonly meanThrottle: Figure;
  /** Share of the time at a limit. */
  readonly atLimit: Figure;
  /** Wheel energy [J]. */
  readonly wheelEnergy: Figure;
  readonly time: Figure;
}

/** Where a requirement applies. */
export type Where = 'holdable' | 'all' | { readonly from: number; readonly to: number };

export interface Requirement {
  readonly id: string;
  /** Name in the table of figures. */
  readonly figure: string;
  /** Parameter of the figure: half-width of the band [m/s]; null where it has none. */
  readonly band: number | null;
  /** In the unit of the figure's table row. */
  readonly atLeast: number | null;
  readonly atMost: number | null;
  readonly where: Where;
  /** Names; null: all but the locked ones. */
  readonly candidates: readonly string[] | null;
}

export interface RequirementFinding {
  readonly requirement: Requirement;
  readonly candidate: string;
  /** In the unit of the figure's table row. */
  readonly measured: Figure;
  /** Distance to the limit, positive on the good side; {none} for a run that ended before the end of what is asked about. */
  readonly margin: Figure;
  /** S.d. of the figure from the grade's uncertainty, same unit. */
  readonly spread: number;
  /** Where it was worst, horizontal distance [m]; null for a figure without a place. Of a recovery the end of the hill. */
  readonly worstAt: number | null;
  /** Number of the hill behind which it was worst, of a recovery. */
  readonly afterHill?: number;
  /** `not judged`: there is no such figure, for the reason that `words` tell; it counts as not met. */
  readonly verdict: 'met' | 'not met' | 'too close to call' | 'not judged';
  /** One sentence. */
  readonly words: string;
}

/** Figures of one candidate by name, in the unit of the table of figures. */
export type FigureValues = Readonly<Record<string, Figure>>;

export type { Checkpoint, FullSeries };
