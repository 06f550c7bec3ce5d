import { describe, expect, it } from 'vitest';
import type { SpeedTrace } from '../../src/loop/trace-speeds.ts';
import { seededStream } from '../../src/numeric/random.ts';
import { oscillationsIn } from '../../src/study/cycle-shape.ts';
import { turningsOf } from '../../src/study/cycle-swings.ts';
import { expectClose } from '../compare.ts';

/** A minute and more of speeds at 50 Hz about 20 m/s. */
function traceOf(error: (t: number) => number, length = 80): SpeedTrace {
  const time = Float64Array.from({ length: 50 * length }, (_, i) => i / 50);
  return {
    size: time.length,
    time,
    distance: time.map((t) => 20 * t),
    setSpeed: time.map(() => 20),
    speed: time.map((t) => 20 + error(t)),
  };
}
const wave = (period: number, amplitude: number) => (t: number) =>
  amplitude * Math.sin((2 * Math.PI * t) / period);
/** Seeded, so that each property is one and the same on every run. */
const stream = seededStream(11);
const between = (low: number, high: number): number => low + (high - low) * stream.uniform();

describe('an oscillation', () => {
  it('has the period, amplitude and turns of the sine that it is, with drift and noise as well', () => {
    for (let k = 0; k < 40; k++) {
      const period = between(2.2, 15);
      const amplitude = between(0.2, 2);
      const noise = 0.05 * amplitude;
      const drift = 0.004 * amplitude;
      const error = wave(period, amplitude);
      const [seen, ...more] = oscillationsIn(
        traceOf((t) => error(t) + drift * t + noise * stream.normal()),
        0.15,
      );
      expect(more).toEqual([]);
      expectClose(seen!.period, period, 0.02 * period);
      // Extremes are those of means over a tenth of a second, with what noise is left in them.
      expectClose(seen!.amplitude, amplitude, 0.12 * amplitude);
      expectClose(seen!.turns, 80 / period, 1.2);
    }
  });

  it('begins and ends where the signal does', () => {
    const error = wave(5, 1);
    const [seen] = oscillationsIn(
      traceOf((t) => (t > 20 && t < 60 ? error(t) : 0)),
      0.15,
    );
    expectClose([seen!.from, seen!.to], [400, 1200], 60);
  });

  it('is none below the amplitude, of fewer than four turns, too fast or too slow', () => {
    expect(oscillationsIn(traceOf(wave(5, 0.14)), 0.15)).toEqual([]);
    expect(
      oscillationsIn(
        traceOf((t) => (t < 17 ? wave(5, 1)(t) : 0)),
        0.15,
      ),
    ).toEqual([]);
    expect(oscillationsIn(traceOf(wave(1.5, 1)), 0.15)).toEqual([]);
    expect(oscillationsIn(traceOf(wave(30, 1), 300), 0.15)).toEqual([]);
  });

  it('is none that does not repeat itself', () => {
    // Steps to either side, held for times that follow no pattern.
    let until = 0;
    let side = 1;
    const error = (t: number): number => {
      if (t >= until) {
        side = -side;
        until = t + (stream.uniform() < 0.5 ? between(0.6, 1.2) : between(5, 11));
      }
      return side;
    };
    expect(oscillationsIn(traceOf(error, 200), 0.15)).toEqual([]);
  });
});

describe('turning points', () => {
  const of = (...values: number[]) => turningsOf(Float64Array.from(values), Float64Array.from(values), 1);

  it('are peaks and troughs in turn, ripples passed over', () => {
    expect(of(0, 2, 1.5, 3, 0, 0.5, -1, 4).map(({ value }) => value)).toEqual([0, 3, -1]);
    expect(of(0, 0.5, 0, 0.5)).toEqual([]);
    expect(of()).toEqual([]);
  });

  it('of bins are those of the extremes in them', () => {
    const low = Float64Array.of(0, 0, -2, -2, 1.5);
    const high = Float64Array.of(0, 3, 1, -1, 2);
    expect(turningsOf(low, high, 1)).toEqual([
      { at: 1, value: 0 },
      { at: 1, value: 3 },
      { at: 3, value: -2 },
    ]);
  });
});
