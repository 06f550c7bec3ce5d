import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  BITE_INCREMENT_LOST,
  BITE_INTEGRAL_CAP,
  BITE_OVERFLOW,
  BITE_SIGN_TEST,
} from '../../src/control/bites.ts';
import { integerGains } from '../../src/control/integer-gains.ts';
import { saturateTo, scaleDown, wrappedProduct, wrapTo } from '../../src/control/whole-numbers.ts';
import { expectClose } from '../compare.ts';
import { plainInteger, play } from './players.ts';

/** Counts of a command; full throttle has 1000. */
const counts = (values: readonly number[]): number[] => values.map((u) => Math.round(u * 1000));

describe('words', () => {
  // By hand: 8 bits hold -128 to 127. 200 - 256 = -56; 128 -> -128; -129 -> 127; 1000 = 3 256 + 232 -> -24.
  test('wrap around as two’s complement, or stay at their ends', () => {
    expect([200, 128, -129, 1000, 127, -128].map((x) => wrapTo(x, 8))).toEqual([
      -56, -128, 127, -24, 127, -128,
    ]);
    expect([200, -129, 5].map((x) => saturateTo(x, 8))).toEqual([127, -128, 5]);
  });

  // By hand, divisor 4:  value   -7  -6  -5  -4  -3  -2  -1   0   1   2   3   5   7
  //   shift (floor)             -2  -2  -2  -1  -1  -1  -1   0   0   0   0   1   1
  //   division (towards 0)      -1  -1  -1  -1   0   0   0   0   0   0   0   1   1
  test('are scaled down as a shift or a division does', () => {
    const values = [-7, -6, -5, -4, -3, -2, -1, 0, 1, 2, 3, 5, 7];
    expect(values.map((x) => scaleDown(x, 4, true))).toEqual([-2, -2, -2, -1, -1, -1, -1, 0, 0, 0, 0, 1, 1]);
    expect(values.map((x) => scaleDown(x, 4, false))).toEqual([-1, -1, -1, -1, 0, 0, 0, 0, 0, 0, 0, 1, 1]);
  });

  test('have the arithmetic of whole numbers of any length', () => {
    const word = fc.integer({ min: -(2 ** 31), max: 2 ** 31 - 1 });
    fc.assert(
      fc.property(word, word, fc.integer({ min: 32, max: 48 }), (a, b, bits) => {
        expect(wrappedProduct(a, b, bits)).toBe(Number(BigInt.asIntN(bits, BigInt(a) * BigInt(b))));
      }),
      { seed: 9, numRuns: 2000 },
    );
    fc.assert(
      fc.property(
        fc.bigInt({ min: -(2n ** 47n), max: 2n ** 47n - 1n }),
        fc.integer({ min: 0, max: 24 }),
        fc.integer({ min: 1, max: 2 ** 24 }),
        (value, shift, divisor) => {
          expect(scaleDown(Number(value), 2 ** shift, true)).toBe(Number(value >> BigInt(shift)));
          expect(scaleDown(Number(value), divisor, false)).toBe(Number(value / BigInt(divisor)));
        },
      ),
      { seed: 10, numRuns: 2000 },
    );
  });
});

