import type { RunStatus, SensorFault } from '../loop/plan.ts';
import { nearestCheckpoint, replay } from '../loop/replay.ts';
import type { Checkpoint, LoopResult } from '../loop/result.ts';
import { faultsBegun } from '../loop/sensor-faults.ts';
import { intervalOf } from '../numeric/interpolate.ts';
import type { Replayed, Stretch } from './findings.ts';
import { type CauseFinding, errorRange, takesHalf } from './hill-cause.ts';
import { type HillEvents, hillEvents } from './hill-events.ts';
import type { HillPlace, PassageContext } from './hill-passage.ts';
import { excessOf } from './hill-window.ts';
import { GRANTED_SETTLING, placeInRun } from './hold-course.ts';
import { atKm, inSeconds } from './wording.ts';

/** What a fault of the speed sensor has to do with a hill: at most one of the two is there. */
export interface SensorFinding {
  readonly cause: CauseFinding | null;
  /** To follow on another cause; empty where no fault is near. */
  readonly words: string;
}

const NO_FAULT: SensorFinding = { cause: null, words: '' };

/** What the sensor did, to follow on `The speed sensor`. */
export const SHOWED: Readonly<Record<SensorFault['shows'], string>> = {
  nothing: 'showed no speed',
  last_value: 'went on showing its last speed',
  double: 'showed twice the speed',
};

/**
 * Whether a fault of the speed sensor, on the hill or ended less than 10 s before it, is why a candidate left its band
 * or sat on a limit there: the run is replayed from its last checkpoint before the fault, everything as it was but the
 * faults from there on. `sensor`, if neither happens then, or at least half of the excess over the band goes.
 *
 * @param events what the candidate did on the hill, which affected it
 */
export function sensorCause(
  { plan, result }: Replayed,
  hill: HillPlace,
  { course, band }: Pick<PassageContext, 'course' | 'band'>,
  events: HillEvents,
): SensorFinding {
  const faults = (plan.faults ?? []).map((fault) => ({ fault, ...faultStretch(result, fault) }));
  const near = faults.find(({ from, to }) => from < hill.until && to > hill.from);
  if (near === undefined) return NO_FAULT;
  const start = checkpointBefore(result, near.from);
  const free = { ...plan, faults: (plan.faults ?? []).slice(0, faultsBegun(start)) };
  const { status, series } = replay(free, start, hill.until, hill.from);
  const without = hillEvents(free, series, 0, series.size, course.settling, band);
  const told = `The speed sensor ${SHOWED[near.fault.shows]} for ${inSeconds(near.fault.for)} from ${atKm(near.from)} on (${errorRange(events)})`;
  const rest = status === 'completed' ? errorRange(without) : 'the run would still end here';
  const why = `${told}; without that: ${rest}.`;
  const excess = (of: HillEvents, end: RunStatus): number => excessOf({ ...of, status: end }, band);
  const ended = result.endDistance < hill.until ? result.status : 'completed';
  const clear = status === 'completed' && !without.affected;
  if (clear || (events.leftBand && takesHalf(excess(without, status), excess(events, ended))))
    return { cause: { cause: 'sensor', why }, words: '' };
  return { cause: null, words: ` ${why}` };
}

/** The last checkpoint that was made before a place; the first where there is none. */
const checkpointBefore = (result: LoopResult, place: number): Checkpoint =>
  nearestCheckpoint(result, place - 1);

/** From where a fault begins to 10 s behind its end [m]; infinite where the run did not get so far. */
function faultStretch(result: LoopResult, fault: SensorFault): Stretch {
  const begun = 'time' in fault.at ? fault.at.time : timeInRun(result, fault.at.distance);
  const from = 'time' in fault.at ? placeInRun(result, begun).at : fault.at.distance;
  return { from, to: placeInRun(result, begun + fault.for + GRANTED_SETTLING).at };
}

/** When a run came to a place [s]; infinite where it did not. */
export function timeInRun({ bins, endDistance }: LoopResult, distance: number): number {
  if (distance >= endDistance || bins.size === 0) return Number.POSITIVE_INFINITY;
  const i = Math.min(intervalOf(bins.edge, distance), bins.size - 1);
  const share = (distance - bins.edge[i]) / (bins.edge[i + 1] - bins.edge[i]);
  return bins.timeAt[i] + share * bins.time[i];
}
