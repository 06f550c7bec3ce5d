import { Matrix } from 'ml-matrix';
import { type DelayedLoop, respondDelayed } from '../linear/delayed-response.ts';
import { eigenvalues } from '../linear/eigenvalues.ts';
import { resolventOf } from '../linear/resolvent.ts';
import {
  addComplex,
  type Complex,
  complex,
  divideComplex,
  expComplex,
  multiplyComplex,
} from '../numeric/complex.ts';
import type { LinearVehicle } from '../vehicle/linearise.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { Gains } from './controller-response.ts';
import { linearPlant } from './linear-plant.ts';
import type { ScannableLoop } from './loop-scan.ts';
import type { Push, SpeedResponse } from './sampled-loop.ts';
import { sensorDelay } from './sensor-delay.ts';

/**
 * The small-signal loop as it would be without a sampler: the lags and delays of control/sampled-loop.ts, sensor,
 * actuator and computing, under u = kp (weight r - y) + I - kd dy/dt behind its filter. What sampled loops tend to as the
 * sample time falls.
 */
export interface ContinuousLoop extends ScannableLoop {
  /** Speed at every `spacing`, or the next shorter one that divides the dead time. */
  respond(gains: Gains, push: Push, duration: number, spacing: number): SpeedResponse;
}

/** Highest frequency that is scanned [rad/s]: far above what lags let through. */
const HIGHEST = 1e4;
/** A derivative without a filter is one with a filter this short [s]. */
const LEAST_FILTER = 1e-6;

/** Builds the loop around a linear model of the vehicle. */
export function continuousLoop(
  vehicle: Vehicle,
  model: LinearVehicle,
  { computingDelay }: { readonly computingDelay: number },
): ContinuousLoop {
  const plant = linearPlant(vehicle, model);
  const { order, speed, measured } = plant;
  const scale = 1 + vehicle.sensor.scaleError;
  const delay = sensorDelay(vehicle.sensor, model.speed) + computingDelay + vehicle.actuator.deadTime;
  const stateAt = resolventOf(plant.a, plant.b.getColumn(0));

  function plantAt(s: Complex): Complex {
    const state = stateAt(s);
    if (state === null) return complex(Number.POSITIVE_INFINITY);
    const { re, im } = expComplex(complex(-delay * s.re, -delay * s.im));
    return multiplyComplex(complex(scale * re, scale * im), state[measured]!);
  }

  function openLoop(gains: Gains, frequency: number): Complex {
    const s = complex(0, frequency);
    const integral = divideComplex(complex(gains.ki), s);
    const controller = addComplex(addComplex(complex(gains.kp), derivativeAt(gains, s)), integral);
    return multiplyComplex(controller, plantAt(s));
  }

  function respond(gains: Gains, push: Push, duration: number, spacing: number): SpeedResponse {
    const { values, spacing: step } = respondDelayed(closed(gains, push), speed, duration, spacing);
    return { speed: values, spacing: step };
  }

  /** State of the vehicle, integral, filtered measurement of the derivative; what comes late is the measurement. */
  function closed({ kp, ki, kd = 0, derivativeFilter = 0 }: Gains, push: Push): DelayedLoop {
    const derives = kd !== 0;
    const size = order + (derives ? 2 : 1);
    const integral = order;
    const filtered = order + 1;
    const filter = Math.max(derivativeFilter, LEAST_FILTER);
    const reference = scale * push.reference;
    const slip = derives ? kd / filter : 0;
    const a = Matrix.zeros(size, size);
    a.setSubMatrix(plant.a, 0, 0);
    const late = new Array<number>(size).fill(0);
    const pushes = new Array<number>(size).fill(0);
    for (let i = 0; i < order; i++) {
      const command = plant.b.get(i, 0);
      a.set(i, integral, command);
      if (derives) a.set(i, filtered, command * slip);
      late[i] = -command * (kp + slip);
      pushes[i] = command * kp * push.setpointWeight * reference + plant.b.get(i, 1) * push.disturbance;
    }
    late[integral] = -ki;
    pushes[integral] = ki * reference;
    if (derives) {
      a.set(filtered, filtered, -1 / filter);
      late[filtered] = 1 / filter;
    }
    const feedback = Array.from({ length: size }, (_, i) => (i === measured ? scale : 0));
    return { a, b: late, push: pushes, feedback, reference: 0, delay };
  }

  return {
    plantPoles: eigenvalues(plant.a),
    highest: HIGHEST,
    placeAt: (s) => s,
    plantAt,
    integratorAt: (s) => divideComplex(complex(1), s),
    derivativeAt,
    openLoop,
    respond,
  };
}

/** kd s / (Tf s + 1). */
function derivativeAt({ kd = 0, derivativeFilter = 0 }: Gains, s: Complex): Complex {
  const filter = complex(1 + derivativeFilter * s.re, derivativeFilter * s.im);
  return divideComplex(complex(kd * s.re, kd * s.im), filter);
}
