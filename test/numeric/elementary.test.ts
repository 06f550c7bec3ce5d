import { describe, expect, test } from 'vitest';
import { asin, atan, atan2, cos, exp, log, pow, sin, tan } from '../../src/numeric/elementary.ts';

const cell = new Float64Array(1);
const bits = new BigInt64Array(cell.buffer);
/** Place of a double in their order: neighbours differ by one. */
function place(x: number): bigint {
  cell[0] = x;
  const raw = bits[0]!;
  return raw < 0n ? -(raw & 0x7fffffffffffffffn) : raw;
}
function ulps(x: number, y: number): number {
  if (Number.isNaN(x) || Number.isNaN(y))
    return Number.isNaN(x) && Number.isNaN(y) ? 0 : Number.POSITIVE_INFINITY;
  const gap = place(x) - place(y);
  return Number(gap < 0n ? -gap : gap);
}

// A plain linear congruential sequence (Knuth's MMIX constants), so that the test does not lean on the stream under test.
let seed = 20240521n;
function random(): number {
  seed = (seed * 6364136223846793005n + 1442695040888963407n) & 0xffffffffffffffffn;
  return Number(seed >> 11n) / 2 ** 53;
}
const around = (size: number): number => (2 * random() - 1) * size;

describe('elementary functions', () => {
  const pairs: [string, (...x: number[]) => number, (...x: number[]) => number, () => number[]][] = [
    ['exp', exp, Math.exp, () => [around(745)]],
    ['exp of small numbers', exp, Math.exp, () => [around(1)]],
    ['log', log, Math.log, () => [Math.exp(around(740))]],
    ['log near 1', log, Math.log, () => [1 + around(10 ** (-8 * random()))]],
    ['sin', sin, Math.sin, () => [around(10 ** (5 * random()))]],
    ['cos', cos, Math.cos, () => [around(10 ** (5 * random()))]],
    ['tan', tan, Math.tan, () => [around(10 ** (5 * random()))]],
    ['asin', asin, Math.asin, () => [around(1)]],
    ['atan', atan, Math.atan, () => [around(10 ** (6 * random() - 3))]],
    ['atan2', atan2, Math.atan2, () => [around(1), around(10 ** (6 * random() - 3))]],
    ['pow', pow, (x, y) => x! ** y!, () => [10 ** around(10), around(30)]],
  ];
  test.each(pairs)('%s agrees with the engine to 2 units in the last place', (_, ours, engine, draw) => {
    for (let i = 0; i < 20_000; i++) {
      const x = draw();
      expect(ulps(ours(...x), engine(...x)), `at ${x}`).toBeLessThanOrEqual(2);
    }
  });

  // Correctly rounded values: 60-digit decimal arithmetic (Python's decimal module), rounded to double.
  test.each([
    ['pow', pow(3.791913924351593e-9, -26.6215591562937), 1.5272755322177228e224],
    ['pow', pow(0.3216747744277395, -2.696462291737629), 21.292736090843807],
    ['exp(1)', exp(1), Math.E],
    ['log(10)', log(10), Math.LN10],
    ['pow(2, 0.5)', pow(2, 0.5), Math.SQRT2],
  ])('%s is at most one unit from the correctly rounded value', (_, ours, exact) => {
    expect(ulps(ours, exact)).toBeLessThanOrEqual(1);
  });

  // Abramowitz and Stegun, Handbook of Mathematical Functions, tables 4.6 and 4.14 (from memory), rounded to double.
  test('values of the handbook come out', () => {
    expect(ulps(sin(1), 0.8414709848078965)).toBe(0);
    expect(ulps(cos(1), 0.5403023058681398)).toBe(0);
    expect(ulps(tan(1), 1.5574077246549023)).toBeLessThanOrEqual(1);
    expect(ulps(atan(1), 0.7853981633974483)).toBe(0);
    expect(ulps(asin(1), 1.5707963267948966)).toBe(0);
  });

  test('identities hold over random arguments', () => {
    for (let i = 0; i < 5000; i++) {
      const x = around(50);
      expect(Math.abs(sin(x) ** 2 + cos(x) ** 2 - 1)).toBeLessThan(4e-16);
      expect(Math.abs(exp(x) * exp(-x) - 1)).toBeLessThan(5e-16);
      expect(Math.abs(log(exp(x)) - x)).toBeLessThan(1e-14);
      const angle = around(Math.PI);
      expect(Math.abs(atan2(sin(angle), cos(angle)) - angle)).toBeLessThan(1e-15);
    }
  });

  test('a multiple of half a turn next to a double keeps its digits', () => {
    // The double next to 355 leaves 3.0144353364053721e-5 over 113 pi, 11 after a large cancellation (known to 17 digits).
    expect(ulps(sin(355), -3.014435335948845e-5)).toBeLessThanOrEqual(1);
    expect(ulps(sin(Math.PI), 1.2246467991473532e-16)).toBe(0);
    expect(ulps(cos(Math.PI / 2), 6.123233995736766e-17)).toBe(0);
  });

  test('special arguments give what IEEE 754 asks', () => {
    const special = [
      0,
      -0,
      1,
      -1,
      0.5,
      2,
      1e-310,
      5e-324,
      1.7e308,
      Infinity,
      -Infinity,
      NaN,
      709.78,
      709.79,
      -745.1,
      -745.2,
    ];
    for (const x of special) {
      for (const [ours, engine] of [
        [exp, Math.exp],
        [log, Math.log],
        [asin, Math.asin],
        [atan, Math.atan],
      ] as const)
        expect(ulps(ours(x), engine(x)), `${engine.name}(${x})`).toBeLessThanOrEqual(1);
      for (const y of special) {
        expect(Object.is(atan2(x, y), Math.atan2(x, y)), `atan2(${x}, ${y})`).toBe(true);
        if (x >= 0 && !Object.is(x, -0))
          expect(ulps(pow(x, y), x ** y), `pow(${x}, ${y})`).toBeLessThanOrEqual(1);
      }
    }
    for (const f of [sin, cos, tan]) {
      expect(f(Infinity)).toBeNaN();
      expect(f(NaN)).toBeNaN();
      expect(f(1e7)).toBeNaN();
    }
    expect(Object.is(sin(-0), -0)).toBe(true);
    expect(pow(-1, 0.5)).toBeNaN();
  });
});
