import { expect, test } from 'vitest';
import { actuatorWords, sensorWords } from '../../../src/report/model/chain-words.ts';
import { SPEED_UNITS } from '../../../src/report/quantity.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../../src/vehicle/ideal.ts';

const plain = (text: string): string => text.replaceAll('\u00a0', ' ');
const { kmh, mph } = SPEED_UNITS;

test('an actuator is told in the order of its signal, an ideal one as such', () => {
  expect(actuatorWords(IDEAL_ACTUATOR)).toBe('ideal: the throttle is the command');
  const words = actuatorWords({
    deadTime: 0.0125,
    resolution: 0.005,
    travel: { least: 0.01, greatest: 0.975 },
    lag: 0.06,
    rateLimit: 4,
    slack: 0.03,
  });
  expect(plain(words)).toBe(
    'dead time 12.5 ms, then steps of 0.5 %, then end stops at 1 % and 97.5 %, then time constant 60 ms, then at most 400 %/s, then slack 3 %',
  );
});

test('a counting sensor tells its step: one pulse in its window', () => {
  expect(sensorWords(IDEAL_SENSOR, kmh)).toBe('ideal: the measured speed is the true speed');
  // 1.92 m over 48 pulses are 40 mm; in 100 ms that is 0.4 m/s = 1.44 km/h = 0.895 mph.
  const counted = { spacing: 0.04, reading: { kind: 'counted', window: 0.1 } } as const;
  const sensor = { ...IDEAL_SENSOR, pulses: counted, scaleError: -0.02, delay: 0.03 };
  expect(plain(sensorWords(sensor, kmh))).toBe(
    'a pulse every 40 mm of way, counted over 100 ms (steps of 1.4 km/h), then 2 % too little, then delay 30 ms',
  );
  expect(plain(sensorWords(sensor, mph))).toContain('steps of 0.89 mph');
  const timed = { spacing: 0.04, reading: { kind: 'timed', clock: 2e-6 } } as const;
  expect(plain(sensorWords({ ...IDEAL_SENSOR, pulses: timed }, kmh))).toBe(
    'a pulse every 40 mm of way, the last interval timed to 2.0 µs',
  );
});
