import { addComplex, angleOfComplex, type Complex, complex, sizeOfComplex } from '../numeric/complex.ts';
import { exp, log } from '../numeric/elementary.ts';
import { bracketedRoot } from '../numeric/root.ts';
import { parabolicPeak } from './step-figures.ts';

/** Margins of a loop with negative feedback; Infinity where there is no crossover. */
export interface Margins {
  /** Smallest factor above 1 on the gain at which the loop oscillates. */
  readonly gainMargin: number;
  /** Its frequency [rad/s]; NaN: none. */
  readonly phaseCrossover: number;
  /** Smallest lag at a gain crossover with which the loop oscillates [rad]. */
  readonly phaseMargin: number;
  readonly gainCrossover: number;
  /** Dead time that may be added [s]. */
  readonly delayMargin: number;
  /** Largest |1 / (1 + L)|, read off the grid: good to about 1e-4 unless its peak is very sharp. */
  readonly sensitivity: number;
}

const POINTS = 800;

/**
 * Gain, phase and delay margin and the largest sensitivity of a loop (K. J. Astrom, T. Hagglund, Advanced PID Control
 * (2006), chapter 4, chapter number from memory). The response is scanned on a logarithmic grid and crossings are refined by
 * Brent's method; of several crossovers the one with the smallest margin counts. At the upper end a negative real value
 * counts as a phase crossover (the Nyquist frequency of a sampled loop).
 *
 * @param response L at an angular frequency [rad/s]
 * @param from least frequency scanned [rad/s], > 0
 * @param to largest frequency scanned [rad/s]; for a sampled loop pi / h
 */
export function loopMargins(response: (frequency: number) => Complex, from: number, to: number): Margins {
  const start = log(from);
  const width = (log(to) - start) / POINTS;
  const grid = Array.from({ length: POINTS + 1 }, (_, i) => (i === POINTS ? to : exp(start + i * width)));
  const values = grid.map(response);
  let gainMargin = Number.POSITIVE_INFINITY;
  let phaseCrossover = Number.NaN;
  let phaseMargin = Number.POSITIVE_INFINITY;
  let gainCrossover = Number.NaN;
  let delayMargin = Number.POSITIVE_INFINITY;
  const considerGain = (frequency: number, value: Complex): void => {
    const margin = value.re < 0 ? -1 / value.re : Number.POSITIVE_INFINITY;
    if (!(margin > 1 && margin < gainMargin)) return;
    gainMargin = margin;
    phaseCrossover = frequency;
  };
  for (let i = 0; i <= POINTS; i++) {
    const value = values[i]!;
    if (i === 0) continue;
    const before = values[i - 1]!;
    if (before.im > 0 !== value.im > 0 && (before.re < 0 || value.re < 0)) {
      const root = bracketedRoot((w) => response(w).im, grid[i - 1]!, grid[i]!, 1e-12 * to);
      considerGain(root.x, response(root.x));
    }
    if (sizeOfComplex(before) > 1 === sizeOfComplex(value) > 1) continue;
    const root = bracketedRoot((w) => sizeOfComplex(response(w)) - 1, grid[i - 1]!, grid[i]!, 1e-12 * to);
    const angle = angleOfComplex(response(root.x));
    const lag = angle > 0 ? angle - Math.PI : angle + Math.PI;
    if (Math.abs(lag) < Math.abs(phaseMargin)) {
      phaseMargin = lag;
      gainCrossover = root.x;
    }
    delayMargin = Math.min(delayMargin, (lag < 0 ? lag + 2 * Math.PI : lag) / root.x);
  }
  const end = values[POINTS]!;
  if (Math.abs(end.im) <= 1e-9 * sizeOfComplex(end)) considerGain(to, end);
  const sensitivity = parabolicPeak(
    Float64Array.from(values, (value) => 1 / sizeOfComplex(addComplex(complex(1), value))),
  ).value;
  return { gainMargin, phaseCrossover, phaseMargin, gainCrossover, delayMargin, sensitivity };
}
