import { expect, test } from 'vitest';
import { type ElectricDriveSpec, electricDrive } from '../../src/vehicle/electric-drive.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import type { EngineDriveSpec, VariatorDriveSpec } from '../../src/vehicle/engine-spec.ts';
import { forceDrive } from '../../src/vehicle/force-drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import { validityNotes } from '../../src/vehicle/validity.ts';
import { variatorDrive } from '../../src/vehicle/variator-drive.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { singleWithGears, textbookEngine } from './engines.ts';
import { referenceMotorcycle, textbookCar } from './vehicles.ts';

test('a drive known by its force says what a locked throttle loses by that', () => {
  const words = (peakPower: number | null) => {
    const drive = forceDrive({
      peakForce: 260,
      peakPower,
      closedThrottleForce: 40,
      lag: 0.1,
      derate: 'none',
    });
    return validityNotes(referenceMotorcycle({ drive })).find(({ code }) => code === 'part-throttle-force')
      ?.words;
  };
  expect(words(null)).toContain('does not rise as it slows');
  expect(words(null)).not.toContain('power limit');
  expect(words(8500)).toContain('below the speed at which its power limit sets in');
  expect(validityNotes(textbookCar()).map(({ code }) => code)).not.toContain('part-throttle-force');
});

test('a power limit and altitude derating each bring their own statement, in whole sentences, once', () => {
  const plain = validityNotes(referenceMotorcycle()).map((note) => note.code);
  const spec = { peakForce: 260, closedThrottleForce: 40, lag: 0.1 };
  const limited = forceDrive({ ...spec, peakPower: 8500, derate: 'naturally_aspirated' });
  const notes = validityNotes(referenceMotorcycle({ drive: limited }));
  const codes = notes.map((note) => note.code);
  expect(codes.filter((code) => !plain.includes(code))).toEqual(['ideal-ratio', 'altitude-correction']);
  expect(new Set(codes).size).toBe(codes.length);
  for (const { words } of notes) expect(words).toMatch(/^[A-Z].*\.$/);
});

const codesOf = (change: Partial<Vehicle>): readonly string[] =>
  validityNotes(referenceMotorcycle(change)).map(({ code }) => code);

const more = (change: Partial<Vehicle>): readonly string[] => {
  const plain = codesOf({});
  return codesOf(change).filter((code) => !plain.includes(code));
};

test('a slack actuator, pulses and noise each bring their own statement', () => {
  expect(more({ actuator: { ...IDEAL_ACTUATOR, slack: 0.03 } })).toEqual(['play-operator']);
  const pulses = { spacing: 0.04, reading: { kind: 'counted', window: 0.1 } } as const;
  expect(more({ sensor: { ...IDEAL_SENSOR, pulses, noise: { sd: 0.1, seed: 1 } } })).toEqual([
    'even-pulses',
    'white-noise',
  ]);
});

test('known grip changes what is said of slip', () => {
  const traction = { friction: 0.9, wheelbase: 1.4, massCentreAhead: 0.7, massCentreHeight: 0.6 };
  const slip = (change: Partial<Vehicle>) =>
    validityNotes(referenceMotorcycle(change)).filter(({ code }) => code === 'no-slip');
  expect(slip({}).map(({ words }) => words)).toEqual([expect.stringContaining('is checked')]);
  expect(slip({ traction }).map(({ words }) => words)).toEqual([expect.stringContaining('the run says so')]);
  expect(more({ traction })).toEqual(['straight-grip']);
});

test('an engine speaks of its gearbox, its fuel cut and its fuel where it has them', () => {
  const car = textbookCar().drive;
  const engine = [
    'steady-torque',
    'steady-efficiency',
    'part-throttle-share',
    'static-governor',
    'rigid-clutch',
  ];
  expect(more({ drive: car })).toEqual(engine);
  expect(more({ drive: { ...car, gearbox: { kind: 'clutch', open: 0.5, resume: 1 } } })).toEqual([
    ...engine,
    'planned-shifts',
  ]);
  expect(more({ drive: { ...car, withoutFuelCut: car } })).toContain('static-fuel-cut');
});

