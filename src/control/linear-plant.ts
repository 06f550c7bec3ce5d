import { Matrix } from 'ml-matrix';
import { transferFunctionOf } from '../linear/state-space.ts';
import type { TransferFunction } from '../linear/transfer-function.ts';
import type { LinearVehicle } from '../vehicle/linearise.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { sensorDelay } from './sensor-delay.ts';

/** A vehicle with its lags as a state-space system. */
export interface LinearPlant {
  readonly a: Matrix;
  /** Inputs: command, disturbance. */
  readonly b: Matrix;
  readonly order: number;
  /** Places of speed and filtered speed in the state. */
  readonly speed: number;
  readonly measured: number;
}

/** Shorter lags [s] change nothing that can be seen, and would make the matrices stiff beyond any use. */
const LEAST_LAG = 1e-6;

/** Only the lags that exist become states: each first-order lag follows the one before it; the ratio of a belt comes last. */
export function linearPlant(vehicle: Vehicle, model: LinearVehicle): LinearPlant {
  const lags = [vehicle.actuator.lag, vehicle.drive.lag].filter((lag) => lag > LEAST_LAG);
  const filter = vehicle.sensor.filter > LEAST_LAG ? vehicle.sensor.filter : 0;
  const belt =
    model.belt !== null && model.belt !== undefined && model.belt.lag > LEAST_LAG ? model.belt : null;
  const speed = lags.length;
  const measured = filter > 0 ? speed + 1 : speed;
  const ratio = measured + 1;
  const order = belt === null ? ratio : ratio + 1;
  const a = Matrix.zeros(order, order);
  const b = Matrix.zeros(order, 2);
  const drivenBy = (state: number, from: number, gain: number): void => {
    if (from < 0) b.set(state, 0, gain);
    else a.set(state, from, gain);
  };
  lags.forEach((lag, i) => {
    a.set(i, i, -1 / lag);
    drivenBy(i, i - 1, 1 / lag);
  });
  a.set(speed, speed, belt?.a ?? model.a);
  drivenBy(speed, speed - 1, belt?.b ?? model.b);
  // Disturbances are in terms of the mass of a belt at rest.
  b.set(speed, 1, belt === null ? 1 : model.effectiveMass / belt.mass);
  if (filter > 0) {
    a.set(measured, measured, -1 / filter);
    a.set(measured, speed, 1 / filter);
  }
  if (belt !== null) {
    a.set(speed, ratio, belt.c);
    a.set(ratio, ratio, -1 / belt.lag);
    a.set(ratio, speed, belt.bySpeed / belt.lag);
    drivenBy(ratio, speed - 1, belt.byThrottle / belt.lag);
  }
  return { a, b, order, speed, measured };
}

/** From command to measured speed, every lag and dead time but the computing delay in it: what has poles and zeros. */
export function plantTransfer(vehicle: Vehicle, model: LinearVehicle): TransferFunction {
  const { a, b, order, measured } = linearPlant(vehicle, model);
  const scale = 1 + vehicle.sensor.scaleError;
  return transferFunctionOf({
    a,
    b: b.getColumn(0),
    c: Array.from({ length: order }, (_, i) => (i === measured ? scale : 0)),
    d: 0,
    delay: vehicle.actuator.deadTime + sensorDelay(vehicle.sensor, model.speed),
  });
}
