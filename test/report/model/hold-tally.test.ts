import { expect, test } from 'vitest';
import { answerOf } from '../../../src/report/model/answer.ts';
import { asksOfHold, overridesOf } from '../../../src/report/model/hold-away.ts';
import { momentsOf, shownMoments } from '../../../src/report/model/hold-moments.ts';
import {
  endWords,
  holdAnswer,
  holdClause,
  holdTally,
  worstTransient,
} from '../../../src/report/model/hold-tally.ts';
import { type CandidateView, viewOf } from '../../../src/report/model/view.ts';
import { expectClose } from '../../compare.ts';
import { fixtureResult } from '../fixture.ts';
import { FIRM_EVENTS, withRider } from '../fixture-rider.ts';

const plain = fixtureResult({ lengthKm: 12 });
const view = viewOf(withRider(plain), 'kmh');
const named = (name: string): CandidateView => view.candidates.find((one) => one.name === name)!;

test('time off and what ended hold are counted by who did it', () => {
  const tally = holdTally(view.result, named('pi-firm'));
  // 4 to 5 km and 8 to 8.5 km at 20 m/s.
  expectClose(tally.off, 75, 1e-9, 'time off [s]');
  expectClose(tally.onShare, 1 - 75 / named('pi-firm').result.endTime, 1e-12, 'share on');
  expect(tally.ends).toEqual({ bends: 1, rider: 0, rules: 1 });
  expect(tally.events.override_began).toBe(1);
  expect(endWords(tally)).toBe('it ends twice, once for bends, once by a rule of the unit itself');
  const soft = holdTally(view.result, named('pi-soft'));
  expect(endWords(soft)).toBe('it ends once, for bends, never by a rule of the unit itself');
  const rules = { ...tally, events: { ...tally.events, ended: 1 }, ends: { bends: 0, rider: 0, rules: 1 } };
  expect(endWords(rules)).toBe('it ends once, by a rule of the unit itself');
  const thrice = { ...tally, events: { ...tally.events, ended: 3 }, ends: { bends: 0, rider: 2, rules: 1 } };
  expect(endWords(thrice)).toBe('it ends 3 times, twice by the rider, once by a rule of the unit itself');
  expect(endWords(holdTally(view.result, named('locked')))).toBe('nothing ends it once it is engaged');
});

test('the worst transient is told with the share of the time', () => {
  expect(worstTransient(view.result, 'pi-firm')?.event.distance).toBe(5000);
  const words = holdAnswer(view, named('pi-firm'));
  expect(words).toContain('off for 75\u00a0s');
  expect(words).toContain('Its worst transient: pi-firm resumes 60.0 km/h at km 5.00 from 36.0 km/h');
  // 5 m/s is 18.0 km/h or 11.2 mph.
  expect(words).toContain('18.0 km/h below');
  expect(holdAnswer(viewOf(view.result, 'mph'), named('pi-firm'))).toContain('11.2 mph below');
});

test('the opening sentence tells it, and says nothing of a hold that was on all the way', () => {
  expect(answerOf(view).sentence).toContain('hold is on for ');
  expect(answerOf(view).sentence).toContain(' of the time with hold on');
  expect(answerOf(viewOf(plain, 'kmh')).sentence).not.toContain('hold is on');
  expect(asksOfHold(plain)).toBe(false);
  expect(asksOfHold(view.result)).toBe(true);
});

test('all of the time is said only of a hold that was on all the time', () => {
  // Off for 1.6 s.
  const brief = FIRM_EVENTS.slice(-2).map((event, i) => ({ ...event, time: 400 + 1.6 * i }));
  const candidate = named('pi-firm');
  const result = { ...candidate.result, holdEvents: brief, endTime: 2000 };
  // 1.6 s of 2000 s are 0.08 %.
  expect(holdClause(view, { ...candidate, result })).toMatch(
    /^hold is on for 99\.9\u00a0% of the time, it ends once, by a rule/,
  );
  expect(holdClause(view, { ...candidate, result: { ...result, endTime: 100_000 } })).toMatch(
    / 99\.998\u00a0% /,
  );
});

test('the same event of all candidates is one moment, an override is from grip to grip', () => {
  const ends = momentsOf(view.result.transients, 'ended');
  expect(ends.map(({ distance, measures }) => [distance, measures.length])).toEqual([
    [4000, 2],
    [8000, 1],
  ]);
  expect(momentsOf(view.result.transients, 'resumed').map(({ measures }) => measures.length)).toEqual([2, 1]);
  expect(shownMoments(view, 'ended')).toHaveLength(2);
  expect(shownMoments(view, 'tapped')).toEqual([]);
  expect(overridesOf(named('pi-firm').result)).toEqual([{ from: 6000, to: 6200 }]);
  const open = { holdEvents: [...named('pi-firm').result.holdEvents!].slice(0, 3), endDistance: 6100 };
  expect(overridesOf(open)).toEqual([{ from: 6000, to: 6100 }]);
});
