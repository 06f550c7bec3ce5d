import { expect, it } from 'vitest';
import type { SupervisorSetup } from '../../../src/control/supervisor-setup.ts';
import type { HoldEvent } from '../../../src/loop/result.ts';
import { settledRange, wholeRange } from '../../../src/report/model/settled-range.ts';
import { setSpeedMarks, settlingOf } from '../../../src/report/model/settling.ts';
import { viewOf } from '../../../src/report/model/view.ts';
import { expectClose } from '../../compare.ts';
import { fixtureResult } from '../fixture.ts';

/** 60 to 50 km/h at 5 km with 0.6 m/s2. Granted: the ramp and 10 s, at 60 km/h. */
const GRANTED = ((60 - 50) / 3.6 / 0.6 + 10) * (60 / 3.6);

function withChange() {
  const result = fixtureResult({ lengthKm: 12, designs: ['pi-firm'] });
  const change = { at: { distance: 5000 }, setSpeed: 50 / 3.6, ramp: 0.6 };
  return {
    ...result,
    hold: { ...result.hold, changes: [change] },
    demand: { ...result.demand, settling: [{ from: 5000, to: 5000 + GRANTED }] },
  };
}

it('a change of set speed is marked from where it is made to where it is granted to be followed', () => {
  const [mark, ...more] = setSpeedMarks(viewOf(withChange(), 'kmh'));
  expect(more).toEqual([]);
  expect(mark!.text.replace(/\u00a0/g, ' ')).toBe('set speed 60 to 50 km/h');
  expect(mark!.from).toBe(5000);
  expectClose(mark!.to, 5000 + GRANTED, 1e-9);
});

it('an error while a change is followed is of the whole range, not of the settled one', () => {
  const result = withChange();
  const [design] = result.candidates;
  const { bins } = design!.result;
  const errorMax = bins.errorMax.slice();
  errorMax[bins.edge.findIndex((edge) => edge > 5050)] = 99;
  const spiked = { ...design!, result: { ...design!.result, bins: { ...bins, errorMax } } };
  const view = viewOf({ ...result, candidates: [spiked] }, 'kmh');
  expect(wholeRange(view.candidates[0]!)!.high).toBe(99);
  expect(settledRange(view, view.candidates[0]!)!.high).toBeLessThan(99);
});

/** Of the first design, what became of hold. */
function withEvents(...holdEvents: readonly HoldEvent[]) {
  const result = withChange();
  const [design] = result.candidates;
  return { ...result, candidates: [{ ...design!, result: { ...design!.result, holdEvents } }] };
}

const UNIT: SupervisorSetup = {
  lowestSpeed: 0,
  tooSlow: null,
  tooFast: null,
  believable: null,
  resumeRamp: null,
  tap: 0.5,
  tapRamp: null,
  override: { integral: 'held', reentry: 0.4 },
};
const EVENT = { cause: 'rider', setSpeed: 60 / 3.6, measured: 60 / 3.6, command: 0.3 } as const;

it('what the rider taps on the way moves no mark of the plan', () => {
  const tapped = { ...EVENT, kind: 'tapped', time: 120, distance: 2000, setSpeed: 63 / 3.6 } as const;
  const plan = setSpeedMarks(viewOf(withChange(), 'kmh'));
  expect(setSpeedMarks(viewOf(withEvents(tapped), 'kmh'))).toEqual(plan);
});

it('a resume is granted the time that the ramp of the unit takes', () => {
  const ended = { ...EVENT, kind: 'ended', time: 120, distance: 2000 } as const;
  const resumed = { ...EVENT, kind: 'resumed', time: 132, distance: 2200, measured: 40 / 3.6 } as const;
  const ramp = 0.25;
  const supervisor = { ...UNIT, resumeRamp: ramp };
  const view = viewOf({ ...withEvents(ended, resumed), supervisor }, 'kmh');
  const [, back] = settlingOf(view, view.candidates[0]!).filter(({ to }) => to < 5000);
  expect(back!.from).toBe(2200);
  expectClose(back!.to, 2200 + ((60 - 40) / 3.6 / ramp + 10) * (60 / 3.6), 1e-9);
});
