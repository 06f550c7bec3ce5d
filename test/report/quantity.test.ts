import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  digitsFor,
  fixed,
  SPEED_UNITS,
  signed,
  significant,
  speedText,
  timeText,
  trimmed,
} from '../../src/report/quantity.ts';

describe('numbers for people', () => {
  it('have a true minus sign, and none before nothing', () => {
    expect(fixed(-3.1449, 2)).toBe('\u22123.14');
    expect(fixed(-0.004, 2)).toBe('0.00');
    expect(signed(0.26, 1)).toBe('+0.3');
    expect(signed(0.04, 1)).toBe('0.0');
  });

  it('are grouped by thin spaces from five digits on', () => {
    expect(fixed(1234)).toBe('1234');
    expect(fixed(-1234567.5, 1)).toBe('\u22121\u202f234\u202f567.5');
  });

  it('are a dash where there is no number', () => {
    expect(fixed(Number.NaN)).toBe('\u2013');
    expect(timeText(Number.POSITIVE_INFINITY)).toBe('\u2013');
  });

  it('keep the asked number of significant digits', () => {
    expect(significant(0.012345)).toBe('0.0123');
    expect(significant(7.0049)).toBe('7.00');
    expect(significant(123.4)).toBe('123');
    expect(digitsFor(0, 3)).toBe(0);
    fc.assert(
      fc.property(fc.double({ min: 1e-4, max: 1e4, noNaN: true }), (value) => {
        const read = Number(significant(value, 3).replace(/\u202f/g, ''));
        expect(Math.abs(read - value)).toBeLessThanOrEqual(Math.max(0.5, value * 0.005 + 5e-7));
      }),
      { seed: 3 },
    );
  });

  it('drop zeros that say nothing', () => {
    expect(trimmed(2, 1)).toBe('2');
    expect(trimmed(2.5, 1)).toBe('2.5');
    expect(trimmed(100, 1)).toBe('100');
  });
});

describe('speeds and times', () => {
  it('are in km/h or mph: 26.8224 m/s is 60 mph (international mile, 1609.344 m)', () => {
    expect(speedText(26.8224, SPEED_UNITS.mph)).toBe('60.0\u00a0mph');
    expect(speedText(25, SPEED_UNITS.kmh, 0)).toBe('90\u00a0km/h');
  });

  it('count seconds, then minutes, then hours', () => {
    expect(timeText(9.84)).toBe('9.8\u00a0s');
    expect(timeText(119)).toBe('119\u00a0s');
    expect(timeText(1621)).toBe('27\u00a0min 1\u00a0s');
    expect(timeText(3599.7)).toBe('1\u00a0h 0\u00a0min');
    expect(timeText(7260)).toBe('2\u00a0h 1\u00a0min');
  });
});
