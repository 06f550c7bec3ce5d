import { runningIntegral } from '../numeric/running-integral.ts';
import { STANDARD_GRAVITY } from '../units/constants.ts';
import type { CoastRun, CoastSetting } from './coast-down.ts';

/** Pieces that a run is cut into: enough to see the speed's course, few enough that a piece averages its noise away. */
const PIECES = 12;
const FEWEST_SAMPLES = 4;

/** The balance of energy over the pieces of a run: each number from the middle of one piece to that of the next. */
export interface CoastRows {
  /** Lost energy of motion and height [J]. */
  readonly lost: Float64Array;
  /** m g ds cos(theta): times the rolling coefficient the work of the tyres [J]. */
  readonly rolling: Float64Array;
  /** The same with the speed in it: times the growth of the coefficient [J m/s]. */
  readonly rollingGrowth: Float64Array;
  /** m g ds, negative on the way back: times the grade of the road the work against it [J]. */
  readonly slope: Float64Array;
  /** Way [m] and mean speed [m/s]. */
  readonly way: Float64Array;
  readonly speed: Float64Array;
}

/** What of them hangs on the wind. */
export interface AirRows {
  /** 1/2 rho times the integral of va ax ds: times the drag area the work of the air [J/m2]. */
  readonly air: Float64Array;
  /** Derivative of `air` by a wind along the road, against the way there [J s/m3]. */
  readonly airByWind: Float64Array;
}

/**
 * Rows of the regression of a run. Along a run m_e v^2 / 2 + m g z falls by what tyres and air take, so that each sample
 * gives one linear equation with the integrals of the powers of the speed up to it, and so does any average of samples:
 * the run is cut into up to 12 pieces, each piece averaged, and neighbours subtracted. Nothing is differentiated, the
 * noise of the speed is averaged over a piece, and on data without noise the equations are exact but for the rule of
 * integration.
 */
export function coastRows(run: CoastRun, { mass, rotatingMass }: CoastSetting): CoastRows {
  const { time, speed } = run;
  const forth = run.direction === 'there' ? 1 : -1;
  const weight = mass * STANDARD_GRAVITY;
  const integral = (of: (v: number, i: number) => number): Float64Array =>
    runningIntegral(time, speed.map(of));
  const { grade } = run;
  const height =
    grade === null
      ? run.elevation
      : integral((v, i) => (v * grade[i]!) / Math.sqrt(1 + grade[i]! * grade[i]!));
  const across = (i: number): number => (grade === null ? 1 : 1 / Math.sqrt(1 + grade[i]! * grade[i]!));
  const way = integral((v) => v);
  const energy = speed.map((v, i) => ((mass + rotatingMass) * v * v) / 2 + weight * (height?.[i] ?? 0));
  const steps = (levels: Float64Array, factor = 1): Float64Array => stepsBetweenPieces(levels, factor);
  const means = pieceMeans(speed);
  return {
    lost: steps(energy, -1),
    rolling: steps(grade === null ? way : integral((v, i) => v * across(i)), weight),
    rollingGrowth: steps(
      integral((v, i) => v * v * across(i)),
      weight,
    ),
    slope: steps(way, weight * forth),
    way: steps(way),
    speed: Float64Array.from({ length: means.length - 1 }, (_, k) => (means[k]! + means[k + 1]!) / 2),
  };
}

/**
 * The part of the rows that the air has.
 *
 * @param wind along the road, against the way there [m/s], beside what the run has logged
 */
export function airRows(run: CoastRun, { airDensity }: CoastSetting, wind: number): AirRows {
  const { time, speed, headwind } = run;
  const forth = run.direction === 'there' ? 1 : -1;
  const ahead = speed.map((v, i) => v + (headwind?.[i] ?? 0) + forth * wind);
  const work = runningIntegral(
    time,
    speed.map((v, i) => ahead[i]! * Math.abs(ahead[i]!) * v),
  );
  const byWind = runningIntegral(
    time,
    speed.map((v, i) => Math.abs(ahead[i]!) * v),
  );
  return {
    air: stepsBetweenPieces(work, airDensity / 2),
    airByWind: stepsBetweenPieces(byWind, airDensity * forth),
  };
}

/** Means of the pieces of a run, as `coastRows` cuts it. */
export function pieceMeans(samples: Float64Array): Float64Array {
  const count = Math.max(2, Math.min(PIECES, Math.floor(samples.length / FEWEST_SAMPLES)));
  return Float64Array.from({ length: count }, (_, k) => {
    const from = Math.floor((k * samples.length) / count);
    const to = Math.floor(((k + 1) * samples.length) / count);
    let sum = 0;
    for (let i = from; i < to; i++) sum += samples[i]!;
    return sum / (to - from);
  });
}

function stepsBetweenPieces(levels: Float64Array, factor: number): Float64Array {
  const means = pieceMeans(levels);
  return Float64Array.from({ length: means.length - 1 }, (_, k) => factor * (means[k + 1]! - means[k]!));
}
