import { angleOfComplex, type Complex, sizeOfComplex } from '../numeric/complex.ts';
import { exp, log } from '../numeric/elementary.ts';
import { bracketedRoot } from '../numeric/root.ts';
import { logarithmicGrid, type ResponseScan, scanResponse } from './response-scan.ts';

/** Margins of a loop with negative feedback. Frequencies [rad/s] are NaN where there is no such place. */
export interface Margins {
  /** Smallest factor above 1 on the gain at which the loop oscillates; Infinity: none. */
  readonly gainMargin: number;
  readonly phaseCrossover: number;
  /** Largest factor below 1 at which it does: a loop that needs its gain has one; 0: none. */
  readonly gainReduction: number;
  /** Smallest lag at a gain crossover with which the loop oscillates [rad], in (-pi, pi]; Infinity: no crossover. */
  readonly phaseMargin: number;
  readonly gainCrossover: number;
  /** Dead time that may be added [s]. */
  readonly delayMargin: number;
  /** Largest |S| = |1 / (1 + L)|; at least 1, which every loop comes to where it has no gain left. */
  readonly sensitivity: number;
  /** NaN: |S| nowhere rises above 1. */
  readonly sensitivityAt: number;
  /** Largest |T| = |L / (1 + L)|. */
  readonly complementary: number;
  /** NaN: |T| is largest at the lowest frequency. */
  readonly complementaryAt: number;
  /** From where |T| stays below its value at the lowest frequency over sqrt(2); NaN: nowhere. */
  readonly bandwidth: number;
}

const STEPS = 800;
/** Of a frequency, relative. */
const TOLERANCE = 1e-13;

/**
 * Gain, phase and delay margin, peaks of the sensitivities and bandwidth of a loop (K. J. Astrom, T. Hagglund, Advanced
 * PID Control (2006), chapter 4, chapter number from memory). The response is scanned on a logarithmic grid, crossings are
 * refined by Brent's method and peaks by golden section; of several crossovers the one with the smallest margin counts. At
 * the upper end a negative real value counts as a phase crossover (the Nyquist frequency of a sampled loop).
 *
 * The figures are of the curve and say nothing about stability.
 *
 * @param response L at an angular frequency [rad/s]
 * @param from least frequency scanned [rad/s], > 0
 * @param to largest frequency scanned [rad/s]; for a sampled loop pi / h
 */
export function loopMargins(response: (frequency: number) => Complex, from: number, to: number): Margins {
  return marginsOfScan(scanResponse(response, logarithmicGrid(from, to, STEPS)), response);
}

/** The same of a response that has been scanned already. */
export function marginsOfScan(scan: ResponseScan, response: (frequency: number) => Complex): Margins {
  return { ...crossings(scan, response), ...peaks(scan, response) };
}

function crossings(
  { frequency, re, im }: ResponseScan,
  response: (frequency: number) => Complex,
): Pick<
  Margins,
  'gainMargin' | 'phaseCrossover' | 'gainReduction' | 'phaseMargin' | 'gainCrossover' | 'delayMargin'
> {
  let gainMargin = Number.POSITIVE_INFINITY;
  let phaseCrossover = Number.NaN;
  let gainReduction = 0;
  let phaseMargin = Number.POSITIVE_INFINITY;
  let gainCrossover = Number.NaN;
  let delayMargin = Number.POSITIVE_INFINITY;
  const considerGain = (at: number, value: Complex): void => {
    if (!(value.re < 0)) return;
    const factor = -1 / value.re;
    if (factor > 1 && factor < gainMargin) {
      gainMargin = factor;
      phaseCrossover = at;
    }
    if (factor <= 1 && factor > gainReduction) gainReduction = factor;
  };
  const refined = (f: (value: Complex) => number, i: number): number =>
    bracketedRoot((w) => f(response(w)), frequency[i - 1]!, frequency[i]!, TOLERANCE * frequency[i]!).x;
  const sizeAt = (i: number): number => sizeOfComplex({ re: re[i]!, im: im[i]! });
  const last = frequency.length - 1;
  let before = sizeAt(0);
  for (let i = 1; i <= last; i++) {
    if (im[i - 1]! > 0 !== im[i]! > 0 && (re[i - 1]! < 0 || re[i]! < 0)) {
      const at = refined((value) => value.im, i);
      considerGain(at, response(at));
    }
    const size = sizeAt(i);
    if (before > 1 !== size > 1) {
      const at = refined((value) => sizeOfComplex(value) - 1, i);
      const angle = angleOfComplex(response(at));
      const lag = angle > 0 ? angle - Math.PI : angle + Math.PI;
      if (Math.abs(lag) < Math.abs(phaseMargin)) {
        phaseMargin = lag;
        gainCrossover = at;
      }
      delayMargin = Math.min(delayMargin, (lag < 0 ? lag + 2 * Math.PI : lag) / at);
    }
    before = size;
  }
  if (Math.abs(im[last]!) <= 1e-9 * before) considerGain(frequency[last]!, { re: re[last]!, im: im[last]! });
  return { gainMargin, phaseCrossover, gainReduction, phaseMargin, gainCrossover, delayMargin };
}

