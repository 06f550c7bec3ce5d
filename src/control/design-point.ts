import { loopMargins } from '../linear/margins.ts';
import { type StepFigures, stepFigures } from '../linear/step-figures.ts';
import { type Complex, complex, sizeOfComplex } from '../numeric/complex.ts';
import { InputError } from '../problems/input-error.ts';
import { fromRpm, toKmh, toPct } from '../units/convert.ts';
import { type LinearVehicle, linearise } from '../vehicle/linearise.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import { throttleRange } from '../vehicle/throttle-range.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { type Gains, type SampledLoop, sampledLoop } from './sampled-loop.ts';
import { sensorDelay } from './sensor-delay.ts';
import type { DesignRecord } from './setup.ts';

/** Where and for what controller gains are designed. */
export interface DesignPoint {
  readonly vehicle: Vehicle;
  /** Speed of the operating point [m/s]. */
  readonly at: number;
  readonly surroundings: Surroundings;
  /** Sample time [s]. */
  readonly sample: number;
  /** From sample to command [s]. */
  readonly computingDelay: number;
  readonly integration: 'forward' | 'backward';
  /** Share of the reference in the proportional part, 0 to 1. */
  readonly setpointWeight: number;
}

/** Gains and where they come from. */
export interface Designed extends Gains {
  readonly record: DesignRecord;
}

/** Half-width of the settling band. A response that just touches 2 % counts as within it. */
const SETTLING_BAND = 0.02002;
/** Grade of the droop that every design promises. */
const GRADE_UNIT = 0.01;

/** The loop that a design is made on. */
export interface DesignLoop {
  readonly point: DesignPoint;
  readonly model: LinearVehicle;
  readonly loop: SampledLoop;
  /** Frequency above which the lags and delays of the loop matter [rad/s]. */
  readonly careful: number;
}

/**
 * Linearises the vehicle at the point and closes the loop around it.
 *
 * @throws InputError `design-not-feasible` where the drive cannot hold the operating point or has no effect there
 */
export function designLoop(point: DesignPoint): DesignLoop {
  const model = linearise(point.vehicle, { speed: point.at, surroundings: point.surroundings });
  const { least, greatest } = throttleRange(point.vehicle);
  if (model === null)
    throw notFeasible(
      'the throttle has no effect at the operating point',
      speedWords(point.at),
      'a speed that the drive can hold',
    );
  if (!model.feasible || model.throttle < least || model.throttle > greatest)
    throw notFeasible(
      `the drive cannot hold the operating point of ${speedWords(point.at)}`,
      `a throttle of ${figure(toPct(model.throttle))} %`,
      `${toPct(least)} to ${toPct(greatest)} %${gearHint(point.vehicle)}`,
    );
  const { actuator, drive, sensor } = point.vehicle;
  const delays = actuator.deadTime + sensorDelay(sensor, point.at) + point.computingDelay + point.sample / 2;
  const lags = actuator.lag + drive.lag + (model.belt?.lag ?? 0) + sensor.filter + delays;
  return { point, model, loop: sampledLoop(point.vehicle, model, point), careful: 0.3 / lags };
}

/** Too long or too short a ratio is the usual slip behind such a throttle: how fast the engaged gear is. */
function gearHint({ drive: { gear, gears } }: Vehicle): string {
  if (gears.length < 2) return '';
  const speed = fromRpm(1000) / gears[gear]!.ratio;
  return `; gear ${gear + 1} goes ${speedWords(speed)} at 1000 rpm: are gear and ratios right?`;
}

/** Acceleration lost at once when the road steps from the grade of the point by `step` [m/s2], positive uphill. */
export function gradePush({ point, model }: DesignLoop, step: number): number {
  const { vehicle, at, surroundings } = point;
  const after = requiredForce(vehicle, at, { ...surroundings, grade: surroundings.grade + step });
  return (after - requiredForce(vehicle, at, surroundings)) / model.effectiveMass;
}

/** Time in which a pair of poles has died out, and the peak of its response is over [s]. */
export function pairDuration(frequency: number, damping: number): number {
  const slow = damping < 1 ? damping : 1 / (damping + Math.sqrt(damping * damping - 1));
  return Math.max(8 / slow, 12) / frequency;
}

