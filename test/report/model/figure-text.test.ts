import { expect, it } from 'vitest';
import { figureText, figureTextBeside, marginText } from '../../../src/report/model/figure-text.ts';
import { SPEED_UNITS } from '../../../src/report/quantity.ts';

const { kmh } = SPEED_UNITS;
const plain = (text: string) => text.replace(/\u00a0/g, ' ');

it('a figure that rounding would set on its limit has as many digits as tell the two apart', () => {
  expect(plain(figureTextBeside(2.04, [2], 'km/h', kmh))).toBe('2.04 km/h');
  expect(plain(figureTextBeside(1.998, [2], 'km/h', kmh))).toBe('1.998 km/h');
  expect(plain(figureTextBeside(2, [2], 'km/h', kmh))).toBe('2.0 km/h');
  expect(plain(figureTextBeside(2.34, [2], 'km/h', kmh))).toBe('2.3 km/h');
  expect(plain(figureTextBeside(94.98, [95], '%', kmh))).toBe('94.98 %');
  expect(plain(figureTextBeside(20.2, [20], 's', kmh))).toBe('20.2 s');
});

it('a margin between shares is told in points', () => {
  expect(plain(marginText(4.9, '%', kmh))).toBe('+4.9 points');
  expect(plain(marginText(-4.21, 'km/h', kmh))).toBe('\u22124.2 km/h');
});

it('integrals of the error are told in the unit of the speed, once or squared', () => {
  const { mph } = SPEED_UNITS;
  // 1.609344 km/h are 1 mph.
  expect(plain(figureText(160.9344, 'km/h·s', mph))).toBe('100 mph·s');
  expect(plain(figureText(160.9344 * 1.609344, '(km/h)²·s', mph))).toBe('100 mph²·s');
  expect(plain(figureText(16.09344, 'km/h·s²', mph))).toBe('10.0 mph·s²');
  expect(plain(figureText(250, '(km/h)²·s', kmh))).toBe('250 (km/h)²·s');
});

it('a count is a whole number of things, and one is one thing', () => {
  expect(plain(figureText(0, 'events', kmh))).toBe('0 events');
  expect(plain(figureText(1, 'events', kmh))).toBe('1 event');
  expect(plain(figureTextBeside(3, [2], 'shifts', kmh))).toBe('3 shifts');
  expect(plain(marginText(-1, 'shifts', kmh))).toBe('\u22121 shift');
});
