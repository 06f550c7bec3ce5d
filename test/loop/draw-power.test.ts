// Tank and battery by themselves: fed with known speeds and forces, against closed forms.

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { buildMachine } from '../../src/loop/build-machine.ts';
import { drawPower, settleSource } from '../../src/loop/draw-power.ts';
import {
  C_DRAWN,
  CHARGE,
  DRAWN,
  DRIVE_FACTOR,
  GEAR,
  HEAT,
  L_FORCE,
  L_RATIO,
  L_SPEED,
  L_STRIDE,
  RATIO,
  REGENERATION_FACTOR,
} from '../../src/loop/layout.ts';
import type { Machine } from '../../src/loop/machine.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import type { Battery, EnergySource, Heating, PowerMap } from '../../src/vehicle/energy-source.ts';
import { powerDrawn } from '../../src/vehicle/power-map.ts';
import { expectClose } from '../compare.ts';
import { planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

const SAMPLE = 0.02;

/** P = F v / 0.8 while it drives, 0.6 F v while it is driven. */
const efficiencies: PowerMap = {
  shaftSpeed: Float64Array.of(0, 1),
  torque: Float64Array.of(-1, 0, 1),
  power: Float64Array.of(0, 0, 0, -0.6, 0, 1.25),
  least: Number.NEGATIVE_INFINITY,
};
const battery = (more: Partial<Battery> = {}): Battery => ({
  kind: 'battery',
  map: efficiencies,
  capacity: 1e6,
  charge: 1,
  reserve: 0,
  sag: null,
  acceptance: null,
  heating: null,
  ...more,
});

function machineWith(source: EnergySource, ratio = 1, idleSpeed = 0): Machine {
  const drive = { ...referenceMotorcycle.drive, source, idleSpeed };
  const machine = buildMachine(planOver(roadOver(stations(1000, 100)), { ...referenceMotorcycle, drive }));
  settleSource(machine);
  machine.s[GEAR] = 0;
  machine.s[RATIO] = ratio;
  return machine;
}

function ride(machine: Machine, speed: number, force: number, samples: number): void {
  machine.log[L_STRIDE + L_SPEED] = speed;
  machine.log[L_STRIDE + L_FORCE] = force;
  machine.log[L_STRIDE + L_RATIO] = machine.s[RATIO]!;
  for (let i = 0; i < samples; i++) drawPower(machine, L_STRIDE);
}

describe('a tank', () => {
  it('gives power over slope, by the law of Willans, and idles with the clutch open', () => {
    // P_fuel = (T w + 4 w) / 0.4: bilinear, so that two knots each way are the whole of it.
    const willans = (torque: number, w: number): number => (torque * w + 4 * w) / 0.4;
    const map: PowerMap = {
      shaftSpeed: Float64Array.of(100, 900),
      torque: Float64Array.of(-5, 50),
      power: Float64Array.of(willans(-5, 100), willans(50, 100), willans(-5, 900), willans(50, 900)),
      least: 0,
    };
    const machine = machineWith({ kind: 'fuel', map, heat: 3.2e10, capacity: null }, 18, 140);
    ride(machine, 25, 300, 500);
    expectClose(machine.s[DRAWN]!, 10 * ((300 * 25 + 4 * 18 * 25) / 0.4), 1e-4, 'engaged');
    expectClose(machine.chunk[C_DRAWN]!, machine.s[DRAWN]!, 0, 'chunk');
    const before = machine.s[DRAWN]!;
    machine.s[GEAR] = -1;
    machine.s[RATIO] = 0;
    ride(machine, 25, 0, 50);
    expectClose(machine.s[DRAWN]! - before, (4 * 140) / 0.4, 1e-6, 'idling');
    // Held back by the engine harder than friction asks for: fuel is not given back.
    machine.s[GEAR] = 0;
    machine.s[RATIO] = 18;
    const idled = machine.s[DRAWN]!;
    ride(machine, 25, -200, 50);
    expect(machine.s[DRAWN]).toBe(idled);
  });

  it('reads its map as the vehicle does, anywhere in it and beyond', () => {
    const map: PowerMap = {
      shaftSpeed: Float64Array.of(0, 100, 350, 400),
      torque: Float64Array.of(-20, 0, 15, 60),
      power: Float64Array.from({ length: 16 }, (_, i) => 100 * i + 37 * ((i * i) % 11)),
      least: -50,
    };
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 60, noNaN: true }),
        fc.double({ min: -300, max: 900, noNaN: true }),
        (speed, force) => {
          const machine = machineWith({ kind: 'fuel', map, heat: 1, capacity: null }, 10);
          ride(machine, speed, force, 1);
          expectClose(machine.s[DRAWN]!, SAMPLE * powerDrawn(map, 10 * speed, force / 10), 1e-6);
        },
      ),
      { seed: 11, numRuns: 200 },
    );
  });
});

