import { describe, expect, it } from 'vitest';
import type { FullSeries, HoldEvent, HoldEventKind } from '../../src/loop/result.ts';
import { measureTransient } from '../../src/study/measure-transient.ts';
import { expectClose } from '../compare.ts';
import { seriesOf } from './series-of.ts';

/** The event at 5 s, 100 m on, at a set speed of 20 m/s. */
const event = (kind: HoldEventKind, time = 5): HoldEvent => ({
  time,
  distance: 20 * time,
  kind,
  cause: 'rider',
  setSpeed: 20,
  measured: 20,
  command: 0.3,
});

interface Course {
  readonly error: (t: number) => number;
  readonly reference?: (t: number) => number;
  readonly acceleration?: (t: number) => number;
  readonly command?: (t: number) => number;
}

/** A minute, ten samples a second; times count from the event. */
function course({
  error,
  reference = () => 20,
  acceleration = () => 0,
  command = () => 0.3,
}: Course): FullSeries {
  const series = seriesOf(
    65,
    (t) => error(t - 5),
    () => 0,
  );
  const column = (of: (t: number) => number) => series.time.map((t) => of(t - 5));
  return {
    ...series,
    reference: column(reference),
    acceleration: column(acceleration),
    command: column(command),
  };
}

function measure(series: FullSeries, events: readonly HoldEvent[], longest = 60) {
  return measureTransient(series, {
    candidate: 'pi',
    range: { least: 0, greatest: 1 },
    events,
    at: 0,
    longest,
    never: 'it was not within 1 km/h for 3 s in a minute',
    unsettled: 'the road came first',
  }).measure;
}