/** Figures of a small step of set speed under these gains. */
export function setSpeedStep(design: DesignLoop, gains: Gains, duration: number): StepFigures {
  const push = { reference: 1, setpointWeight: design.point.setpointWeight, disturbance: 0 };
  const { speed, spacing } = design.loop.respond(gains, push, duration, duration / 2000);
  const figures = stepFigures(speed, spacing, 1, SETTLING_BAND);
  // The response begins with the throttle that follows the step of set speed.
  const late = design.point.computingDelay + design.point.vehicle.actuator.deadTime;
  return { ...figures, settling: figures.settling + late };
}

/** Greatest loss of speed after a step of grade [m/s] (for a step downhill, the greatest gain). */
export function droopOf(design: DesignLoop, gains: Gains, gradeStep: number, duration: number): number {
  const push = {
    reference: 0,
    setpointWeight: 0,
    disturbance: -Math.abs(gradePush(design, gradeStep)),
  };
  const { speed } = design.loop.respond(gains, push, duration, duration / 2000);
  let lost = 0;
  for (const value of speed) lost = Math.max(lost, Number.isNaN(value) ? Number.POSITIVE_INFINITY : -value);
  return lost;
}

/** True where a placed pair rules the loop: every other pole is stable, no slower and decays no later. */
export function pairDominates(poles: readonly Complex[], frequency: number, damping: number): boolean {
  const apart = damping > 1 ? Math.sqrt(damping * damping - 1) : 0;
  const slowest = damping > 1 ? -frequency / (damping + apart) : -frequency * damping;
  const placed = [slowest, damping > 1 ? -frequency * (damping + apart) : slowest];
  const height = damping < 1 ? frequency * Math.sqrt(1 - damping * damping) : 0;
  const rest = [...poles];
  for (const re of placed) {
    const distance = (pole: Complex): number =>
      sizeOfComplex(complex(pole.re - re, Math.abs(pole.im) - height));
    let nearest = 0;
    for (let i = 1; i < rest.length; i++) if (distance(rest[i]!) < distance(rest[nearest]!)) nearest = i;
    rest.splice(nearest, 1);
  }
  return rest.every((pole) => pole.re < slowest && sizeOfComplex(pole) >= frequency);
}

/** What the linear loop promises besides what was asked; figures that do not exist are left out. */
export function promisedFigures(
  design: DesignLoop,
  gains: Gains,
  frequency: number,
  damping: number,
): Readonly<Record<string, number>> {
  const duration = pairDuration(frequency, damping);
  const step = setSpeedStep(design, gains, duration);
  const nyquist = Math.PI / design.point.sample;
  const margins = loopMargins(
    (w) => design.loop.openLoop(gains, w),
    Math.min(frequency / 1000, nyquist / 10),
    nyquist,
  );
  const figures: Readonly<Record<string, number>> = {
    settling: step.settling,
    overshoot: step.overshoot,
    rise: step.rise,
    damping,
    frequency,
    droopPerPctGrade: droopOf(design, gains, GRADE_UNIT, duration),
    gainMargin: margins.gainMargin,
    phaseMargin: margins.phaseMargin,
    delayMargin: margins.delayMargin,
    sensitivity: margins.sensitivity,
  };
  return Object.fromEntries(Object.entries(figures).filter(([, value]) => Number.isFinite(value)));
}

export function notFeasible(message: string, found: string, allowed: string): InputError {
  return new InputError({ code: 'design-not-feasible', place: { key: 'design' }, message, found, allowed });
}

/** Three figures, for people. */
export const figure = (value: number): string => String(Number(value.toPrecision(3)));
/** Three figures, rounded up: a limit that can be typed in and is met. */
export function figureAbove(value: number): string {
  const near = Number(value.toPrecision(3));
  return figure(near >= value ? near : value * 1.005);
}
export const speedWords = (speed: number): string => `${figure(toKmh(speed))} km/h`;

/** The gains in the units of case files, and a word of warning where P is negative. */
export function gainWords(gains: Gains): string {
  const perKmh = (gain: number): string => figure(toPct(gain) / toKmh(1));
  const negative =
    gains.kp < 0 ? '; P is negative, because the vehicle by itself is faster than was asked' : '';
  return `kp ${perKmh(gains.kp)} % per km/h, ki ${perKmh(gains.ki)} % per km/h s${negative}`;
}
