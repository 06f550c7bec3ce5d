import { BITE_INCREMENT_LOST, BITE_INTEGRAL_CAP, BITE_OVERFLOW, BITE_SIGN_TEST } from './bites.ts';
import {
  BUS_COMMAND,
  BUS_FEEDFORWARD,
  BUS_INTEGRAL,
  BUS_LIMITED,
  BUS_MEASURED,
  BUS_PROPORTIONAL,
  BUS_REFERENCE,
} from './bus.ts';
import type { Controller } from './controller.ts';
import { integerGains } from './integer-gains.ts';
import { INTEGRAL } from './memory.ts';
import type { IntegerSetup } from './setup.ts';
import { isBeyond, saturateTo, scaleDown, wrappedProduct, wrapTo } from './whole-numbers.ts';

// Places of the constants and of what a sample works with.
const KP = 0;
const KI = 1;
const LOW = 2;
const HIGH = 3;
const SPEED_SCALE = 4;
const PER_COUNT = 5;
const GAIN_DIVISOR = 6;
const INTEGRAL_DIVISOR = 7;
const WORD = 8;
const PRODUCT = 9;
const CAP = 10;
/** 1: a word has overflowed in this sample. */
const OVERFLOWN = 11;
const SIZE = 12;

/**
 * The PI controller in whole numbers (see IntegerSetup): every word is fitted, by wrapping around or by staying at its
 * end, where C would assign it: counts of speed, error, products, their sums with the rounding half, parts, integral,
 * command. The integral is held at the limits by the same rules as in pid.ts, in counts; `low` and `high` become their
 * nearest counts.
 *
 * It counts the samples in which an increment rounds to nothing, a word overflows, a test of signs fails, a cap in the
 * wrong unit holds (BUS_BITES).
 */
