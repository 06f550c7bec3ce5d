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
import { powerOfTwo, saturateTo, scaleDown, wrappedProduct, wrapTo } from './whole-numbers.ts';

// Places of the constants and of what a sample works with.
const KP = 0;
const KI = 1;
const LOW = 2;
const HIGH = 3;
const SPEED_SCALE = 4;
const PER_COUNT = 5;
/** A divisor, then what is added before. */
const GAIN_DIVISOR = 6;
const INTEGRAL_DIVISOR = 8;
/** Halves of the ranges of words and products. */
const WORD_HALF = 10;
const PRODUCT_HALF = 11;
const CAP = 12;
/** 1: a word has overflowed in this sample. */
const OVERFLOWN = 13;
/** Answers of the functions. */
const ERROR = 14;
const RESULT = 15;
const SIZE = 16;

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
  const { wordBits, productBits, integralRule: rule, throttleScale, sample, computingDelay, ramp } = setup;
  const gains = integerGains(setup);
  const shifts = setup.scaling === 'shift';
  const nearest = setup.rounding === 'nearest';
  const wraps = setup.overflow === 'wrap';
  const sums = setup.integralOf === 'errors';
  const integrates = setup.ki > 0;
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
  n[GAIN_DIVISOR + 1] = nearest ? Math.floor(setup.gainDivisor / 2) : 0;
  n[INTEGRAL_DIVISOR] = setup.integralDivisor;
  n[INTEGRAL_DIVISOR + 1] = nearest ? Math.floor(setup.integralDivisor / 2) : 0;
  n[WORD_HALF] = powerOfTwo(wordBits - 1);
  n[PRODUCT_HALF] = powerOfTwo(productBits - 1);

  const beyond = (value: number, bits: number): number => {
    n[OVERFLOWN] = 1;
    return wraps ? wrapTo(value, bits) : saturateTo(value, bits);
  };
  const inWord = (value: number): number =>
    value < n[WORD_HALF] && value >= -n[WORD_HALF] ? value : beyond(value, wordBits);
  const longProduct = (a: number, b: number, rounded: number): number => {
    n[OVERFLOWN] = 1;
    return wraps ? wrappedProduct(a, b, productBits) : saturateTo(rounded, productBits);
  };
  /** A product scaled down by the divisor at a place, to RESULT: numbers that functions return are boxed. */
  const scaleProduct = (a: number, b: number, divisor: number): void => {
    // Adding 0 makes a negative zero, which no word has, a plain one.
    let value = a * b + 0;
    if (value >= n[PRODUCT_HALF] || value < -n[PRODUCT_HALF]) value = longProduct(a, b, value);
    value += shifts || value >= 0 ? n[divisor + 1] : -n[divisor + 1];
    if (value >= n[PRODUCT_HALF] || value < -n[PRODUCT_HALF]) value = beyond(value, productBits);
    value = scaleDown(value, n[divisor], shifts);
    if (value >= n[WORD_HALF] || value < -n[WORD_HALF]) value = beyond(value, wordBits);
    n[RESULT] = value;
  };
  /** Counts of reference and measurement, and their difference: the error, to ERROR. */
  const takeError = (bus: Float64Array): void => {
    const half = n[WORD_HALF];
    let reference = Math.floor(bus[BUS_REFERENCE] * n[SPEED_SCALE] + 0.5);
    let measured = Math.floor(bus[BUS_MEASURED] * n[SPEED_SCALE] + 0.5);
    if (reference >= half || reference < -half) reference = beyond(reference, wordBits);
    if (measured >= half || measured < -half) measured = beyond(measured, wordBits);
    let error = reference - measured;
    if (error >= half || error < -half) error = beyond(error, wordBits);
    n[ERROR] = error;
  };
  /** Part of the command that an integral stands for, to RESULT. */
  const takeTerm = (integral: number): void => {
    if (sums) scaleProduct(n[KI], integral, GAIN_DIVISOR);
    else scaleProduct(integral, 1, INTEGRAL_DIVISOR);
  };
  /** Integral that stands for a part of the command, towards 0. */
  const integralFor = (term: number): number =>
    sums
      ? n[KI] === 0
        ? 0
        : inWord(scaleDown(term * n[GAIN_DIVISOR], n[KI], false))
      : inWord(term * n[INTEGRAL_DIVISOR]);
  if (rule.kind === 'cap')
    n[CAP] = wrongUnit
      ? saturateTo(nearestCount((rule.cap * setup.speedScale) / sample), wordBits)
      : Math.abs(integralFor(nearestCount(rule.cap * throttleScale)));

  const step = (bus: Float64Array): void => {
    n[OVERFLOWN] = 0;
    takeError(bus);
    const error = n[ERROR];
    scaleProduct(n[KP], error, GAIN_DIVISOR);
    const proportional = n[RESULT];
    let increment = error;
    if (!sums) {
      scaleProduct(n[KI], error, GAIN_DIVISOR);
      increment = n[RESULT];
      if (integrates && increment === 0 && error !== 0) bus[BITE_INCREMENT_LOST] += 1;
    }
    let integral = bus[INTEGRAL];
    let next = inWord(integral + increment);
    const free = next;
    takeTerm(backward ? next : integral);
    let term = n[RESULT];
    if (conditional || bySign) {
      const trial = proportional + term;
      const outwards = (trial >= n[HIGH] && error > 0) || (trial <= n[LOW] && error < 0);
      if (conditional) {
        if (outwards) next = integral;
      } else if (trial >= n[HIGH] || trial <= n[LOW]) {
        const stops = error !== 0 && trial * error >= 0;
        if (integrates && stops !== outwards) bus[BITE_SIGN_TEST] += 1;
        if (stops) next = integral;
      }
    } else if (clamped) {
      const most = integralFor(n[HIGH] - proportional);
      const least = integralFor(n[LOW] - proportional);
      if (next > most) next = most;
      if (next < least) next = least;
    } else if (capped) {
      if (next > n[CAP]) next = n[CAP];
      if (next < -n[CAP]) next = -n[CAP];
      if (wrongUnit && next !== free) bus[BITE_INTEGRAL_CAP] += 1;
    }
    if (backward) {
      integral = next;
      if (next !== free) {
        takeTerm(integral);
        term = n[RESULT];
      }
    }
    const command = inWord(proportional + term);
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
    takeError(bus);
    scaleProduct(n[KP], n[ERROR], GAIN_DIVISOR);
    bus[INTEGRAL] = integralFor(nearestCount(bus[BUS_LIMITED] * throttleScale) - n[RESULT]);
  };
  return { sample, computingDelay, ramp, integralAt: [INTEGRAL], engage, step };
}

const nearestCount = (value: number): number => Math.floor(value + 0.5);
