import type { BinRecord, ShiftEvent } from '../../loop/result.ts';
import { offOf } from './hold-away.ts';
import { type SetSpeedMark, setSpeedMarks } from './settling.ts';
import type { CandidateView, View } from './view.ts';

/** A stretch on which the hold is not asked to keep its speed; `off`: the rider rides by hand. */
export interface HoldMark extends SetSpeedMark {
  readonly off?: boolean;
}

/** Those stretches of the road, in order: changes of set speed, shifts of the rider, and where hold is off. */
export function holdMarks(view: View): readonly HoldMark[] {
  return [...setSpeedMarks(view), ...shiftMarks(view), ...offMarks(view)].sort((a, b) => a.from - b.from);
}

/** Where hold of any design is off, or of any candidate where there is no design: where they meet, one mark. */
export function offMarks({ result, candidates }: View): readonly HoldMark[] {
  const designs = candidates.filter(({ locked }) => !locked);
  const all = (designs.length > 0 ? designs : candidates)
    .flatMap((candidate) => offOf(result, candidate.result))
    .sort((a, b) => a.from - b.from);
  const marks: { from: number; to: number; text: string; off: true }[] = [];
  for (const { from, to } of all) {
    const last = marks.at(-1);
    if (last !== undefined && from <= last.to) last.to = Math.max(last.to, to);
    else marks.push({ from, to, text: 'off', off: true });
  }
  return marks;
}

/** Shifts of the rider, each from where the first candidate opens the clutch to where the hold of the last resumes. */
export function shiftMarks(view: View): readonly SetSpeedMark[] {
  const marks: { from: number; to: number; text: string }[] = [];
  for (const candidate of view.candidates)
    for (const shift of candidate.result.shifts) {
      if (shift.resumedAt === null) continue;
      const to = resumedPlace(candidate, shift);
      const text = `hold off, gear ${shift.from + 1} to ${shift.to + 1}`;
      const same = marks.find((mark) => mark.text === text && shift.distance <= mark.to && to >= mark.from);
      if (same === undefined) marks.push({ from: shift.distance, to, text });
      else {
        same.from = Math.min(same.from, shift.distance);
        same.to = Math.max(same.to, to);
      }
    }
  return marks.sort((a, b) => a.from - b.from);
}

/** Where the hold had resumed: the first bin entered after that, or the end of the run [m]. */
function resumedPlace({ result: { bins, endDistance } }: CandidateView, shift: ShiftEvent): number {
  const i = firstAfter(bins, shift.resumedAt ?? shift.time);
  return i < bins.size ? Math.max(shift.distance, bins.edge[i]!) : endDistance;
}

function firstAfter({ size, timeAt }: BinRecord, time: number): number {
  let [low, high] = [0, size];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (timeAt[middle]! >= time) high = middle;
    else low = middle + 1;
  }
  return low;
}

/** Any candidate was in more than one gear: the gears are worth a lane. */
export const gearsChange = (view: View): boolean =>
  view.candidates.some(({ result: { bins } }) => {
    for (let i = 1; i < bins.size; i++) if (bins.gear[i] !== bins.gear[0]) return true;
    return false;
  });

/** Shifts that gearboxes made by themselves, over all candidates. */
export const automaticShifts = ({ result: { shifts } }: CandidateView): number =>
  shifts.filter(({ resumedAt }) => resumedAt === null).length;
