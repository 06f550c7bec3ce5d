import { continuousLoop } from '../control/continuous-loop.ts';
import type { LinearController } from '../control/linear-controller.ts';
import { plantTransfer } from '../control/linear-plant.ts';
import { loopScan } from '../control/loop-scan.ts';
import { type Push, type SpeedResponse, sampledLoop } from '../control/sampled-loop.ts';
import type { ControllerSetup } from '../control/setup.ts';
import { type StepFigures, stepFigures } from '../linear/step-figures.ts';
import { polesOf, zerosOf } from '../linear/transfer-function.ts';
import { type Complex, sizeOfComplex } from '../numeric/complex.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import type { OperatingPoint, PointMargins } from './operating-point.ts';
import { gainsAtPoint, linearAt, pointMarginsOf, vehicleAt } from './point-margins.ts';

/** Everything that is told of a loop at an operating point. */
export interface PointFigures {
  readonly margins: PointMargins;
  /** As it would be without a sampler: what shorter and shorter sample times come to. */
  readonly continuous: PointMargins;
  /** Poles and zeros of the vehicle from command to measured speed [1/s], dead time apart. */
  readonly plantPoles: readonly Complex[];
  readonly plantZeros: readonly Complex[];
  /** Poles of the closed sampled loop in the s plane [1/s], slowest first. */
  readonly poles: readonly Complex[];
  /** A small step of the set speed; null: unstable, or nothing brings the speed to the set speed (P alone). */
  readonly setSpeed: StepFigures | null;
  /** One per cent of grade more; null: unstable. */
  readonly load: LoadFigures | null;
}

/** What one per cent of grade costs, as long as no limit is met. */
export interface LoadFigures {
  /** Greatest loss of speed [m/s], and when [s]. */
  readonly droop: number;
  readonly droopAt: number;
  /** What is left of it at the end: 0 under an integral. */
  readonly left: number;
}

/** Half-width of the settling band. */
const SETTLING_BAND = 0.02;
const GRADE_STEP = 0.01;
/** Longest response that is looked at [s]; samples that it has at most. */
const LONGEST = 600;
const SAMPLES = 1500;
/** A pole nearer to 0 than this is the integral of a controller that does not use it [1/s]. */
const STANDS = 1e-9;

/** Margins, poles and responses of a controller at an operating point, sampled and continuous. */
export function pointFigures(
  point: OperatingPoint,
  controller: LinearController,
  setpointWeight = 1,
): PointFigures {
  const vehicle = vehicleAt(point);
  const model = linearAt(point);
  const gains = gainsAtPoint(point, controller);
  const transfer = plantTransfer(vehicle, model);
  const sampled = sampledLoop(vehicle, model, controller);
  const margins = pointMarginsOf(loopScan(sampled).margins(gains));
  const smooth = loopScan(continuousLoop(vehicle, model, controller));
  const poles = sampled.poles(gains).filter((pole) => gains.ki !== 0 || sizeOfComplex(pole) > STANDS);
  const steps = margins.stable
    ? pointSteps(point, (push, duration, spacing) => sampled.respond(gains, push, duration, spacing), poles, {
        setpointWeight,
      })
    : null;
  return {
    margins,
    continuous: pointMarginsOf(smooth.margins(gains)),
    plantPoles: polesOf(transfer),
    plantZeros: zerosOf(transfer),
    poles,
    setSpeed: steps === null || gains.ki === 0 ? null : setSpeedFigures(steps.setSpeed),
    load: steps === null ? null : loadFigures(steps.load),
  };
}

/** Responses of the true speed to 1 m/s of set speed and to one per cent of grade. */
export interface PointSteps {
  readonly setSpeed: SpeedResponse;
  readonly load: SpeedResponse;
}

/** The responses of a stable loop, as long as its slowest pole asks for, at most ten minutes. */
export function pointSteps(
  point: OperatingPoint,
  respond: (push: Push, duration: number, spacing: number) => SpeedResponse,
  poles: readonly Complex[],
  { setpointWeight }: { readonly setpointWeight: number },
): PointSteps {
  const slowest = poles.reduce((least, { re }) => Math.min(least, -re), Number.POSITIVE_INFINITY);
  const duration = Math.min(LONGEST, Math.max(5, 6 / slowest));
  const spacing = duration / SAMPLES;
  return {
    setSpeed: respond({ reference: 1, setpointWeight, disturbance: 0 }, duration, spacing),
    load: respond(
      { reference: 0, setpointWeight, disturbance: -gradeAcceleration(point) },
      duration,
      spacing,
    ),
  };
}

/** Acceleration that one per cent of grade more takes [m/s2]. */
function gradeAcceleration(point: OperatingPoint): number {
  const { speed, surroundings } = point;
  const vehicle = vehicleAt(point);
  const steeper = { ...surroundings, grade: surroundings.grade + GRADE_STEP };
  const force = requiredForce(vehicle, speed, steeper) - requiredForce(vehicle, speed, surroundings);
  return force / linearAt(point).effectiveMass;
}

const setSpeedFigures = ({ speed, spacing }: SpeedResponse): StepFigures =>
  stepFigures(speed, spacing, 1, SETTLING_BAND);

function loadFigures({ speed, spacing }: SpeedResponse): LoadFigures {
  let at = 0;
  for (let i = 1; i < speed.length; i++) if (speed[i] < speed[at]) at = i;
  return { droop: -speed[at], droopAt: at * spacing, left: -speed[speed.length - 1] };
}

/** Share of the set speed in P, where the controller is one that has it. */
export const setpointWeightOf = (controller: ControllerSetup): number =>
  'setpointWeight' in controller ? controller.setpointWeight : 1;
