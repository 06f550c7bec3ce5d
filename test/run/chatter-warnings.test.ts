import { expect, test } from 'vitest';
import { runCase } from '../../src/run/run-case.ts';

/** The warning of this code on 2 km of level road at 60 km/h, under such a gain [% per km/h] and sensor. */
function messageOf(code: string, kp: number, sensor: object): string | undefined {
  const text = JSON.stringify({
    track: { profile: [{ length_m: 2000, grade_pct: 0 }] },
    vehicle: {
      mass: { kerb_kg: 125, rider_kg: 75 },
      road_load: { cda_m2: 0.58, crr: 0.014 },
      drive: { kind: 'force', peak_force_n: 400, closed_throttle_force_n: 40, lag_s: 0.15 },
      speed_sensor: sensor,
    },
    hold: { set_speed_kmh: 60 },
    candidates: [{ name: 'pi', kind: 'pi', kp_pct_per_kmh: kp, ti_s: 8 }],
  });
  const { warnings } = runCase({ file: 'case.json', read: () => new TextEncoder().encode(text) });
  return warnings.find((one) => one.code === code)?.message;
}

test('a throttle that jumps with each pulse is told, in the step of the sensor and its own', () => {
  // 48 pulses a turn of 1.92 m are 40 mm each; one more in 0.1 s is 0.4 m/s, 1.44 km/h.
  const sensor = { pulses_per_turn: 48, wheel_circumference_m: 1.92, counting_window_s: 0.1 };
  const told = (kp: number, wheel: object = sensor) => messageOf('throttle-chatters', kp, wheel);
  // 3.4 and 3.5 % per km/h are 4.9 and 5.04 % a pulse.
  expect(told(3.4)).toBeUndefined();
  expect(told(3.5)).toContain('each step of the speed sensor (1.44 km/h) moves it by 5.0 %');
  // A tick of 0.1 ms in the 2.4 ms of a pulse at 60 km/h is 2.5 km/h; one of 4 us is 0.1 km/h.
  const timed = (clock: number) => ({
    pulses_per_turn: 48,
    wheel_circumference_m: 1.92,
    timer_resolution_s: clock,
  });
  expect(told(3.6, timed(1e-4))).toContain('(2.50 km/h) moves it by 9.0 %');
  expect(told(3.5, timed(4e-6))).toBeUndefined();
});

test('a throttle that is never still is told, with its travel', () => {
  const told = (kp: number) =>
    messageOf('throttle-travels', kp, {
      pulses_per_turn: 24,
      wheel_circumference_m: 1.92,
      counting_window_s: 0.1,
    });
  expect(told(30)).toMatch(/it travels \d{4,} % a kilometre; more than 1000 %/);
  expect(told(0.1)).toBeUndefined();
});
