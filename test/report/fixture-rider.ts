// What a rider and a unit with rules made of an invented result: events, transients and bends written by hand.
import type { HoldEvent } from '../../src/loop/result.ts';
import type { RunResult } from '../../src/run/run-result.ts';
import type { HoldMeasure, HoldTransient } from '../../src/study/hold-transient.ts';
import { seriesOf } from '../study/series-of.ts';

const SET = 60 / 3.6;

const event = (
  km: number,
  kind: HoldEvent['kind'],
  cause: HoldEvent['cause'] = 'rider',
  measured = SET,
): HoldEvent => ({
  time: (1000 * km) / 20,
  distance: 1000 * km,
  kind,
  cause,
  setSpeed: SET,
  measured,
  command: 0.25,
});

/** Of `pi-firm`: off from 4 to 5 km for a bend and from 8 to 8.5 km by a rule, overridden from 6 to 6.2 km. */
export const FIRM_EVENTS: readonly HoldEvent[] = [
  event(4, 'ended', 'bend'),
  event(5, 'resumed', 'bend', 10),
  event(6, 'override_began'),
  event(6.2, 'override_ended', 'rider', 20),
  event(6.3, 'reentered', 'rider', 17),
  event(8, 'ended', 'too_slow', 11),
  event(8.5, 'resumed', 'rider', 12),
];
/** Of `pi-soft`: the same bend, some metres further; nothing else. */
export const SOFT_EVENTS: readonly HoldEvent[] = [
  event(4.01, 'ended', 'bend'),
  event(5.02, 'resumed', 'bend', 10),
];

const measure = (candidate: string, of: HoldEvent, figures: Partial<HoldMeasure> = {}): HoldMeasure => ({
  candidate,
  event: of,
  commandStep: 0.02,
  lowest: -1,
  highest: 0.5,
  settling: 7,
  jerk: 1.5,
  ...figures,
});
const OFF = { none: 'hold is off' };
const ended = { lowest: OFF, highest: OFF, settling: OFF };
const CUT = { settling: { none: 'what came next on the way came first' } };

export const MEASURES: readonly HoldMeasure[] = [
  measure('pi-firm', FIRM_EVENTS[0]!, ended),
  measure('pi-firm', FIRM_EVENTS[1]!, { lowest: -5, settling: 31.4 }),
  measure('pi-firm', FIRM_EVENTS[3]!),
  measure('pi-firm', FIRM_EVENTS[5]!, ended),
  measure('pi-firm', FIRM_EVENTS[6]!, CUT),
  measure('pi-soft', SOFT_EVENTS[0]!, ended),
  measure('pi-soft', SOFT_EVENTS[1]!),
];

function shown(one: HoldMeasure): HoldTransient {
  const series = seriesOf(
    20,
    (t) => -Math.exp(-t / 5),
    (t) => (t < 5 ? 32 : 0),
  );
  const shift = one.event.time - 5;
  const picture = { ...series, reference: series.setSpeed, time: series.time.map((t) => t + shift) };
  return { ...one, words: `${one.candidate}, in words.`, picture };
}

const bend = (from: number, side: 'left' | 'right', radius: number) => ({
  from,
  to: from + 80,
  curvature: 1 / radius,
  side,
  sharpestAt: from + 40,
  speed: Math.sqrt(2.5 * radius),
});

/** The result as a rider who brakes for bends made it. */
export function withRider(result: RunResult): RunResult {
  const events = new Map([
    ['pi-firm', FIRM_EVENTS],
    ['pi-soft', SOFT_EVENTS],
  ]);
  return {
    ...result,
    candidates: result.candidates.map((candidate) => ({
      ...candidate,
      result: { ...candidate.result, holdEvents: events.get(candidate.name) ?? [] },
    })),
    supervisor: {
      lowestSpeed: 35 / 3.6,
      tooSlow: { by: 20 / 3.6, for: 1 },
      tooFast: null,
      believable: 25,
      resumeRamp: 0.7,
      tap: 1 / 3.6,
      tapRamp: null,
      override: { integral: 'runs', reentry: 1.5 / 3.6 },
    },
    faults: [{ at: { distance: 7000 }, shows: 'nothing', for: 2 }],
    rider: { ...result.rider, acts: [], resumesAfter: 10 },
    bends: {
      riding: { maxLateral: 2.5, deceleration: 2, resumesAfter: 2, shortestHold: 20 },
      resolution: 30,
      bends: [bend(4100, 'left', 50), bend(4700, 'right', 40)],
      stops: [{ from: 4000, to: 5000, first: 0, last: 1, speeds: [11, 10], gainsFrom: null, resumes: true }],
      unfit: [{ from: 4000, to: 5000, reason: 'bends_follow', bends: 2, lowestSpeed: 10 }],
      written: [],
    },
    transients: { shown: MEASURES.map(shown), measures: MEASURES, leftOut: [] },
  };
}
