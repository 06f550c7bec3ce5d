import { Matrix } from 'ml-matrix';
import { continuousPoles, eigenvalues } from '../linear/eigenvalues.ts';
import { holdInput } from '../linear/hold-input.ts';
import { resolventOf } from '../linear/resolvent.ts';
import {
  addComplex,
  type Complex,
  complex,
  divideComplex,
  expComplex,
  multiplyComplex,
  powerOfComplex,
} from '../numeric/complex.ts';
import type { LinearVehicle } from '../vehicle/linearise.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import {
  controllerAt,
  derivativeAt,
  derivativeOf,
  type Gains,
  integratorAt,
  type LoopTiming,
  onCircle,
} from './controller-response.ts';
import { linearPlant } from './linear-plant.ts';
import type { ScannableLoop } from './loop-scan.ts';
import { sensorDelay } from './sensor-delay.ts';

export type { Gains, LoopTiming };

/** What pushes the loop out of its rest: deviations that begin at time 0 and stay. */
export interface Push {
  /** Step of the set speed, in true speed [m/s]. */
  readonly reference: number;
  readonly setpointWeight: number;
  /** Acceleration that the road takes away or adds [m/s2]. */
  readonly disturbance: number;
}

/**
 * The small-signal loop of a vehicle under a sampled P, PI or PID controller, with every lag that the replay has: zero-order hold,
 * dead time and lag of the actuator, drive lag, the vehicle, sensor filter, sensor and computing delay; a sensor that
 * counts or times pulses by the mean age of what it shows. Limits of range and rate, slack and steps are left out.
 *
 *     dy/dt = (u - y) / ta,  dx/dt = (y - x) / td,  dv/dt = a v + b x + d,  dz/dt = (v - z) / tf
 *
 * and, with a belt, its ratio as told in vehicle/belt-motion.ts, solved exactly over a sample. The controller sees
 * scale z(t - delay), all delays in one; a delay that is no whole number of samples is met by the state at the instant
 * within the sample.
 */
export interface SampledLoop extends ScannableLoop {
  /** Speed at every `spacing` from time 0 for a whole number of samples [m/s], all starting from rest. */
  respond(gains: Gains, push: Push, duration: number, spacing: number): SpeedResponse;
  /**
   * Poles of the closed loop in the s plane [1/s], slowest first. Where the delay is longer than 60 samples they are those of
   * a loop with a coarser sample and the same lag in all, whose slow poles agree to a few thousandths.
   */
  poles(gains: Gains): readonly Complex[];
  readonly timing: LoopTiming;
  /** The gains with which both s values, a conjugate pair or two real ones, are poles of the closed loop. */
  placePair(frequency: number, damping: number): Gains;
}

export interface SpeedResponse {
  readonly speed: Float64Array;
  /** [s] */
  readonly spacing: number;
}

/** Measurements on their way up to which the closed loop is one matrix. */
const LONGEST_QUEUE = 60;

