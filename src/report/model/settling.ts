import type { Stretch } from '../../study/findings.ts';
import { courseOfRun, type HoldCourse, nominalCourse } from '../../study/hold-course.ts';
import { fixed, withUnit } from '../quantity.ts';
import type { CandidateView, View } from './view.ts';

function courseOf({ result: { hold, vehicle, supervisor } }: View, candidate: CandidateView): HoldCourse {
  const unit = supervisor === null ? {} : { supervisor };
  return courseOfRun({
    plan: { hold, vehicle, controller: candidate.controller, ...unit },
    result: candidate.result,
  });
}

/** Where a candidate follows the changes that the plan has, without those that the rider makes on the way. */
function followingOfPlan(view: View, candidate: CandidateView): readonly Stretch[] {
  return courseOf(view, { ...candidate, result: { ...candidate.result, holdEvents: [] } }).following;
}

/** Where a candidate follows changes of its set speed or gets over a shift of the rider's, in order along the way. */
export const settlingOf = (view: View, candidate: CandidateView): readonly Stretch[] =>
  courseOf(view, candidate).settling;

/** A change of set speed with its words: `set speed 60 to 50 km/h`. */
export interface SetSpeedMark extends Stretch {
  readonly text: string;
}

/** The changes of set speed along the road, each from where the first design follows it to where the last one does. */
export function setSpeedMarks(view: View): readonly SetSpeedMark[] {
  const { road, hold, vehicle } = view.result;
  const { of, name } = view.speed;
  const designs = view.candidates.filter(({ locked }) => !locked).map((one) => followingOfPlan(view, one));
  const { following } = nominalCourse(road, hold, vehicle);
  const start = following.length > hold.changes.length ? [hold.startSpeed] : [];
  const steps = [...start, hold.setSpeed, ...hold.changes.map(({ setSpeed }) => setSpeed)];
  return following.flatMap((nominal, k) => {
    const made = designs.flatMap((settling) => settling[k] ?? []).filter(({ from }) => from < view.length);
    const all = made.length > 0 ? made : [nominal];
    const from = Math.min(...all.map((one) => one.from));
    const to = Math.min(Math.max(...all.map((one) => one.to)), view.length);
    const text = `set speed ${fixed(of(steps[k]!))} to ${withUnit(fixed(of(steps[k + 1]!)), name)}`;
    return from < to ? [{ from, to, text }] : [];
  });
}
