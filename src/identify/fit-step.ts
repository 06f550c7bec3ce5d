import { exp } from '../numeric/elementary.ts';
import { fitCurve } from '../numeric/fit-curve.ts';
import { colourOf } from './coloured-residuals.ts';
import { type Estimate, estimateOf, scaledEstimate } from './estimate.ts';
import type { FittedStep, StepNumbers, StepRecord, StepTestFit } from './step-test.ts';
import { stepLevels, twoPointStep } from './two-point-step.ts';

const UNKNOWNS = 4;

/**
 * Gain, time constant and delay of a step, by least squares of
 *
 *     v = v0 + K du (1 - exp(-(t - L) / T)),  t > L
 *
 * over the whole record, v0 fitted as well, from the two-point numbers on. Standard errors count
 * coloured residuals for as many as are independent (`colourOf`).
 *
 * @returns null where the fit does not settle, or the record does not tell the numbers apart
 */
export function fitStep(record: StepRecord): FittedStep | null {
  const { time, speed, from, to } = record;
  const twoPoint = twoPointStep(record);
  const levels = stepLevels(record);
  const start = Float64Array.of(
    levels.before,
    levels.after - levels.before,
    Math.max(twoPoint.timeConstant || 1, 0.05),
    Math.max(twoPoint.delay || 0, 0),
  );
  const fit = fitCurve(
    {
      samples: time.length,
      least: [Number.NEGATIVE_INFINITY, Number.NEGATIVE_INFINITY, 1e-3, 0],
      evaluate: ([before, rise, lag, delay], residual, [byBefore, byRise, byLag, byDelay]) => {
        for (let i = 0; i < time.length; i++) {
          const since = Math.max(0, time[i]! - delay!);
          const left = exp(-since / lag!);
          residual[i] = speed[i]! - before! - rise! * (1 - left);
          byBefore![i] = 1;
          byRise![i] = 1 - left;
          byLag![i] = (-rise! * left * since) / (lag! * lag!);
          byDelay![i] = since > 0 ? (-rise! * left) / lag! : 0;
        }
      },
    },
    start,
  );
  if (fit.status !== 'settled' || fit.linear.status === 'dependent') return null;
  const [before, rise, lag, delay] = fit.unknowns as unknown as readonly [number, number, number, number];
  const { residuals, inverse } = fit.linear;
  const squares = residuals.reduce((sum, r) => sum + r * r, 0);
  const { factor, independent } = colourOf(residuals, UNKNOWNS);
  const variance = (squares / (time.length - UNKNOWNS)) * factor;
  const degrees = Math.max(1, independent - UNKNOWNS);
  const of = (i: number, value: number): Estimate =>
    estimateOf(value, Math.sqrt(variance * inverse[i]![i]!), degrees);
  return {
    record,
    twoPoint,
    before,
    settled: before + rise,
    fit: {
      gain: scaledEstimate(of(1, rise), 1 / (to - from)),
      timeConstant: of(2, lag),
      delay: of(3, delay),
    },
    rmsSpeed: Math.sqrt(squares / residuals.length),
  };
}

/** Steps of a test together: means over all, over those up and over those down. */
export function joinSteps(steps: readonly FittedStep[]): StepTestFit {
  const ups = steps.filter(({ record }) => record.to > record.from);
  const downs = steps.filter(({ record }) => record.to < record.from);
  return {
    steps,
    all: meanOf(steps)!,
    up: meanOf(ups),
    down: meanOf(downs),
  };
}

function meanOf(steps: readonly FittedStep[]): StepNumbers<Estimate> | null {
  if (steps.length === 0) return null;
  return {
    gain: meanEstimate(steps.map(({ fit }) => fit.gain)),
    timeConstant: meanEstimate(steps.map(({ fit }) => fit.timeConstant)),
    delay: meanEstimate(steps.map(({ fit }) => fit.delay)),
  };
}

function meanEstimate(estimates: readonly Estimate[]): Estimate {
  const count = estimates.length;
  if (count === 1) return estimates[0]!;
  const mean = estimates.reduce((sum, { value }) => sum + value, 0) / count;
  const scatter = estimates.reduce((sum, { value }) => sum + (value - mean) * (value - mean), 0);
  return estimateOf(mean, Math.sqrt(scatter / (count - 1) / count), count - 1);
}