describe('the integer PI, by hand', () => {
  // 10 counts per m/s, 1000 of throttle, divisor 256. Kp = 0.25 100 256 = 6400, Ki = 0.125 0.5 100 256 = 1600.
  test('has the counts of its gains', () => {
    expect(integerGains(plainInteger)).toEqual({ kp: 6400, ki: 1600, kpInForce: 0.25, kiInForce: 0.125 });
    const coarse = integerGains({ ...plainInteger, gainDivisor: 1, ki: 0.0001 });
    expect([coarse.kp, coarse.ki]).toEqual([25, 0]);
  });

  // e counts:   1    -1     3    -3
  // Kp e / 256: 25   -25    75   -75          exact
  // Ki e / 256: 6.25 -6.25  18.75 -18.75
  //   shift     6    -7     18   -19          truncate
  //   division  6    -6     18   -18
  //   shift     6    -6     19   -19          nearest: floor(x + 1/2)
  //   division  6    -6     19   -19          nearest, away from 0
  // u = 500 + Kp e / 256 + the sum of the increments before.
  const speeds = [19.9, 20.1, 19.7, 20.3, 20];
  test.each([
    ['shift', 'truncate', [525, 481, 574, 442, 498]],
    ['division', 'truncate', [525, 481, 575, 443, 500]],
    ['shift', 'nearest', [525, 481, 575, 444, 500]],
    ['division', 'nearest', [525, 481, 575, 444, 500]],
  ] as const)('by %s and %s', (scaling, rounding, expected) => {
    expect(counts(play({ ...plainInteger, scaling, rounding }, speeds).command)).toEqual(expected);
  });

  test('loses the integral where Ki e rounds to nothing, and counts it', () => {
    // Ki = 0.002 0.5 100 256 = 25.6 -> 26; e = 9 counts: 234 / 256 -> 0; e = -9: -234 / 256 -> -1 by shift.
    const weak = { ...plainInteger, kp: 0, ki: 0.002 };
    const lost = play(weak, [19.1, 19.1, 19.1]);
    expect(counts(lost.command)).toEqual([500, 500, 500]);
    expect(lost.bus[BITE_INCREMENT_LOST]).toBe(3);
    expect(counts(play(weak, [20.9, 20.9, 20.9]).command)).toEqual([500, 499, 498]);
    // Summing errors instead: Ki = 26, S = 500 256 / 26 = 4923 at first; 26 (4923 + 9 k) / 256 = 499.99, 500.9, 501.8.
    const summed = play({ ...weak, integralOf: 'errors' }, [19.1, 19.1, 19.1]);
    expect(counts(summed.command)).toEqual([499, 500, 501]);
    expect(summed.bus[BITE_INCREMENT_LOST]).toBe(0);
    // A finer integral does it too: 16 counts in one of throttle, Ki = 409.6 -> 410, 410 9 / 256 = 14.4 -> 14 sixteenths.
    const fine = play({ ...weak, integralDivisor: 16 }, [19.1, 19.1, 19.1]);
    expect(counts(fine.command)).toEqual([500, 500, 501]);
  });

  test('overflows: a wrapped product closes the throttle, a saturated one does not', () => {
    // e = 80 counts; Kp e = 512 000 is beyond 16 bits: 512 000 - 8 65 536 = -12 288; / 256 = -48. Saturated 32 767 / 256 = 127.
    // Ki e = 128 000 - 2 65 536 = -3 072, / 256 = -12.
    const short = { ...plainInteger, productBits: 16 };
    const wrapped = play(short, [12, 12]);
    expect(counts(wrapped.command)).toEqual([452, 440]);
    expect(wrapped.bus[BITE_OVERFLOW]).toBe(2);
    const saturated = play({ ...short, overflow: 'saturate' }, [12, 12]);
    expect(counts(saturated.command)).toEqual([627, 754]);
  });

  test('caps a sum of errors in the wrong unit, and tests signs at limits of one sign', () => {
    const sums = { ...plainInteger, integralOf: 'errors', gainDivisor: 256 } as const;
    // A figure of 4 m/s s is 4 10 / 0.5 = 80 counts of S: 1600 80 / 256 = 500.
    const cap = play({ ...sums, integralRule: { kind: 'cap', cap: 4, of: 'summed_error' } }, [19, 19, 19]);
    expect(counts(cap.command)).toEqual([750, 750, 750]);
    expect(cap.bus[BITE_INTEGRAL_CAP]).toBe(3);
    // Limits 500 and 950, u about 400: P = -25 20 / 10 = -500 at 22 m/s. Integrates down by 125 a sample below the limit.
    const signs = play({ ...plainInteger, integralRule: { kind: 'sign_test' } }, [22, 22, 22], {
      low: 0.5,
      high: 0.95,
      from: 0.9,
    });
    expect(counts(signs.command)).toEqual([400, 275, 150]);
    expect(signs.bus[BITE_SIGN_TEST]).toBe(3);
  });
});

test('with fine counts it is the PI in floating point, to its rounding', () => {
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: 17, max: 23, noNaN: true }), { minLength: 1, maxLength: 40 }),
      fc.constantFrom('none', 'conditional', 'clamping'),
      fc.constantFrom('shift', 'division'),
      (measured, kind, scaling) => {
        const fine = {
          ...plainInteger,
          wordBits: 32,
          productBits: 48,
          speedScale: 10_000,
          throttleScale: 1_000_000,
          gainDivisor: 1024,
          scaling,
          rounding: 'nearest',
          integralRule: { kind },
        } as const;
        const { kp, ki } = plainInteger;
        let integral = 0.5;
        const expected = measured.map((y) => {
          const p = kp * (20 - y);
          const u = p + integral;
          const next = integral + ki * 0.5 * (20 - y);
          if (kind === 'none') integral = next;
          else if (kind === 'clamping') integral = Math.min(Math.max(next, -p), 1 - p);
          else if (!((u >= 1 && y < 20) || (u <= 0 && y > 20))) integral = next;
          return u;
        });
        // Half a count of speed is 1.25e-5 of throttle through P, and 3e-6 more at each sample through I.
        const clear = expected.every((u) => Math.abs(u) > 3e-4 && Math.abs(u - 1) > 3e-4);
        if (clear || kind !== 'conditional') expectClose(play(fine, measured).command, expected, 3e-4);
      },
    ),
    { seed: 11, numRuns: 200 },
  );
});

test('commands are whole counts within the range, whatever overflows', () => {
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: 0, max: 90, noNaN: true }), { minLength: 1, maxLength: 60 }),
      fc.constantFrom(8, 12, 16),
      fc.constantFrom('wrap', 'saturate'),
      fc.constantFrom('increments', 'errors'),
      (measured, wordBits, overflow, integralOf) => {
        const setup = {
          ...plainInteger,
          wordBits,
          productBits: 16,
          throttleScale: 100,
          gainDivisor: 1,
          overflow,
          integralOf,
        } as const;
        for (const u of play(setup, measured).limited) {
          expect(u >= 0 && u <= 1).toBe(true);
          expectClose(u * 100, Math.round(u * 100), 1e-9);
        }
      },
    ),
    { seed: 12, numRuns: 200 },
  );
});