describe('a battery', () => {
  it('is empty when the closed form says, to a sample, and then gives nothing', () => {
    // 1 MJ, from half of it on, at 200 N 20 m/s / 0.8 = 5 kW: 100 s.
    const machine = machineWith(battery({ charge: 0.5 }));
    ride(machine, 20, 200, 4997);
    expectClose(machine.s[CHARGE]!, 300, 1e-4);
    expect(machine.s[DRIVE_FACTOR]).toBe(1);
    ride(machine, 20, 240, 1);
    expect(machine.s[DRIVE_FACTOR]).toBe(1);
    // 180 J are left: one more sample of 100 J, but no second one.
    ride(machine, 20, 200, 1);
    expectClose(machine.s[CHARGE]!, 80, 1e-4);
    expect(machine.s[DRIVE_FACTOR]).toBe(0);
    ride(machine, 20, 0, 100);
    expect(machine.s[DRIVE_FACTOR]).toBe(0);
    expectClose(machine.s[DRAWN]!, 5e5 - 80, 1e-4);
  });

  it('once empty drives again only when 0.5 % of it has been charged', () => {
    // 5 kJ of 1 MJ, at 0.6 x 1000 W: 8.33 s; the first sample asks for 20 J more than the 100 J that are in it.
    const machine = machineWith(battery({ charge: 1e-4 }));
    ride(machine, 20, 240, 1);
    expect(machine.s[DRIVE_FACTOR]).toBe(0);
    ride(machine, 20, -50, 416);
    expectClose(machine.s[CHARGE]!, 4992, 1e-6);
    expect(machine.s[DRIVE_FACTOR]).toBe(0);
    ride(machine, 20, -50, 1);
    expect(machine.s[DRIVE_FACTOR]).toBe(1);
  });

  it('gives no more work to a run than was in it', () => {
    // 40 Wh of 5 % is 7.2 kJ; 6 km on the level at 60 km/h take 30 times that. Drag charges through the same map.
    const drag = 40;
    const cells = [-drag, 0, 200, 0, 0, 0, -drag, 0, 500 + drag, 0, 0, 0];
    const losses = [0, 0, 200, 0, 0, 0, 0, 0, 500, 0, 0, 0];
    for (const scheme of ['exact', 'fast'] as const) {
      const drive = {
        ...referenceMotorcycle.drive,
        throttleEdges: Float64Array.of(0),
        throttleMin: -1,
        cells: Float64Array.from(cells),
        losses: Float64Array.from(losses),
        source: battery({ capacity: 144_000, charge: 0.05 }),
      };
      const setSpeed = 60 / 3.6;
      const { status, ledger } = runLoop(
        planOver(
          roadOver(stations(6000, 100)),
          { ...referenceMotorcycle, drive },
          {
            scheme,
            hold: { setSpeed, setSpeedIs: 'true_speed', startSpeed: setSpeed, changes: [] },
          },
        ),
      );
      expect(status).toBe('stopped');
      expectClose(ledger.drawn!, ledger.drive / 0.8 + 0.6 * ledger.regeneration, 0.002 * 7200);
      expectClose(ledger.drawn!, 7200, 720, 'between empty and driving again');
    }
  });

  it('takes back what regeneration leaves, up to full', () => {
    const machine = machineWith(battery({ charge: 0.999 }));
    ride(machine, 10, -50, 100);
    expectClose(machine.s[CHARGE]!, 999_000 + 0.6 * 500 * 2, 1e-6);
    ride(machine, 10, -50, 1000);
    expect(machine.s[CHARGE]).toBe(1e6);
    expectClose(machine.s[DRAWN]!, -1000, 1e-6, 'what overfills it is lost');
  });

  it('whose capacity is not known stands still', () => {
    const machine = machineWith(
      battery({
        capacity: null,
        charge: 0.25,
        sag: { charge: Float64Array.of(0, 1), share: Float64Array.of(0.6, 1) },
      }),
    );
    ride(machine, 20, 200, 1000);
    expectClose(machine.s[DRAWN]!, 5000 * 20, 1e-6);
    expectClose(machine.s[DRIVE_FACTOR]!, 0.7, 1e-12);
  });

  it('sags and refuses charge by its lines, whose ends hold on', () => {
    const sag = { charge: Float64Array.of(0.1, 0.2, 0.8), share: Float64Array.of(0.5, 0.8, 1) };
    const acceptance = { charge: Float64Array.of(0.9, 0.95), share: Float64Array.of(1, 0) };
    const at = (charge: number): readonly [number, number] => {
      const { s } = machineWith(battery({ charge, sag, acceptance }));
      return [s[DRIVE_FACTOR]!, s[REGENERATION_FACTOR]!];
    };
    expectClose(at(0.05), [0.5, 1], 1e-12);
    expectClose(at(0.15), [0.65, 1], 1e-12);
    expectClose(at(0.5), [0.9, 1], 1e-12);
    expectClose(at(0.94), [1, 0.2], 1e-12);
    expectClose(at(1), [1, 0], 1e-12);
  });
});

