// Plays controllers without a loop: setups and buses of the control tests.

import {
  BUS_COMMAND,
  BUS_GEAR,
  BUS_INTEGRAL,
  BUS_LIMITED,
  BUS_MEASURED,
  BUS_REFERENCE,
  BUS_SIZE,
  BUS_SLOPE,
} from '../../src/control/bus.ts';
import { controllerFor } from '../../src/control/controller-for.ts';
import type { ControllerSetup, IntegerSetup, PidSetup } from '../../src/control/setup.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { referenceMotorcycle } from '../loop/scenes.ts';

/** PI with nothing more: kp 1/4, ki Ts 1/16, all exact in binary. */
export const plainPid: PidSetup = {
  kind: 'pid',
  kp: 0.25,
  ki: 0.125,
  kd: 0,
  derivativeFilter: 0,
  setpointWeight: 1,
  sample: 0.5,
  computingDelay: 0,
  integration: 'forward',
  form: { kind: 'positional', antiWindup: { kind: 'none' } },
  deadBand: null,
  rateLimit: null,
  schedule: null,
  model: null,
  feedforward: null,
  observerFilter: null,
  ramp: null,
  design: null,
};

export const plainInteger: IntegerSetup = {
  kind: 'integer',
  kp: 0.25,
  ki: 0.125,
  sample: 0.5,
  computingDelay: 0,
  integration: 'forward',
  wordBits: 16,
  productBits: 32,
  speedScale: 10,
  throttleScale: 1000,
  gainDivisor: 256,
  integralOf: 'increments',
  integralDivisor: 1,
  scaling: 'shift',
  rounding: 'truncate',
  overflow: 'wrap',
  integralRule: { kind: 'none' },
  ramp: null,
};

export interface Played {
  readonly command: number[];
  readonly limited: number[];
  readonly integral: number[];
  readonly bus: Float64Array;
}

interface Input {
  readonly measured: number;
  readonly reference?: number;
  readonly gear?: number;
  readonly slope?: number;
}

/** Commands over given inputs, after taking over at a throttle with the first input but the reference as measurement. */
export function playInputs(
  setup: ControllerSetup,
  inputs: readonly Input[],
  { from = 0.5, reference = 20, low = 0, high = 1, vehicle = referenceMotorcycle as Vehicle } = {},
): Played {
  const controller = controllerFor(setup, low, high, vehicle);
  const bus = new Float64Array(BUS_SIZE);
  bus[BUS_REFERENCE] = bus[BUS_MEASURED] = reference;
  bus[BUS_LIMITED] = from;
  bus[BUS_GEAR] = inputs[0]?.gear ?? 0;
  bus[BUS_SLOPE] = inputs[0]?.slope ?? 0;
  controller.engage(bus);
  const played: Played = { command: [], limited: [], integral: [], bus };
  for (const input of inputs) {
    bus[BUS_MEASURED] = input.measured;
    bus[BUS_REFERENCE] = input.reference ?? reference;
    bus[BUS_GEAR] = input.gear ?? 0;
    bus[BUS_SLOPE] = input.slope ?? 0;
    controller.step(bus);
    played.command.push(bus[BUS_COMMAND]!);
    played.limited.push(bus[BUS_LIMITED]!);
    played.integral.push(bus[BUS_INTEGRAL]!);
  }
  return played;
}

/** The same over measurements alone. */
export const play = (
  setup: ControllerSetup,
  measured: readonly number[],
  more: Parameters<typeof playInputs>[2] = {},
): Played =>
  playInputs(
    setup,
    measured.map((y) => ({ measured: y })),
    more,
  );
