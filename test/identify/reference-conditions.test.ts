import { describe, expect, test } from 'vitest';
import { airOfWeather, formAtReference } from '../../src/identify/reference-conditions.ts';
import { expectClose } from '../compare.ts';

const exact = (value: number) => ({
  value,
  standardError: 0.01 * value,
  low: value - 0.1 * Math.abs(value),
  high: value + 0.1 * Math.abs(value),
});

describe('reference conditions', () => {
  test('correct as UN GTR No. 2, annex 7, does: 22.0 N and 0.0238 N/(km/h)2 at 278.15 K and 102 kPa', () => {
    // f0* = 22 (1 + 0.006 (278.15 - 293)) = 20.040 N and f2* = 0.0238 (278.15 / 293) (100 / 102) = 0.022151 N/(km/h)2:
    // formulas of the annex from memory, figures worked out outside of the program.
    const form = { f0: exact(22), f1: null, f2: exact(0.0238), airDensity: 1.278 };
    const at = formAtReference(form, airOfWeather(278.15, 102_000));
    expectClose(at.f0.value, 20.04, 0.0005);
    expectClose(at.f2.value, 0.022151, 5e-7);
    expectClose(at.f2.standardError / at.f2.value, 0.01, 1e-12);
    // dry air at 293 K and 100 kPa
    expectClose(at.airDensity, 1.189, 0.0005);
  });

  test('correct a third term as the first: at 278.15 K both are 0.9109 of what they were', () => {
    const form = { f0: exact(22), f1: exact(-0.05), f2: exact(0.0238), airDensity: 1.278 };
    const at = formAtReference(form, airOfWeather(278.15, 102_000));
    expectClose(at.f1!.value, -0.045545, 5e-7);
    expectClose(at.f0.value, 20.04, 0.0005);
    expect(at.f1!.low).toBeLessThan(at.f1!.value);
  });

  test('leave the rolling resistance where the temperature is not known', () => {
    const form = { f0: exact(22), f1: exact(0.1), f2: exact(0.024), airDensity: 1.25 };
    const at = formAtReference(form, { temperature: null, pressure: null, density: 1.25 });
    expect(at.f0).toEqual(form.f0);
    expect(at.f1).toEqual(form.f1);
    expectClose(at.f2.value, (0.024 * 1.189) / 1.25, 1e-5);
  });
});
