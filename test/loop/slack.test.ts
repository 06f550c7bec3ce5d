import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { actuatorStep } from '../../src/loop/actuator-step.ts';
import * as at from '../../src/loop/layout.ts';
import { replay } from '../../src/loop/replay.ts';
import { expectClose } from '../compare.ts';
import { planOver } from './scenes.ts';
import { engine, hills, switching } from './switching-scenes.ts';

interface Motion {
  readonly ta: number;
  readonly td: number;
  readonly rate: number;
  readonly play: number;
  readonly step: number;
}

function parameters({ ta, td, rate, play, step }: Motion): Float64Array {
  const p = new Float64Array(at.P_SIZE);
  p[at.P_STEP] = step;
  p[at.P_ACTUATOR_LAG] = ta;
  p[at.P_DRIVE_LAG] = td;
  p[at.P_RATE] = rate;
  p[at.P_RATE_GAP] = rate === Number.POSITIVE_INFINITY ? rate : rate * ta;
  p[at.P_LAG_WEIGHT] = ta === 0 ? 0 : ta / (ta - td);
  p[at.P_PLAY] = play;
  return p;
}

/** The play operator as it is printed (Brokate and Sprekels, Hysteresis and Phase Transitions, 2.1; place from memory). */
const playOf = (out: number, input: number, play: number): number =>
  Math.max(input - play, Math.min(input + play, out));

describe('the play operator', () => {
  test('under a sine: output amplitude less by half the slack, a dead zone of all of it at each end', () => {
    const play = 0.05;
    const p = parameters({ ta: 0, td: 0, rate: Number.POSITIVE_INFINITY, play, step: 0.02 });
    const lags = new Float64Array(at.G_SIZE);
    let y = 0;
    let plate = 0;
    let x = 0;
    for (let k = 1; k <= 4000; k++) {
      const u = 0.3 * Math.sin((2 * Math.PI * k) / 1000);
      actuatorStep(p, lags, u, x, y, plate);
      y = lags[at.G_MOVED_ACTUATOR]!;
      plate = lags[at.G_MOVED_PLATE]!;
      x = lags[at.G_MOVED_DRIVE]!;
      expectClose(y, u, 1e-15);
      expectClose(x, plate, 1e-15);
      // The major loop, from the first crest on: up u - play, down u + play, flat at the ends.
      const turn = k % 1000;
      if (k <= 250) continue;
      const falls = turn >= 250 && turn < 750;
      const closed = falls ? Math.min(0.25, u + play) : Math.max(-0.25, u - play);
      expectClose(plate, closed, 1e-14);
    }
  });

  test('in closed form behind lags and a rate limit is that of small steps', () => {
    const share = fc.double({ min: 0, max: 1, noNaN: true });
    fc.assert(
      fc.property(
        share,
        share,
        share,
        share,
        fc.double({ min: 0.01, max: 0.2, noNaN: true }),
        fc.constantFrom(0, 0.05, 0.21),
        fc.constantFrom(0.3, 5, Number.POSITIVE_INFINITY),
        fc.double({ min: 0, max: 0.1, noNaN: true }),
        (u, y0, inside, x0, ta, td, rate, play) => {
          const motion = { ta, td, rate, play, step: 0.02 };
          const plate0 = y0 + (2 * inside - 1) * play;
          const start = td === 0 ? plate0 : x0;
          const lags = new Float64Array(at.G_SIZE);
          actuatorStep(parameters(motion), lags, u, start, y0, plate0);
          const count = 4000;
          const h = motion.step / count;
          let [y, plate, x, sum] = [y0, plate0, start, 0];
          for (let k = 0; k < count; k++) {
            const lagged = (u - y) * (1 - Math.exp(-h / ta));
            const next = y + Math.min(rate * h, Math.max(-rate * h, lagged));
            const moved = playOf(plate, next, play);
            const middle = 0.5 * (plate + moved);
            const held = td === 0 ? moved : middle + (x - middle) * Math.exp(-h / td);
            sum += 0.5 * (x + held);
            [y, plate, x] = [next, moved, held];
          }
          expectClose(lags[at.G_MOVED_ACTUATOR]!, y, 2e-7);
          expectClose(lags[at.G_MOVED_PLATE]!, plate, 2e-7);
          expectClose(lags[at.G_MOVED_DRIVE]!, x, 2e-6);
          expectClose(lags[at.G_MOVED_MEAN]!, sum / count, 2e-6);
        },
      ),
      { numRuns: 150, seed: 5 },
    );
  });
});

describe.each(['exact', 'fast'] as const)('an actuator without a lag (%s)', (scheme) => {
  const seen = (actuator: Parameters<typeof switching>[1]) =>
    replay(planOver(hills, switching(engine(0), { lag: 0, ...actuator }), { scheme }), { settledAt: 0 }, 1200)
      .series;
  const limited = (command: number): number => Math.min(1, Math.max(0, command));

  test('with slack moves the throttle by the printed operator, sample by sample', () => {
    const { size, command, actuator } = seen({ slack: 0.04 });
    let plate = actuator[0]!;
    let rested = 0;
    for (let k = 1; k < size; k++) {
      const next = playOf(plate, limited(command[k]!), 0.02);
      expectClose(actuator[k]!, next, 1e-15);
      if (next === plate) rested++;
      plate = next;
    }
    expect(rested).toBeGreaterThan(50);
  });

  test('rounds the command to whole steps, halves up, and stays between its end stops', () => {
    const { size, command, actuator } = seen({
      resolution: 1 / 64,
      travel: { least: 1 / 16, greatest: 0.25 },
    });
    let stopped = 0;
    for (let k = 0; k < size; k++) {
      const steps = Math.floor(limited(command[k]!) * 64 + 0.5);
      const expected = Math.min(0.25, Math.max(1 / 16, steps / 64));
      expect(actuator[k]).toBe(expected);
      if (expected === 1 / 16) stopped++;
    }
    expect(stopped).toBeGreaterThan(10);
  });
});
