import { loopMargins } from '../linear/margins.ts';
import { sizeOfComplex } from '../numeric/complex.ts';
import { fromDeg } from '../units/convert.ts';
import { linearise } from '../vehicle/linearise.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import { throttleRange } from '../vehicle/throttle-range.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { LinearController } from './linear-controller.ts';
import { type Gains, type LoopTiming, type SampledLoop, sampledLoop } from './sampled-loop.ts';

/** How far the linear loop of a candidate is from oscillating. */
export interface LoopStability {
  /** True speed that it stands for [m/s], and gear, index into the drive's gears. */
  readonly speed: number;
  readonly gear: number;
  /** Every pole of the closed loop decays. */
  readonly stable: boolean;
  /** Factor on the gain at which it oscillates, Infinity where none does; null for a loop that is not stable. */
  readonly gainMargin: number | null;
  /** Lag at the gain crossover with which it oscillates [rad], Infinity without a crossover; null as above. */
  readonly phaseMargin: number | null;
}

/** Common practice: gain margins of 2 to 5, phase margins of 30 to 60 deg (Astrom and Hagglund, Advanced PID Control, 2006, from memory). */
export const USUAL_GAIN_MARGIN = 2;
export const USUAL_PHASE_MARGIN = fromDeg(30);

/** Lowest frequency that is scanned for crossovers [rad/s]: a quarter of a day for a turn. */
const SLOWEST = 3e-4;
/** Of more set speeds than this, only the lowest and the highest are looked at: what lies between stands between. */
const MOST_SPEEDS = 8;
/** A pole nearer to 0 than this is the integral of a controller that does not use it [1/s]. */
const STANDS = 1e-9;

/**
 * Poles and margins of a candidate's sampled loop, with all lags and without the limits of range and rate, on the level in
 * the given surroundings: at the set speed and in the gear where it stands worst. Gains whose loop is unstable cannot hold a speed whatever
 * the road: the run swings between the limits.
 *
 * @param controller gains that hold everywhere, or as they are at a place
 * @param speeds true set speeds of the case [m/s]
 * @param gears in which it is driven, indices into the drive's gears
 * @returns null where the drive can hold none of these speeds on the level in any of these gears, or has no effect
 */
export function loopStability(
  vehicle: Vehicle,
  controller: (Gains & LoopTiming) | LinearController,
  speeds: readonly number[],
  surroundings: Surroundings,
  gears: readonly number[] = [vehicle.drive.gear],
): LoopStability | null {
  const { least, greatest } = throttleRange(vehicle);
  let worst: LoopStability | null = null;
  const inOrder = [...new Set(speeds)].sort((a, b) => a - b);
  const few = inOrder.length <= MOST_SPEEDS ? inOrder : [inOrder[0]!, inOrder.at(-1)!];
  for (const gear of new Set(gears)) {
    const inGear = { ...vehicle, drive: { ...vehicle.drive, gear } };
    for (const speed of few) {
      if (vehicle.drive.gears[gear]!.ratio * speed < vehicle.drive.stallSpeed) continue;
      const model = linearise(inGear, { speed, surroundings });
      if (model === null || !model.feasible || model.throttle < least || model.throttle > greatest) continue;
      const shown = speed * (1 + vehicle.sensor.scaleError);
      const gains = 'gainsAt' in controller ? controller.gainsAt(gear, shown) : controller;
      const found = {
        speed,
        gear,
        ...stabilityOf(sampledLoop(inGear, model, controller), gains, controller.sample),
      };
      if (worst === null || reserveOf(found) < reserveOf(worst)) worst = found;
    }
  }
  return worst;
}

/** Stability and margins of one loop under these gains. */
export function stabilityOf(
  loop: SampledLoop,
  gains: Gains,
  sample: number,
): Omit<LoopStability, 'speed' | 'gear'> {
  const poles = loop.poles(gains).filter((pole) => gains.ki !== 0 || sizeOfComplex(pole) > STANDS);
  if (!poles.every((pole) => pole.re < 0)) return { stable: false, gainMargin: null, phaseMargin: null };
  const { gainMargin, phaseMargin } = loopMargins((w) => loop.openLoop(gains, w), SLOWEST, Math.PI / sample);
  return { stable: true, gainMargin, phaseMargin };
}

/** The nearer of the two margins, in usual ones; 0 for a loop that is not stable. */
function reserveOf({ gainMargin, phaseMargin }: LoopStability): number {
  if (gainMargin === null || phaseMargin === null) return 0;
  return Math.min((gainMargin - 1) / (USUAL_GAIN_MARGIN - 1), Math.abs(phaseMargin) / USUAL_PHASE_MARGIN);
}