/** Builds the loop around a linear model of the vehicle. */
export function sampledLoop(vehicle: Vehicle, model: LinearVehicle, timing: LoopTiming): SampledLoop {
  const { sample, integration } = timing;
  const backward = integration === 'backward';
  const scale = 1 + vehicle.sensor.scaleError;
  const plant = linearPlant(vehicle, model);
  const { order, speed, measured } = plant;
  const whole = holdInput(plant.a, plant.b, sample);
  // A command that is late by computing delay and dead time is the command of a measurement that is older by them.
  const delay = sensorDelay(vehicle.sensor, model.speed) + timing.computingDelay + vehicle.actuator.deadTime;
  // The measurement of sample k is taken at t_k - delay, `share` of a sample after t_(k - back).
  const samplesLate = delay / sample;
  const back = Math.ceil(samplesLate - 1e-9);
  const share = Math.max(0, back - samplesLate);
  const late = holdInput(plant.a, plant.b, share * sample);
  const row = Float64Array.from({ length: order }, (_, j) => scale * late.phi.get(measured, j));
  const direct = scale * late.gamma.get(measured, 0);

  const kept = new Map<number, { readonly phi: Float64Array; readonly gamma: Float64Array }>();
  /** The plant over one of so many parts of a sample. */
  function partOfSample(parts: number): { readonly phi: Float64Array; readonly gamma: Float64Array } {
    const known = kept.get(parts);
    if (known !== undefined) return known;
    const { phi, gamma } = holdInput(plant.a, plant.b, sample / parts);
    const made = { phi: Float64Array.from(phi.to1DArray()), gamma: Float64Array.from(gamma.to1DArray()) };
    kept.set(parts, made);
    return made;
  }

  function respond(gains: Gains, push: Push, duration: number, spacing: number): SpeedResponse {
    const parts = Math.max(1, Math.ceil(sample / spacing - 1e-9));
    const { phi, gamma } = partOfSample(parts);
    const samples = Math.ceil(duration / sample);
    const values = new Float64Array(samples * parts + 1);
    const reference = scale * push.reference;
    const { gain: slipGain, kept } = derivativeOf(gains, sample);
    let filtered = 0;
    const disturbanceSeen = scale * late.gamma.get(measured, 1) * push.disturbance;
    const queue = new Float64Array(Math.max(back, 1));
    let x = new Float64Array(order);
    let next = new Float64Array(order);
    let integral = 0;
    for (let k = 0, at = 1; k < samples; k++) {
      const seen = back === 0 ? scale * x[measured]! : queue[k % back]!;
      const increment = gains.ki * sample * (reference - seen);
      if (backward) integral += increment;
      const slip = slipGain === 0 ? 0 : seen - filtered;
      filtered += (1 - kept) * slip;
      const u = gains.kp * (push.setpointWeight * reference - seen) - slipGain * slip + integral;
      if (!backward) integral += increment;
      if (back > 0) {
        let sum = direct * u + disturbanceSeen;
        for (let j = 0; j < order; j++) sum += row[j]! * x[j]!;
        queue[k % back] = sum;
      }
      for (let part = 0; part < parts; part++, at++) {
        for (let i = 0; i < order; i++) {
          let sum = gamma[2 * i]! * u + gamma[2 * i + 1]! * push.disturbance;
          for (let j = 0; j < order; j++) sum += phi[i * order + j]! * x[j]!;
          next[i] = sum;
        }
        [x, next] = [next, x];
        values[at] = x[speed]!;
      }
    }
    return { speed: values, spacing: sample / parts };
  }

  /** State, measurements on their way (the newest first), filtered measurement of a derivative, integral. */
  function closedLoop(gains: Gains): Matrix {
    const { gain: slipGain, kept } = derivativeOf(gains, sample);
    const derives = slipGain !== 0;
    const size = order + back + (derives ? 2 : 1);
    const filtered = size - 2;
    const matrix = Matrix.zeros(size, size);
    const last = size - 1;
    const seen = new Float64Array(size);
    if (back === 0) seen[measured] = scale;
    else seen[order + back - 1] = 1;
    const command = seen.map((value) => -(gains.kp + (backward ? gains.ki * sample : 0) + slipGain) * value);
    command[last] = 1;
    if (derives) command[filtered] = slipGain;
    for (let j = 0; j < size; j++) {
      for (let i = 0; i < order; i++)
        matrix.set(i, j, (j < order ? whole.phi.get(i, j) : 0) + whole.gamma.get(i, 0) * command[j]!);
      if (back > 0) matrix.set(order, j, (j < order ? row[j]! : 0) + direct * command[j]!);
      matrix.set(last, j, (j === last ? 1 : 0) - gains.ki * sample * seen[j]!);
      if (derives) matrix.set(filtered, j, (j === filtered ? kept : 0) + (1 - kept) * seen[j]!);
    }
    for (let i = 1; i < back; i++) matrix.set(order + i, order + i - 1, 1);
    return matrix;
  }

  function poles(gains: Gains): readonly Complex[] {
    if (back <= LONGEST_QUEUE) return continuousPoles(eigenvalues(closedLoop(gains)), sample);
    const coarse = sample * Math.ceil(back / (LONGEST_QUEUE / 2));
    // Half a sample of hold more is taken off the delay; the rectangle rule adds or takes ki h / 2 of P.
    const more = (coarse - sample) / 2;
    const twin = sampledLoop(vehicle, model, {
      sample: coarse,
      computingDelay: timing.computingDelay - more,
      integration,
    });
    return twin.poles({
      ...gains,
      kp: gains.kp + (backward ? -more : more) * gains.ki,
      derivativeFilter: Math.max(0, (gains.derivativeFilter ?? 0) - 2 * more),
    });
  }

  const stateAt = resolventOf(whole.phi, whole.gamma.getColumn(0));
  /** From command to measurement; null at a pole. */
  function measurement(z: Complex): Complex | null {
    const state = stateAt(z);
    if (state === null) return null;
    if (back === 0) return multiplyComplex(complex(scale), state[measured]!);
    const now = state.reduce(
      (sum, part, j) => addComplex(sum, multiplyComplex(complex(row[j]!), part)),
      complex(direct),
    );
    return divideComplex(now, powerOfComplex(z, back));
  }
  const plantAt = (z: Complex): Complex => measurement(z) ?? complex(Number.POSITIVE_INFINITY);
  function openLoop(gains: Gains, frequency: number): Complex {
    const z = onCircle(frequency, sample);
    const path = measurement(z);
    return path === null
      ? complex(Number.POSITIVE_INFINITY)
      : multiplyComplex(controllerAt(gains, timing, z), path);
  }

  // 1 + C(z) G(z) = 0 at both poles: two equations, linear in the gains.
  function placePair(frequency: number, damping: number): Gains {
    // At a damping of 1 the two equations become one; so close to it that no figure shows, they are two.
    const ratio = Math.abs(damping - 1) < 1e-7 ? 1 - 1e-7 : damping;
    const equation = (s: Complex): { readonly left: Complex; readonly right: Complex } => {
      const z = expComplex(complex(s.re * sample, s.im * sample));
      const path = measurement(z);
      return {
        left: integratorAt(timing, z),
        right: path === null ? complex(0) : divideComplex(complex(-1), path),
      };
    };
    if (ratio < 1) {
      const pole = complex(-ratio * frequency, frequency * Math.sqrt(1 - ratio * ratio));
      const { left, right } = equation(pole);
      const ki = right.im / left.im;
      return { kp: right.re - ki * left.re, ki };
    }
    const apart = Math.sqrt(ratio * ratio - 1);
    const slow = equation(complex(-frequency / (ratio + apart)));
    const fast = equation(complex(-frequency * (ratio + apart)));
    const ki = (slow.right.re - fast.right.re) / (slow.left.re - fast.left.re);
    return { kp: slow.right.re - ki * slow.left.re, ki };
  }

  return {
    timing,
    plantPoles: eigenvalues(plant.a),
    highest: Math.PI / sample,
    placeAt: (s) => expComplex(complex(s.re * sample, s.im * sample)),
    plantAt,
    integratorAt: (z) => integratorAt(timing, z),
    derivativeAt: (gains, z) => derivativeAt(gains, sample, z),
    respond,
    poles,
    openLoop,
    placePair,
  };
}
