import { type Margins, marginsOfScan, sensitivityOf } from '../linear/margins.ts';
import { closedPolesOutside } from '../linear/nyquist.ts';
import { logarithmicGrid } from '../linear/response-scan.ts';
import { type Complex, complex, sizeOfComplex } from '../numeric/complex.ts';
import { cos, sin } from '../numeric/elementary.ts';
import type { Gains } from './controller-response.ts';

/** A loop whose response along the border of stability can be scanned: sampled or continuous. */
export interface ScannableLoop {
  /** Poles of the vehicle with its lags, in the s plane [1/s]. */
  readonly plantPoles: readonly Complex[];
  /** Highest frequency that is scanned [rad/s]. */
  readonly highest: number;
  /** Place in the plane of the loop that belongs to a place of the s plane: z = e^(s h), or s. */
  placeAt(s: Complex): Complex;
  /** From command to measurement at such a place; Infinity at a pole. */
  plantAt(place: Complex): Complex;
  /** From error to integral for ki = 1, and from measurement to command of a derivative, there. */
  integratorAt(place: Complex): Complex;
  derivativeAt(gains: Gains, place: Complex): Complex;
  /** Gain around the open loop [rad/s]. */
  openLoop(gains: Gains, frequency: number): Complex;
}

/** How one loop stands: figures of a stable loop are those of linear/margins.ts, else null. */
export interface LoopMargins {
  /** Every pole of the closed loop decays. */
  readonly stable: boolean;
  readonly figures: Margins | null;
}

/** A loop whose vehicle has been scanned once, so that many gains can be tried on it. */
export interface LoopScan<L extends ScannableLoop> {
  readonly loop: L;
  /** Margins under these gains: about a millisecond. */
  margins(gains: Gains): LoopMargins;
  /**
   * Greatest |S| on the grid, up to a few 1e-4 below the true peak; Infinity for a loop that is not stable. About 20
   * microseconds.
   */
  sensitivity(gains: Gains): number;
}

/** Lowest frequency that is scanned [rad/s]: a quarter of a day for a turn. What an integral lets grow more slowly counts as still. */
const SLOWEST = 3e-4;
const STEPS = 800;
/** Steps of the quarter circle around rest, s = 0, on which an integrator is passed. */
const ARC = 16;

/** Scans a loop from 3e-4 rad/s to the highest frequency that it has. */
export function loopScan<L extends ScannableLoop>(loop: L): LoopScan<L> {
  const frequency = logarithmicGrid(SLOWEST, loop.highest, STEPS);
  const places: Complex[] = [];
  for (let i = 0; i < ARC; i++) {
    const angle = (i * Math.PI) / 2 / ARC;
    places.push(loop.placeAt(complex(SLOWEST * cos(angle), SLOWEST * sin(angle))));
  }
  for (const w of frequency) places.push(loop.placeAt(complex(0, w)));
  const size = places.length;
  const column = (of: (z: Complex) => Complex): { re: Float64Array; im: Float64Array } => {
    const values = places.map(of);
    return {
      re: Float64Array.from(values, ({ re }) => re),
      im: Float64Array.from(values, ({ im }) => im),
    };
  };
  const plant = column((place) => loop.plantAt(place));
  const integrator = column((place) => loop.integratorAt(place));
  const rest = loop.plantAt(loop.placeAt(complex(0))).re;
  const running = loop.plantPoles.filter((pole) => pole.re > 0);
  const openOutside = running.filter((pole) => sizeOfComplex(pole) > SLOWEST).length;
  const slowOutside = running.length - openOutside;
  const re = new Float64Array(size);
  const im = new Float64Array(size);

  /** L along the whole curve, into `re` and `im`. */
  function scan(gains: Gains): void {
    const { kp, ki } = gains;
    const derives = (gains.kd ?? 0) !== 0;
    for (let i = 0; i < size; i++) {
      let cRe = kp + ki * integrator.re[i]!;
      let cIm = ki * integrator.im[i]!;
      if (derives) {
        const slope = loop.derivativeAt(gains, places[i]!);
        cRe += slope.re;
        cIm += slope.im;
      }
      re[i] = cRe * plant.re[i]! - cIm * plant.im[i]!;
      im[i] = cRe * plant.im[i]! + cIm * plant.re[i]!;
    }
  }
  function stable({ kp, ki }: Gains): boolean {
    if (closedPolesOutside(re, im, openOutside) !== 0) return false;
    if (ki !== 0) return true;
    // Without an integral, one pole may run away more slowly than the curve passes rest: 1 + L changes sign there.
    const turns = 1 + kp * rest < 0 !== 1 + re[0]! < 0;
    return turns === (slowOutside % 2 === 1);
  }

  return {
    loop,
    margins(gains) {
      scan(gains);
      if (!stable(gains)) return { stable: false, figures: null };
      const atRest = gains.kp * rest;
      const onBorder = { frequency, re: re.slice(ARC), im: im.slice(ARC) };
      const figures = marginsOfScan(onBorder, (w) => loop.openLoop(gains, w));
      // Without an integral, a vehicle that runs away by itself is held only from this gain on.
      const leastGain = gains.ki === 0 && atRest < -1 ? -1 / atRest : 0;
      return {
        stable: true,
        figures: { ...figures, gainReduction: Math.max(figures.gainReduction, leastGain) },
      };
    },
    sensitivity(gains) {
      scan(gains);
      if (!stable(gains)) return Number.POSITIVE_INFINITY;
      let greatest = 1;
      for (let i = ARC; i < size; i++) greatest = Math.max(greatest, sensitivityOf(re[i]!, im[i]!));
      return greatest;
    },
  };
}
