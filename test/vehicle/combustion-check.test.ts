import { describe, expect, test } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import type { Gearbox } from '../../src/vehicle/drive.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import type { EngineDriveSpec, TorqueSpec } from '../../src/vehicle/engine-spec.ts';
import { singleWithGears, textbookEngine } from './engines.ts';

/** `code key` of the first problem of an engine with a change. */
function refusal(change: Partial<EngineDriveSpec>, of: EngineDriveSpec = singleWithGears): string {
  try {
    engineDrive({ ...of, ...change });
  } catch (error) {
    if (error instanceof InputError) return `${error.code} ${error.problems[0]?.place.key}`;
    throw error;
  }
  return 'taken';
}

const f = (...values: number[]): Float64Array => Float64Array.from(values);
const map = (change: Partial<Extract<TorqueSpec, { kind: 'map' }>>): Partial<EngineDriveSpec> => ({
  drag: null,
  torque: {
    kind: 'map',
    shaftSpeed: f(100, 500),
    throttle: f(0, 0.5, 1),
    torque: f(-4, 20, 30, -8, 25, 40),
    ...change,
  },
});
const automatic = (change: Partial<Extract<Gearbox, { kind: 'automatic' }>>): Partial<EngineDriveSpec> => ({
  gearbox: {
    kind: 'automatic',
    throttle: f(0, 1),
    upSpeed: f(400, 700),
    downSpeed: f(250, 400),
    gap: 0.3,
    dwell: 1,
    ...change,
  },
});

describe('the door of an engine', () => {
  const fullLoad = singleWithGears.torque as Extract<TorqueSpec, { kind: 'full_load' }>;
  const cut = singleWithGears.fuelCut!;
  const changes: [string, Partial<EngineDriveSpec>][] = [
    ['taken', {}],
    ['taken', { drag: null, fuelCut: null, revLimit: null }],
    ['taken', map({})],
    ['out-of-range stall', { stall: -1 }],
    ['out-of-range idle', { stall: 140 }],
    ['out-of-range revLimit', { revLimit: 139 }],
    ['out-of-range limitBand', { limitBand: 0 }],
    ['out-of-range inertia', { inertia: Number.NaN }],
    ['out-of-range efficiency', { efficiency: 1.01 }],
    ['out-of-range lag', { lag: -0.1 }],
    ['out-of-range wheelRadius', { wheelRadius: 0 }],
    ['out-of-range fuelCut.above', { fuelCut: { ...cut, above: 100 } }],
    ['out-of-range fuelCut.blend', { fuelCut: { ...cut, blend: 0 } }],
    ['out-of-range fuelCut.throttle', { fuelCut: { ...cut, throttle: 0 } }],
    ['not-increasing torque.shaftSpeed', { torque: { ...fullLoad, shaftSpeed: f(150, 300, 300, 650, 850) } }],
    ['wrong-length torque.torque', { torque: { ...fullLoad, torque: f(1, 2) } }],
    ['out-of-range torque.shape', { torque: { ...fullLoad, shape: -1 } }],
    ['out-of-range torque.shapeSpeed', { torque: { ...fullLoad, shapeSpeed: 0 } }],
    ['out-of-range torque.torque', { torque: { ...fullLoad, torque: f(35, 52, Number.NaN, 60, 44) } }],
    ['out-of-range drag.torque', { drag: { shaftSpeed: f(100), torque: f(-3) } }],
    ['conflict torque.torque', { torque: { ...fullLoad, torque: f(35, 52, 62, 60, -20) } }],
    // At idle the governor holds closed throttle at 0, and full load pulls back.
    ['conflict torque.torque', { torque: { ...fullLoad, torque: f(-2, 52, 62, 60, 44) } }],
    ['conflict drag', { ...map({}), drag: singleWithGears.drag }],
    ['out-of-range torque.throttle', map({ throttle: f(0, 0.5, 0.9) })],
    ['not-increasing torque.throttle', map({ throttle: f(0, 0, 1) })],
    ['wrong-length torque.torque', map({ torque: f(-4, 20, 30) })],
    ['not-increasing torque.torque[5]', map({ torque: f(-4, 20, 30, -8, 25, 24) })],
    ['out-of-range ratios', { ratios: [3, 2, 0] }],
    ['wrong-length ratios', { ratios: [], gear: 0 }],
    ['not-in-order ratios[2]', { ratios: [3, 2, 2, 1], gear: 0 }],
    ['out-of-range gear', { gear: 6 }],
    ['out-of-range gear', { gear: 0.5 }],
  ];
  test.each(changes)('%s: %o', (expected, change) => {
    expect(refusal(change)).toBe(expected);
  });

  test('tells what was found and what is allowed', () => {
    expect(() => engineDrive({ ...textbookEngine, stall: 5, idle: 4 })).toThrow(
      /idle: engine is out of range \(found 4; allowed: a finite number above 5 rad\/s\)/,
    );
  });
});

describe('the door of a gearbox', () => {
  const changes: [string, Partial<EngineDriveSpec>][] = [
    ['taken', automatic({})],
    ['taken', { gearbox: { kind: 'clutch', open: 0.4, resume: 1 } }],
    ['out-of-range gearbox.open', { gearbox: { kind: 'clutch', open: -1, resume: 1 } }],
    ['out-of-range gearbox.gap', automatic({ gap: -1 })],
    ['not-increasing gearbox.throttle', automatic({ throttle: f(1, 0) })],
    ['wrong-length gearbox.upSpeed', automatic({ upSpeed: f(500) })],
    ['out-of-range gearbox.upSpeed', automatic({ upSpeed: f(500, 801) })],
    ['out-of-range gearbox.downSpeed', automatic({ downSpeed: f(70, 400) })],
    // From first to second the shaft falls by 10.1 / 14.2: 400 rad/s to 284.5, 700 to 497.9.
    ['taken', automatic({ downSpeed: f(284, 497) })],
    ['hunting gearbox.downSpeed[0]', automatic({ downSpeed: f(285, 497) })],
    ['hunting gearbox.downSpeed[1]', automatic({ downSpeed: f(284, 498) })],
  ];
  test.each(changes)('%s: %o', (expected, change) => {
    expect(refusal(change)).toBe(expected);
  });
});
