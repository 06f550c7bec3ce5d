import type { CandidateResult, RunResult } from '../../run/run-result.ts';
import type { RideResult } from '../../study/ride-figures.ts';
import { DASHES } from '../paint.ts';
import { SPEED_UNITS, type SpeedUnit, type Units } from '../quantity.ts';
import { distanceNameOf, lengthOf } from './road-words.ts';

/** A run as one reader sees it: the result, the unit of speeds, the order and look of the candidates. Plain data. */
export interface View {
  readonly result: RunResult;
  readonly units: Units;
  readonly speed: SpeedUnit;
  /** Locked throttles first, then the designs as the case lists them. */
  readonly candidates: readonly CandidateView[];
  /** Logged rides, as the case lists them. */
  readonly rides: readonly RideView[];
  /** `distance`, or `nominal distance` for a road along time. */
  readonly distanceName: string;
  /** Length of the road [m]. */
  readonly length: number;
}

export interface CandidateView extends CandidateResult {
  readonly locked: boolean;
  /** Index into Paint.series, and the dash pattern that goes with it. */
  readonly colour: number;
  readonly dash: string;
}

/** Marks that tell the lines of rides apart. */
export const RIDE_MARKS = ['ring', 'square', 'diamond', 'triangle'] as const;

export interface RideView extends RideResult {
  readonly mark: (typeof RIDE_MARKS)[number];
}

/** Orders the candidates and gives each a look of its own; past the palette's end looks come again. */
export function viewOf(result: RunResult, units: Units): View {
  const isLocked = (candidate: CandidateResult) => candidate.controller.kind === 'locked';
  const locked = result.candidates.filter(isLocked);
  const designs = result.candidates.filter((candidate) => !isLocked(candidate));
  const looked = (candidate: CandidateResult, place: number): CandidateView => {
    const colour = place < 0 ? 0 : 1 + (place % (DASHES.length - 1));
    return { ...candidate, locked: isLocked(candidate), colour, dash: DASHES[colour]! };
  };
  return {
    result,
    units,
    speed: SPEED_UNITS[units],
    candidates: [
      ...locked.map((candidate, i) => looked(candidate, i === 0 ? -1 : designs.length + i - 1)),
      ...designs.map((candidate, i) => looked(candidate, i)),
    ],
    rides: result.loggedRides.map((ride, i) => ({ ...ride, mark: RIDE_MARKS[i % RIDE_MARKS.length]! })),
    distanceName: distanceNameOf(result.road),
    length: lengthOf(result.road),
  };
}