function peaks(
  { frequency, re, im }: ResponseScan,
  response: (frequency: number) => Complex,
): Pick<Margins, 'sensitivity' | 'sensitivityAt' | 'complementary' | 'complementaryAt' | 'bandwidth'> {
  const last = frequency.length - 1;
  const at = (of: (re: number, im: number) => number) => (i: number) => of(re[i]!, im[i]!);
  const s = at(sensitivityOf);
  const t = at(complementaryOf);
  let sTop = 0;
  let tTop = 0;
  for (let i = 1; i <= last; i++) {
    if (s(i) > s(sTop)) sTop = i;
    if (t(i) > t(tTop)) tTop = i;
  }
  const top = (of: (re: number, im: number) => number, i: number): { at: number; value: number } => {
    const value = (w: number): number => {
      const { re, im } = response(w);
      return of(re, im);
    };
    return goldenPeak(
      value,
      frequency[Math.max(0, i - 1)]!,
      frequency[Math.min(last, i + 1)]!,
      frequency[i]!,
    );
  };
  const sPeak = top(sensitivityOf, sTop);
  const tPeak = top(complementaryOf, tTop);
  const level = t(0) * Math.SQRT1_2;
  let inside = last;
  while (inside >= 0 && !(t(inside) >= level)) inside--;
  const bandwidth =
    inside < 0 || inside === last
      ? Number.NaN
      : bracketedRoot(
          (w) => {
            const value = response(w);
            return complementaryOf(value.re, value.im) - level;
          },
          frequency[inside]!,
          frequency[inside + 1]!,
          TOLERANCE * frequency[inside]!,
        ).x;
  // Rounding puts a curve that only comes to 1 a hair above it.
  const rises = sPeak.value > 1 + 1e-9;
  return {
    sensitivity: rises ? sPeak.value : 1,
    sensitivityAt: rises ? sPeak.at : Number.NaN,
    complementary: tTop === 0 ? t(0) : tPeak.value,
    complementaryAt: tTop === 0 ? Number.NaN : tPeak.at,
    bandwidth,
  };
}

/** |1 / (1 + L)|; 0 at a pole of L. */
export const sensitivityOf = (re: number, im: number): number => {
  if (!Number.isFinite(re + im)) return 0;
  return 1 / Math.sqrt((1 + re) * (1 + re) + im * im);
};

/** |L / (1 + L)|; 1 at a pole of L. */
const complementaryOf = (re: number, im: number): number => {
  if (!Number.isFinite(re + im)) return 1;
  return Math.sqrt((re * re + im * im) / ((1 + re) * (1 + re) + im * im));
};

/** Largest value between two frequencies around a known point, by golden section in the logarithm; the known point where nothing is higher. */
function goldenPeak(
  of: (frequency: number) => number,
  from: number,
  to: number,
  known: number,
): { readonly at: number; readonly value: number } {
  const share = (Math.sqrt(5) - 1) / 2;
  let a = log(from);
  let b = log(to);
  let x1 = b - share * (b - a);
  let x2 = a + share * (b - a);
  let f1 = of(exp(x1));
  let f2 = of(exp(x2));
  // The value of a peak is as good as the square of its place.
  while (b - a > 1e-7) {
    if (f1 >= f2) {
      b = x2;
      [x2, f2] = [x1, f1];
      x1 = b - share * (b - a);
      f1 = of(exp(x1));
    } else {
      a = x1;
      [x1, f1] = [x2, f2];
      x2 = a + share * (b - a);
      f2 = of(exp(x2));
    }
  }
  const [x, value] = f1 >= f2 ? [x1, f1] : [x2, f2];
  const there = of(known);
  return there >= value ? { at: known, value: there } : { at: exp(x), value };
}
