import fc from 'fast-check';
import { expect, it } from 'vitest';
import { buildMachine } from '../../src/loop/build-machine.ts';
import { GEAR, PLATE, RATIO, SHIFT_PART, SPEED } from '../../src/loop/layout.ts';
import type { Machine } from '../../src/loop/machine.ts';
import { gearDue, shiftDue } from '../../src/loop/shift-due.ts';
import type { Gearbox } from '../../src/vehicle/drive.ts';
import { planOver, referenceMotorcycle, roadOver, stations } from './scenes.ts';

// Up above 300 rad/s at closed throttle to 700 at full, down below 150 to 420.
const automatic: Gearbox = {
  kind: 'automatic',
  throttle: Float64Array.of(0.1, 0.5, 0.9),
  upSpeed: Float64Array.of(300, 400, 700),
  downSpeed: Float64Array.of(150, 200, 420),
  gap: 0.2,
  dwell: 1,
};
const RATIOS = [20, 14, 10];

function machineIn(gearbox: Gearbox, gear: number, shaftSpeed: number, throttle: number): Machine {
  const drive = {
    ...referenceMotorcycle.drive,
    gears: RATIOS.map((ratio) => ({ ratio, inertia: 0 })),
    gearbox,
  };
  const machine = buildMachine(planOver(roadOver(stations(1000, 100)), { ...referenceMotorcycle, drive }));
  const { s } = machine;
  s[GEAR] = gear;
  s[RATIO] = RATIOS[gear]!;
  s[SPEED] = shaftSpeed / RATIOS[gear]!;
  s[PLATE] = throttle;
  return machine;
}

it('asks for the next gear beyond the lines, and for none between them', () => {
  const line = (from: number, middle: number, to: number, x: number): number => {
    if (x <= 0.1) return from;
    if (x >= 0.9) return to;
    return x <= 0.5 ? from + ((x - 0.1) / 0.4) * (middle - from) : middle + ((x - 0.5) / 0.4) * (to - middle);
  };
  fc.assert(
    fc.property(
      fc.integer({ min: 0, max: 2 }),
      fc.double({ min: 50, max: 900, noNaN: true }),
      fc.double({ min: 0, max: 1, noNaN: true }),
      (gear, shaftSpeed, throttle) => {
        const up = line(300, 400, 700, throttle);
        const down = line(150, 200, 420, throttle);
        if (Math.abs(shaftSpeed - up) < 1e-6 || Math.abs(shaftSpeed - down) < 1e-6) return;
        const expected =
          shaftSpeed > up ? Math.min(gear + 1, 2) : shaftSpeed < down ? Math.max(gear - 1, 0) : gear;
        const machine = machineIn(automatic, gear, shaftSpeed, throttle);
        expect(gearDue(machine)).toBe(expected);
        expect(shiftDue(machine)).toBe(expected !== gear);
      },
    ),
    { seed: 4, numRuns: 500 },
  );
});

it('asks for nothing during a shift, while the gearbox rests, or where the rider shifts', () => {
  for (const part of [1, 2, -1]) {
    const machine = machineIn(automatic, 0, 800, 0.3);
    expect(shiftDue(machine)).toBe(true);
    machine.s[SHIFT_PART] = part;
    expect(shiftDue(machine)).toBe(false);
  }
  const open = machineIn(automatic, 0, 800, 0.3);
  open.s[GEAR] = -1;
  expect(shiftDue(open)).toBe(false);
  expect(shiftDue(machineIn({ kind: 'fixed' }, 0, 800, 0.3))).toBe(false);
  expect(shiftDue(machineIn({ kind: 'clutch', open: 0.2, resume: 1 }, 0, 800, 0.3))).toBe(false);
});
