import type { Vehicle } from '../vehicle/vehicle.ts';
import {
  BUS_FEEDFORWARD,
  BUS_GEAR,
  BUS_LIMITED,
  BUS_MEASURED,
  BUS_PROPORTIONAL,
  BUS_REFERENCE,
} from './bus.ts';
import { disturbanceObserver } from './disturbance-observer.ts';
import { feedforward } from './feedforward.ts';
import { gainsAt } from './gain-schedule.ts';
import { DERIVATIVE, LAST_KD, LAST_KP, LAST_SHAPE, LAST_SLIP } from './memory.ts';
import type { PidSetup } from './setup.ts';
import { vehicleModel } from './vehicle-model.ts';

// Places of what a sample works with.
/** Gains: kp, ki Ts, and kd / (Tf + Ts). */
export const W_KP = 0;
export const W_KI = 1;
export const W_KD = 2;
/** Error of the integral; what kp and kd multiply; all parts but the integral. */
export const W_ERROR = 3;
export const W_SHAPE = 4;
export const W_SLIP = 5;
export const W_REST = 6;
/** Range of the command at this sample. */
export const W_LEAST = 7;
export const W_MOST = 8;
const W_SIZE = 9;

/** The parts of a PID controller that both forms have. */
export interface PidParts {
  /** Where `begin` writes: W_ places. Nothing in it outlives a sample. */
  readonly work: Float64Array;
  /** Gains, error, feedforward and range of a sample; writes BUS_PROPORTIONAL and BUS_FEEDFORWARD. */
  readonly begin: (bus: Float64Array) => void;
  /** Remembers gains and what they multiplied. */
  readonly keep: (bus: Float64Array) => void;
  /** Puts filters, model and derivative at rest and begins a sample. */
  readonly engage: (bus: Float64Array) => void;
}

/**
 * Proportional, derivative and model parts. With dead band d, e = r - y:
 *
 *     e' = e - d sgn(e) beyond it, else 0            y' = r - e'
 *     P = kp (b r - y'),  D = -kd / (Tf + Ts) (y - x),  x <- (Tf x + Ts y) / (Tf + Ts)
 *
 * D is the backward difference of kd s / (1 + Tf s) on the measurement (Astrom and Hagglund, Advanced PID Control,
 * 2006, from memory). A rate limit narrows the range of the sample around the last command, so that every form and
 * every anti-windup sees it.
 */
export function pidParts(setup: PidSetup, low: number, high: number, vehicle: Vehicle): PidParts {
  const { sample, deadBand, schedule } = setup;
  const model = setup.model === null ? null : vehicleModel(setup.model, vehicle, low, high);
  const feed =
    model === null || setup.feedforward === null ? null : feedforward(setup.feedforward, model, sample);
  const knowsGrade = setup.feedforward !== null && setup.feedforward.grade !== null;
  const observer =
    model === null || setup.observerFilter === null
      ? null
      : disturbanceObserver(setup.observerFilter, model, sample, knowsGrade);
  const work = new Float64Array(W_SIZE);
  const spread = setup.derivativeFilter + sample;
  const derives = setup.kd !== 0;
  const constants = Float64Array.of(
    low,
    high,
    setup.rateLimit === null ? Number.POSITIVE_INFINITY : setup.rateLimit * sample,
    setup.setpointWeight,
    deadBand?.halfWidth ?? 0,
    derives ? setup.derivativeFilter / spread : 0,
  );
  const banded = deadBand !== null;
  const integratesInside = deadBand?.integratesInside === true;
  const limited = setup.rateLimit !== null;
  const gains = gainsAt(
    { kp: setup.kp, ki: setup.ki * sample, kd: setup.kd / spread },
    schedule,
    vehicle.drive.gears.length,
  );
  const scheduled = schedule !== null;
  gains(0, 0, work);

  const begin = (bus: Float64Array): void => {
    const reference = bus[BUS_REFERENCE];
    const measured = bus[BUS_MEASURED];
    if (scheduled) gains(bus[BUS_GEAR], measured, work);
    bus[BUS_FEEDFORWARD] = 0;
    if (feed !== null) feed.step(bus);
    if (observer !== null) observer.step(bus);
    const error = reference - measured;
    let seen = measured;
    work[W_ERROR] = error;
    if (banded) {
      const width = constants[4];
      const beyond = error > width ? error - width : error < -width ? error + width : 0;
      seen = reference - beyond;
      if (!integratesInside) work[W_ERROR] = beyond;
    }
    const shape = constants[3] * reference - seen;
    let proportional = work[W_KP] * shape;
    if (derives) {
      const before = bus[DERIVATIVE];
      work[W_SLIP] = measured - before;
      bus[DERIVATIVE] = measured + constants[5] * (before - measured);
      proportional -= work[W_KD] * work[W_SLIP];
    }
    work[W_SHAPE] = shape;
    work[W_REST] = proportional + bus[BUS_FEEDFORWARD];
    work[W_LEAST] = constants[0];
    work[W_MOST] = constants[1];
    if (limited) {
      const last = bus[BUS_LIMITED];
      if (last - constants[2] > work[W_LEAST]) work[W_LEAST] = last - constants[2];
      if (last + constants[2] < work[W_MOST]) work[W_MOST] = last + constants[2];
    }
    bus[BUS_PROPORTIONAL] = proportional;
  };
  const keep = (bus: Float64Array): void => {
    bus[LAST_KP] = work[W_KP];
    bus[LAST_KD] = work[W_KD];
    bus[LAST_SHAPE] = work[W_SHAPE];
    bus[LAST_SLIP] = work[W_SLIP];
  };
  const engage = (bus: Float64Array): void => {
    feed?.engage(bus);
    observer?.engage(bus);
    bus[DERIVATIVE] = bus[BUS_MEASURED];
    begin(bus);
    keep(bus);
  };
  return { work, begin, keep, engage };
}