describe('a transient', () => {
  it('sags, comes back as an exponential does, and settles when that says', () => {
    // e = -2 exp(-t / 4 s) is within 1 km/h from 4 s ln(2 x 3.6) = 7.896 s on: the sample at 7.9 s.
    const found = measure(course({ error: (t) => (t < 0 ? 0 : -2 * Math.exp(-t / 4)) }), [event('engaged')]);
    expectClose(found.settling as number, 7.9, 1e-9);
    expectClose(found.lowest as number, -2, 1e-9);
    expect(found.highest).toBe(0);
  });

  it('takes the step of the command from the sample before to that of the event, within its limits', () => {
    const step = (command: (t: number) => number) =>
      measure(course({ error: () => 0, command }), [event('engaged')]).commandStep;
    expectClose(step((t) => (t < 0 ? 0.3 : 0.37)) as number, 0.07, 1e-12);
    expectClose(step((t) => (t < 0 ? 0.3 : -0.4)) as number, 0.3, 1e-12);
    expectClose(step((t) => (t < 0 ? 0.3 : 2)) as number, 0.7, 1e-12);
    expectClose(step((t) => (t <= 0 ? 0.3 : 0.9)) as number, 0, 1e-12);
  });

  it('counts a resume from where the reference has arrived at the set speed', () => {
    const error = (t: number): number => (t < 10 ? t - 10 : t < 12 ? 0.8 : 0);
    const reference = (t: number): number => 20 + Math.min(0, t - 10);
    const found = measure(course({ error, reference }), [event('resumed')]);
    expectClose([found.lowest as number, found.highest as number], [0, 0.8], 1e-9);
    // Within 1 km/h for less than a second before the overshoot, and again from 12 s on.
    expectClose(found.settling as number, 12, 1e-9);
    const never = measure(course({ error, reference: () => 19 }), [event('resumed')]);
    expect(never.lowest).toHaveProperty('none');
  });

  it('counts taps from where the speed has reached the new set speed', () => {
    const overshoots = (t: number): number =>
      t < 0 ? 0 : t < 4 ? -2 + t / 2 : t < 6 ? 0.6 : t < 8 ? -0.2 : 0;
    const found = measure(course({ error: overshoots }), [event('tapped')]);
    expectClose([found.lowest as number, found.highest as number], [-0.2, 0.6], 1e-9);
    const creeps = measure(course({ error: (t) => (t < 0 ? 0 : -2 * Math.exp(-t)) }), [event('tapped')]);
    expect(creeps.lowest).toHaveProperty('none');
    // exp(-t) from 1 / 7.2 on: after 1.97 s.
    expectClose(creeps.settling as number, 2, 1e-9);
  });

  it('counts an override from where hold is back, and its step there', () => {
    const error = (t: number): number => (t < 3 ? 4 - t : t < 6 ? -0.5 : 0);
    const command = (t: number): number => (t < 3 ? 0.3 : 0.26);
    const events = [event('override_ended'), event('reentered', 8)];
    const found = measure(course({ error, command }), events);
    expectClose([found.lowest as number, found.highest as number], [-0.5, 0], 1e-9);
    expectClose(found.commandStep as number, 0.04, 1e-12);
    expectClose(found.settling as number, 6, 1e-9);
    const lost = measure(course({ error, command }), [event('override_ended'), event('ended', 8)]);
    expect(lost.commandStep).toHaveProperty('none');
    expect(lost.highest).toHaveProperty('none');
  });

  it('takes the jerk over 0.2 s', () => {
    // a = t^2 / 2 until 3 s, then still: over the last 0.2 s (4.5 - 3.92) / 0.2.
    const acceleration = (t: number): number => (t < 0 ? 0 : Math.min(t, 3) ** 2 / 2);
    expectClose(
      measure(course({ error: () => -1, acceleration }), [event('tapped')]).jerk as number,
      2.9,
      1e-9,
    );
    const sudden = (t: number): number => (t < 0 ? 0 : -2);
    expectClose(
      measure(course({ error: () => 0, acceleration: sudden }), [event('ended')]).jerk as number,
      10,
      1e-9,
    );
  });

  it('has no jerk where the rider brakes, and that of a rule or of a grip let go', () => {
    const acceleration = (t: number): number => (t < 0 ? 0 : -4);
    const jerk = (cause: HoldEvent['cause']) =>
      measure(course({ error: () => 0, acceleration }), [{ ...event('ended'), cause }], 10).jerk;
    for (const cause of ['brake', 'bend'] as const)
      expect(jerk(cause)).toEqual({ none: "the rider's brake" });
    for (const cause of ['rider', 'too_slow', 'clutch'] as const)
      expectClose(jerk(cause) as number, 20, 1e-9);
  });

  it('tells a slow, lightly damped loop that passes through the band by how far it goes on', () => {
    // e = -4 exp(-t / 40 s) cos(2 pi t / 48 s) m/s: within 1 km/h from 11.4 s to 12.7 s and longer at later passages,
    // highest near 24 s. tan(w t) = -1 / (40 s w) at the extreme: 22.56 s.
    const w = (2 * Math.PI) / 48;
    const error = (t: number): number => (t < 0 ? 0 : -4 * Math.exp(-t / 40) * Math.cos(w * t));
    const found = measure(course({ error }), [event('resumed')], 55);
    const extreme = (Math.PI - Math.atan(1 / (40 * w))) / w;
    expectClose(found.highest as number, error(extreme), 1e-3);
    // A passage of more than 3 s through the band, and then 5.6 km/h above: the extremes go on behind it.
    const passes = (t: number): number =>
      t < 0 ? 0 : t < 10 ? -2 : t < 14 ? -0.2 : t < 40 ? 5.6 / 3.6 : 0.2;
    const slow = measure(course({ error: passes }), [event('resumed')]);
    expectClose(slow.highest as number, 5.6 / 3.6, 1e-9);
    expectClose(slow.settling as number, 10, 1e-9);
  });

  it('has no settling that began later than it is followed, though the series goes on', () => {
    const late = course({ error: (t) => (t < 30 ? -1 : 0) });
    const never = { none: 'it was not within 1 km/h for 3 s in a minute' };
    expectClose(measure(late, [event('resumed')], 30).settling as number, 30, 1e-9);
    expect(measure(late, [event('resumed')], 29).settling).toEqual(never);
  });

  it('has no settling where it was not seen, and says why', () => {
    expect(measure(course({ error: () => -1 }), [event('engaged')]).settling).toEqual({
      none: 'the road came first',
    });
    expect(measure(course({ error: () => 0 }), [event('ended')])).toMatchObject({
      settling: { none: 'hold is off' },
      lowest: { none: 'hold is off' },
    });
  });

  it('has no figure that is no number, however short its window', () => {
    for (const kind of ['engaged', 'resumed', 'tapped', 'override_ended', 'ended'] as const)
      for (const size of [0, 1, 2, 50, 51, 53]) {
        const whole = course({ error: () => -1 });
        const columns = Object.entries(whole).map(([name, column]) => [
          name,
          typeof column === 'number' ? size : column.slice(0, size),
        ]);
        const found = measure(Object.fromEntries(columns) as FullSeries, [event(kind)]);
        for (const figure of [found.commandStep, found.lowest, found.highest, found.settling, found.jerk])
          if (typeof figure === 'number') expect(figure).not.toBeNaN();
          else expect(figure.none).not.toBe('');
      }
  });
});
