import { expect, test } from 'vitest';
import { automaticShifts, gearsChange, holdMarks, shiftMarks } from '../../../src/report/model/hold-marks.ts';
import { type CandidateView, viewOf } from '../../../src/report/model/view.ts';
import { expectClose } from '../../compare.ts';
import { fixtureResult } from '../fixture.ts';

const result = fixtureResult({ lengthKm: 12, engine: true, locked: false });
const view = viewOf(result, 'kmh');
const at = result.rider.shifts[0]!.distance;

test('one shift of all candidates is one mark, from the open clutch to where the last hold resumes', () => {
  const marks = shiftMarks(view);
  expect(marks.map(({ text }) => text)).toEqual(['hold off, gear 6 to 5']);
  expect(marks[0]!.from).toBe(at);
  // Hold resumes at 2.4 s after at / 16 s; each run is somewhere else then.
  const resumed = at / 16 + 2.4;
  const places = view.candidates.map(({ result: { bins } }) => {
    const i = bins.timeAt.findIndex((time) => time >= resumed);
    return i < 0 ? result.road.distance[result.road.size - 1]! : bins.edge[i]!;
  });
  expectClose(marks[0]!.to, Math.max(at, ...places), 10, 'resumed [m]');
  expect(holdMarks(view)).toEqual(marks);
});

test('gears that change are seen, and shifts of the gearbox are counted apart', () => {
  expect(gearsChange(view)).toBe(true);
  expect(gearsChange(viewOf(fixtureResult({ lengthKm: 6 }), 'kmh'))).toBe(false);
  const [candidate] = view.candidates as readonly [CandidateView];
  expect(automaticShifts(candidate)).toBe(0);
  const shifts = [...candidate.result.shifts, { time: 1, distance: 9, from: 2, to: 3, resumedAt: null }];
  const more = { ...candidate, result: { ...candidate.result, shifts } };
  expect(automaticShifts(more)).toBe(1);
  expect(shiftMarks({ ...view, candidates: [more] })).toHaveLength(1);
});
