import { fixed, withUnit } from '../quantity.ts';
import type { View } from './view.ts';

/** Where a change of set speed is being followed, with its words: `set speed 60 to 50 km/h`. */
export interface SetSpeedMark {
  /** Horizontal distance [m]. */
  readonly from: number;
  readonly to: number;
  readonly text: string;
}

/** The changes of set speed along the road; a start at another speed is one too, and comes first. */
export function setSpeedMarks(view: View): readonly SetSpeedMark[] {
  const { demand, hold } = view.result;
  const { of, name } = view.speed;
  const from = demand.settling.length > hold.changes.length ? [hold.startSpeed] : [];
  const steps = [...from, hold.setSpeed, ...hold.changes.map(({ setSpeed }) => setSpeed)];
  return demand.settling.map((stretch, k) => ({
    ...stretch,
    to: Math.min(stretch.to, view.length),
    text: `set speed ${fixed(of(steps[k]!))} to ${withUnit(fixed(of(steps[k + 1]!)), name)}`,
  }));
}