describe('heat', () => {
  const heating: Heating = { continuousPower: 5000, time: 90, onset: 0.8, least: 0.55 };

  it.each([7500, 10_000])('reaches 1 after the time that %d W may be drawn', (power) => {
    // h = r (1 - e^(-t / time)), r = (P / Pc)^2: 1 at t = -time ln(1 - 1 / r).
    const machine = machineWith(battery({ capacity: 1e9, heating }));
    const square = (power / 5000) ** 2;
    const end = -90 * Math.log(1 - 1 / square);
    const onset = -90 * Math.log(1 - 0.8 / square);
    ride(machine, 20, power / 20, Math.floor(onset / SAMPLE));
    expect(machine.s[DRIVE_FACTOR]).toBe(1);
    ride(machine, 20, power / 20, Math.round(end / SAMPLE) - Math.floor(onset / SAMPLE));
    expectClose(machine.s[HEAT]!, 1, ((square - 1) / 90) * SAMPLE);
    expectClose(machine.s[DRIVE_FACTOR]!, 0.55, 0.002);
    ride(machine, 20, power / 20, 5000);
    expect(machine.s[DRIVE_FACTOR]).toBe(0.55);
    expect(machine.s[REGENERATION_FACTOR]).toBe(0.55);
    // Cooling: down to the onset after time ln(h / onset).
    const hot = machine.s[HEAT]!;
    ride(machine, 20, 0, Math.ceil((90 * Math.log(hot / 0.8)) / SAMPLE) + 1);
    expect(machine.s[DRIVE_FACTOR]).toBe(1);
  });

  it('stays below 1 for ever at the continuous power', () => {
    const machine = machineWith(battery({ capacity: 1e9, heating }));
    ride(machine, 20, 250, 100_000);
    expect(machine.s[HEAT]).toBeLessThanOrEqual(1);
    expectClose(machine.s[HEAT]!, 1, 1e-6);
  });
});