test('a belt speaks of its ratio, its clutch and its fuel, and of no gears', () => {
  const spec: VariatorDriveSpec = {
    torque: { kind: 'parabola', peak: 10, peakSpeed: 600, falloff: 0.5 },
    drag: null,
    fuelCut: null,
    idle: 170,
    stall: 90,
    revLimit: null,
    limitBand: 1,
    inertia: 0.002,
    efficiency: 0.85,
    lag: 0.1,
    derate: 'none',
    fuel: { use: { kind: 'willans', friction: 3, slope: 0.4 }, heat: 43e6, density: 750, tank: null },
    leastRatio: 7,
    greatestRatio: 22,
    wheelRadius: 0.25,
    line: { throttle: Float64Array.of(0), shaftSpeed: Float64Array.of(600) },
    ratioLag: 0.4,
    clutch: { begins: 320, locked: 420 },
  };
  const codes = more({ drive: variatorDrive(spec) });
  expect(codes).toEqual([
    'steady-torque',
    'steady-efficiency',
    'static-governor',
    'belt-at-rest',
    'centrifugal-clutch',
    'steady-fuel',
  ]);
});

test('an electric drive says what its battery does not do, and no more than that', () => {
  const spec: ElectricDriveSpec = {
    peakForce: 400,
    peakPower: 4000,
    closedThrottleForce: 0,
    regenerationForce: 100,
    regenerationPower: null,
    fadeSpeed: 2,
    throttleMin: -1,
    lag: 0,
    efficiency: { drive: 0.85, regeneration: 0.6 },
  };
  const notes = (change: Partial<ElectricDriveSpec>) =>
    validityNotes(referenceMotorcycle({ drive: electricDrive({ ...spec, ...change }) }));
  const words = (change: Partial<ElectricDriveSpec>, code: string) =>
    notes(change).find((note) => note.code === code)?.words;
  expect(words({}, 'steady-battery')).toContain(
    'whatever the state of charge, the voltage, the temperature of the battery or the heat of motor and controller.',
  );
  const cells = {
    openVoltage: { charge: Float64Array.of(0, 1), voltage: Float64Array.of(40, 50) },
    resistance: 0.02,
    nominalVoltage: 48,
  };
  const all: Partial<ElectricDriveSpec> = {
    battery: {
      capacity: 5e6,
      charge: 1,
      reserve: 0,
      cells,
      acceptance: { charge: Float64Array.of(1), share: Float64Array.of(0) },
    },
    heating: { continuousPower: 2000, peakPowerTime: 60, onset: 0.8 },
  };
  expect(words(all, 'steady-battery')).toBe(
    'The electric drive keeps its envelope whatever the temperature of the battery.',
  );
  expect(words({}, 'never-full')).toBeDefined();
  const codes = notes(all).map(({ code }) => code);
  expect(codes).not.toContain('never-full');
  expect(codes).toEqual(expect.arrayContaining(['battery-voltage', 'one-heat', 'battery-account']));
  for (const note of notes(all)) expect(note.words).toMatch(/^[A-Z].*\.$/);
  expect(notes({ efficiency: null }).map(({ code }) => code)).not.toContain('battery-account');
});

test('an engine without a throttle plate says what a locked throttle loses by that', () => {
  const told = (torque: EngineDriveSpec['torque']): boolean =>
    codesOf({ drive: engineDrive({ ...singleWithGears, torque }) }).includes('part-throttle-share');
  const { torque } = singleWithGears;
  if (torque.kind !== 'full_load') throw new Error('another torque');
  expect(told({ ...torque, shapeSpeed: null })).toBe(true);
  expect(told({ ...torque, shape: 0, shapeSpeed: 500 })).toBe(true);
  expect(told({ ...torque, shapeSpeed: 500 })).toBe(false);
  expect(told({ ...torque, shape: 1, shapeSpeed: 500 })).toBe(false);
  expect(codesOf({ drive: engineDrive(textbookEngine) })).toContain('part-throttle-share');
  expect(codesOf({})).not.toContain('part-throttle-share');
});
