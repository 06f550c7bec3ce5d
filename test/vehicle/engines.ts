// Engines of the tests. Numbers here are written out, not taken from src/.

import type { CombustionSpec, EngineDriveSpec } from '../../src/vehicle/engine-spec.ts';

/** The engine of Astrom and Murray, Feedback Systems, section 4.1, in gear 4: ratios over wheel radius 40, 25, 16, 12, 10 1/m. */
export const textbookEngine: EngineDriveSpec = {
  torque: { kind: 'parabola', peak: 190, peakSpeed: 420, falloff: 0.4 },
  drag: null,
  fuelCut: null,
  idle: 1,
  stall: 0,
  revLimit: null,
  limitBand: 0,
  inertia: 0,
  efficiency: 1,
  lag: 0,
  derate: 'none',
  fuel: null,
  ratios: [40, 25, 16, 12, 10],
  gear: 3,
  wheelRadius: 1,
  gearbox: { kind: 'fixed' },
};

/** An invented single of some 40 kW with everything an engine can have. */
export const single: CombustionSpec = {
  torque: {
    kind: 'full_load',
    shaftSpeed: Float64Array.of(150, 300, 500, 650, 850),
    torque: Float64Array.of(35, 52, 62, 60, 44),
    shape: 4,
    shapeSpeed: null,
  },
  drag: { shaftSpeed: Float64Array.of(150, 450, 900), torque: Float64Array.of(5, 7.5, 13) },
  fuelCut: { above: 220, blend: 30, throttle: 0.03, torque: 3 },
  idle: 140,
  stall: 70,
  revLimit: 800,
  limitBand: 25,
  inertia: 0.02,
  efficiency: 0.92,
  lag: 0.1,
  derate: 'naturally_aspirated',
  fuel: null,
};

/** It with six gears; whole ratios over a radius of 0.31 m. */
export const singleWithGears: EngineDriveSpec = {
  ...single,
  ratios: [14.2, 10.1, 8.0, 6.7, 5.9, 5.3],
  gear: 5,
  wheelRadius: 0.31,
  gearbox: { kind: 'fixed' },
};