export function integerController(setup: IntegerSetup, low: number, high: number): Controller {
  const { wordBits, integralRule: rule, throttleScale, sample, computingDelay, ramp } = setup;
  const gains = integerGains(setup);
  const shifts = setup.scaling === 'shift';
  const nearest = setup.rounding === 'nearest';
  const wraps = setup.overflow === 'wrap';
  const sums = setup.integralOf === 'errors';
  const backward = setup.integration === 'backward';
  const conditional = rule.kind === 'conditional';
  const bySign = rule.kind === 'sign_test';
  const clamped = rule.kind === 'clamping';
  const capped = rule.kind === 'cap';
  const wrongUnit = rule.kind === 'cap' && rule.of === 'summed_error';
  const n = new Float64Array(SIZE);
  n[KP] = gains.kp;
  n[KI] = gains.ki;
  n[LOW] = nearestCount(low * throttleScale);
  n[HIGH] = nearestCount(high * throttleScale);
  n[SPEED_SCALE] = setup.speedScale;
  n[PER_COUNT] = 1 / throttleScale;
  n[GAIN_DIVISOR] = setup.gainDivisor;
  n[INTEGRAL_DIVISOR] = setup.integralDivisor;
  n[WORD] = wordBits;
  n[PRODUCT] = setup.productBits;

  const inWord = (value: number, bits: number): number => {
    if (!isBeyond(value, bits)) return value;
    n[OVERFLOWN] = 1;
    return wraps ? wrapTo(value, bits) : saturateTo(value, bits);
  };
  const product = (a: number, b: number): number => {
    if (!isBeyond(a * b, n[PRODUCT])) return a * b + 0;
    n[OVERFLOWN] = 1;
    return wraps ? wrappedProduct(a, b, n[PRODUCT]) : saturateTo(a * b, n[PRODUCT]);
  };
  const scaled = (value: number, divisor: number): number => {
    const half = nearest ? Math.floor(divisor / 2) : 0;
    const sum = half === 0 ? value : inWord(value + (shifts || value >= 0 ? half : -half), n[PRODUCT]);
    return inWord(scaleDown(sum, divisor, shifts), n[WORD]);
  };
  const countOf = (speed: number): number => inWord(nearestCount(speed * n[SPEED_SCALE]), n[WORD]);
  /** Part of the command that an integral stands for. */
  const termOf = (integral: number): number =>
    sums ? scaled(product(n[KI], integral), n[GAIN_DIVISOR]) : scaled(integral, n[INTEGRAL_DIVISOR]);
  /** Integral that stands for a part of the command, towards 0. */
  const integralFor = (term: number): number =>
    sums
      ? n[KI] === 0
        ? 0
        : inWord(scaleDown(term * n[GAIN_DIVISOR], n[KI], false), n[WORD])
      : inWord(term * n[INTEGRAL_DIVISOR], n[WORD]);
  if (rule.kind === 'cap')
    n[CAP] = wrongUnit
      ? saturateTo(nearestCount((rule.cap * setup.speedScale) / sample), wordBits)
      : Math.abs(integralFor(nearestCount(rule.cap * throttleScale)));

  const step = (bus: Float64Array): void => {
    n[OVERFLOWN] = 0;
    const error = inWord(countOf(bus[BUS_REFERENCE]) - countOf(bus[BUS_MEASURED]), n[WORD]);
    const proportional = scaled(product(n[KP], error), n[GAIN_DIVISOR]);
    const increment = sums ? error : scaled(product(n[KI], error), n[GAIN_DIVISOR]);
    if (increment === 0 && error !== 0) bus[BITE_INCREMENT_LOST] += 1;
    let integral = bus[INTEGRAL];
    let next = inWord(integral + increment, n[WORD]);
    if (conditional || bySign) {
      const trial = proportional + termOf(backward ? next : integral);
      const outwards = (trial >= n[HIGH] && error > 0) || (trial <= n[LOW] && error < 0);
      if (conditional) {
        if (outwards) next = integral;
      } else if (trial >= n[HIGH] || trial <= n[LOW]) {
        const stops = error !== 0 && trial * error >= 0;
        if (stops !== outwards) bus[BITE_SIGN_TEST] += 1;
        if (stops) next = integral;
      }
    } else if (clamped) {
      const most = integralFor(n[HIGH] - proportional);
      const least = integralFor(n[LOW] - proportional);
      if (next > most) next = most;
      if (next < least) next = least;
    } else if (capped) {
      const free = next;
      if (next > n[CAP]) next = n[CAP];
      if (next < -n[CAP]) next = -n[CAP];
      if (wrongUnit && next !== free) bus[BITE_INTEGRAL_CAP] += 1;
    }
    if (backward) integral = next;
    const term = termOf(integral);
    const command = inWord(proportional + term, n[WORD]);
    let limited = command;
    if (command > n[HIGH]) limited = n[HIGH];
    if (command < n[LOW]) limited = n[LOW];
    if (n[OVERFLOWN] === 1) bus[BITE_OVERFLOW] += 1;
    bus[INTEGRAL] = next;
    bus[BUS_PROPORTIONAL] = proportional * n[PER_COUNT];
    bus[BUS_INTEGRAL] = term * n[PER_COUNT];
    bus[BUS_FEEDFORWARD] = 0;
    bus[BUS_COMMAND] = command * n[PER_COUNT];
    bus[BUS_LIMITED] = limited * n[PER_COUNT];
  };
  const engage = (bus: Float64Array): void => {
    const error = inWord(countOf(bus[BUS_REFERENCE]) - countOf(bus[BUS_MEASURED]), n[WORD]);
    const proportional = scaled(product(n[KP], error), n[GAIN_DIVISOR]);
    bus[INTEGRAL] = integralFor(nearestCount(bus[BUS_LIMITED] * throttleScale) - proportional);
  };
  return { sample, computingDelay, ramp, engage, step };
}

const nearestCount = (value: number): number => Math.floor(value + 0.5);
