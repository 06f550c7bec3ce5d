import { describe, expect, test } from 'vitest';
import {
  BUS_COMMAND,
  BUS_INTEGRAL,
  BUS_LIMITED,
  BUS_MEASURED,
  BUS_PROPORTIONAL,
  BUS_REFERENCE,
  BUS_SIZE,
} from '../../src/control/bus.ts';
import { controllerFor } from '../../src/control/controller-for.ts';
import type { PiSetup } from '../../src/control/setup.ts';
import { expectClose } from '../compare.ts';
import { referenceMotorcycle } from '../loop/scenes.ts';

const setup: PiSetup = {
  kind: 'pi',
  kp: 0.2,
  ki: 0.1,
  setpointWeight: 1,
  sample: 0.5,
  computingDelay: 0,
  integration: 'forward',
  antiWindup: { kind: 'none' },
  ramp: null,
  design: null,
};

/** Commands and integrals over given measurements, reference 20, taking over at 0.3 with no error. */
function play(
  more: Partial<PiSetup>,
  measured: readonly number[],
): { u: number[]; i: number[]; sat: number[] } {
  const controller = controllerFor({ ...setup, ...more }, 0, 1, referenceMotorcycle);
  const bus = new Float64Array(BUS_SIZE);
  bus[BUS_REFERENCE] = 20;
  bus[BUS_MEASURED] = 20;
  bus[BUS_LIMITED] = 0.3;
  controller.engage(bus);
  const u: number[] = [];
  const i: number[] = [];
  const sat: number[] = [];
  for (const y of measured) {
    bus[BUS_MEASURED] = y;
    controller.step(bus);
    u.push(bus[BUS_COMMAND]!);
    i.push(bus[BUS_INTEGRAL]!);
    sat.push(bus[BUS_LIMITED]!);
    expectClose(bus[BUS_PROPORTIONAL]! + bus[BUS_INTEGRAL]!, bus[BUS_COMMAND]!, 1e-15);
  }
  return { u, i, sat };
}

describe('the sampled PI, by hand', () => {
  test('forward: the command first, then the integral', () => {
    // e = 0, 1, 1, -1: I = 0.3, 0.3, 0.35, 0.40
    expectClose(play({}, [20, 19, 19, 21]).u, [0.3, 0.5, 0.55, 0.2], 1e-15);
  });

  test('backward: the integral first, then the command', () => {
    expectClose(play({ integration: 'backward' }, [20, 19, 19, 21]).u, [0.3, 0.55, 0.6, 0.15], 1e-15);
  });

  test('a set-point weight takes over without a bump too', () => {
    // P = 0.2 (0.5 20 - 20) = -2, so I starts at 2.3.
    expectClose(play({ setpointWeight: 0.5 }, [20, 19]).u, [0.3, 0.5], 1e-14);
  });

  test('without anti-windup the integral runs on behind the limit', () => {
    const { u, sat } = play({}, [10, 10, 10]);
    expectClose(u, [2.3, 2.8, 3.3], 1e-14);
    expect(sat).toEqual([1, 1, 1]);
  });

  test('conditional: the integral stands while the command is at a limit and the error pushes further', () => {
    for (const integration of ['forward', 'backward'] as const) {
      const up = play({ integration, antiWindup: { kind: 'conditional' } }, [10, 10, 10]);
      expectClose(up.i, [0.3, 0.3, 0.3], 1e-15);
      const down = play({ integration, antiWindup: { kind: 'conditional' } }, [30, 30, 30]);
      expectClose(down.i, [0.3, 0.3, 0.3], 1e-15);
      expect(down.sat).toEqual([0, 0, 0]);
    }
    // Back inside, it counts again at once: e = 1.
    expectClose(
      play({ antiWindup: { kind: 'conditional' } }, [10, 10, 19, 19]).u,
      [2.3, 2.3, 0.5, 0.55],
      1e-14,
    );
  });

  test('back-calculation: (Ts / Tt) (limited - command) after the command has gone out', () => {
    const antiWindup = { kind: 'back_calculation', trackingTime: 2 } as const;
    // forward, e = 10: u = 2.3, I = 0.3 + 0.5 + 0.25 (1 - 2.3) = 0.475; u = 2.475, I = 0.475 + 0.5 - 0.36875
    expectClose(play({ antiWindup }, [10, 10, 10]).u, [2.3, 2.475, 2.60625], 1e-14);
    // backward: I = 0.8, u = 2.8, I = 0.8 + 0.25 (-1.8) = 0.35; I = 0.85, u = 2.85
    expectClose(play({ antiWindup, integration: 'backward' }, [10, 10]).u, [2.8, 2.85], 1e-14);
  });
});
