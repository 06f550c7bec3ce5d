import type { HoldEvent } from '../loop/result.ts';
import type { Figure } from './findings.ts';
import type { HoldMeasure } from './hold-transient.ts';
import { atKm, inKmh, inPct, inSeconds } from './wording.ts';

/** Why hold ended, to follow on `ended at km 3.20:`. */
const CAUSES: Readonly<Record<HoldEvent['cause'], string>> = {
  rider: 'the rider switched it off',
  bend: 'the rider braked for a bend',
  brake: 'the rider braked',
  clutch: 'the clutch was pulled',
  gear_change: 'a gear was changed',
  too_slow: 'the speed stayed too far below the set speed',
  too_fast: 'the speed stayed too far above the set speed',
  below_lowest_speed: 'the speed fell below the lowest that the unit holds',
  sensor_not_believed: 'the measured speed changed faster than a vehicle can',
};
export const causeWords = ({ cause }: Pick<HoldEvent, 'cause'>): string => CAUSES[cause];

/** A transient in one sentence. */
export function transientWords(measure: HoldMeasure): string {
  const { candidate, event, commandStep, jerk, settling } = measure;
  const place = atKm(event.distance);
  if (event.kind === 'ended') {
    const jerks = typeof jerk === 'number' ? `, jerk up to ${jerk.toFixed(1)} m/s3` : '';
    return `Hold of ${candidate} ends at ${place}, at ${inKmh(event.measured)}: ${causeWords(event)}${jerks}.`;
  }
  const parts = [stepWords(commandStep), wayWords(measure), settlingWords(settling)];
  return `${openingWords(measure)}: ${parts.filter((part) => part !== '').join(', ')}.`;
}

const stepWords = (step: Figure): string => {
  if (typeof step !== 'number') return step.none;
  return step < 5e-4 ? 'no step of the command' : `the command steps by ${inPct(step, 1)}`;
};

function openingWords({ candidate, event }: HoldMeasure): string {
  const place = atKm(event.distance);
  const goal = inKmh(event.setSpeed);
  switch (event.kind) {
    case 'engaged':
      return `${candidate} takes over at ${place} at ${goal}`;
    case 'resumed':
      return `${candidate} resumes ${goal} at ${place} from ${inKmh(event.measured)}`;
    case 'tapped':
      return `${candidate} is tapped to ${goal} at ${place}`;
    default:
      return `The grip is let go at ${place} at ${inKmh(event.measured)}, ${candidate} back to ${goal}`;
  }
}

/** Nearer than this to the set speed is at it [m/s]. */
const AT_SET_SPEED = 0.014;

function wayWords({ lowest, highest }: HoldMeasure): string {
  if (typeof lowest !== 'number' || typeof highest !== 'number') return '';
  const below = lowest < -AT_SET_SPEED ? `${inKmh(-lowest)} below` : '';
  const above = highest > AT_SET_SPEED ? `${inKmh(highest)} above` : '';
  if (below === '' && above === '') return 'the speed stays at the set speed';
  return `the speed goes ${[below, above].filter((side) => side !== '').join(' and ')} the set speed`;
}

const settlingWords = (settling: Figure): string =>
  typeof settling === 'number'
    ? `first within 1 km/h of it for 3 s after ${inSeconds(settling)}`
    : `its settling is not seen: ${settling.none}`;
