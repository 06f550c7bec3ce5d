// Vehicles of every kind for the bench, with all that belongs to them; the road load is that of the plain one. As a
// program: one kind over the plain force, in a process of its own, so that no other kind has had a say in how the engine
// compiles the loop.
import { fileURLToPath } from 'node:url';
import { cpu } from './cpu.mjs';
import { benchPlan, benchRoad } from './scenario.mjs';

const rpm = (...values) => Float64Array.from(values, (value) => (value * Math.PI) / 30);
const row = (...values) => Float64Array.from(values);

const FUEL = { use: { kind: 'willans', friction: 2, slope: 0.38 }, heat: 43e6, density: 745, tank: 0.012 };
const ENGINE = {
  torque: {
    kind: 'full_load',
    shaftSpeed: rpm(1500, 3000, 4500, 6500, 8500, 10_000),
    torque: row(13, 17, 19, 20, 18, 14),
    shape: 3,
    shapeSpeed: (5500 * Math.PI) / 30,
  },
  drag: { shaftSpeed: rpm(1500, 5000, 10_000), torque: row(1.6, 2.6, 5) },
  fuelCut: null,
  idle: 136,
  stall: 84,
  revLimit: 1047,
  limitBand: 30,
  inertia: 0.008,
  efficiency: 0.92,
  lag: 0.15,
  derate: 'naturally_aspirated',
  fuel: FUEL,
};
const GEARED = {
  ...ENGINE,
  ratios: [30, 20, 15, 12, 10, 8.5],
  gear: 5,
  wheelRadius: 0.3,
  gearbox: { kind: 'fixed' },
};
const CUT = { above: 210, blend: 30, throttle: 0.02, torque: 1.5 };
/** On this road some thirty shifts between 5th and 6th gear in 50 km. */
const LINES = {
  kind: 'automatic',
  throttle: row(0.1, 0.25),
  upSpeed: rpm(5000, 7500),
  downSpeed: rpm(3000, 4900),
  gap: 0.3,
  dwell: 2,
};
const BELT = {
  ...ENGINE,
  leastRatio: 7,
  greatestRatio: 24,
  wheelRadius: 0.25,
  line: { throttle: row(0.1, 0.9), shaftSpeed: rpm(4800, 7000) },
  ratioLag: 0.4,
  clutch: { begins: 314, locked: 419 },
};
const ELECTRIC = {
  peakForce: 320,
  peakPower: 6000,
  closedThrottleForce: 15,
  regenerationForce: 120,
  regenerationPower: 2500,
  fadeSpeed: 3,
  throttleMin: -1,
  lag: 0.05,
  efficiency: { drive: 0.88, regeneration: 0.8 },
  battery: {
    capacity: 3.6e7,
    charge: 0.95,
    reserve: 0.1,
    cells: {
      openVoltage: { charge: row(0, 0.2, 0.9, 1), voltage: row(46, 50, 56, 58) },
      resistance: 0.02,
      nominalVoltage: 52,
    },
    acceptance: { charge: row(0.9, 1), share: row(1, 0) },
  },
  heating: { continuousPower: 4000, peakPowerTime: 300, onset: 0.8 },
};

/** Label, and what of the plain plan a kind changes, kind by kind; drives are compiled by the library. */
export function benchKinds(library, plan) {
  const plain = plan.vehicle;
  const { actuator, sensor } = plain;
  const windy = { ...plan.road, crosswind: plan.road.distance.map((x) => 4 * Math.sin(x / 700)) };
  return [
    { label: 'engine, six gears, fuel', vehicle: { ...plain, drive: library.engineDrive(GEARED) } },
    {
      label: 'engine with fuel cut and slack',
      vehicle: {
        ...plain,
        drive: library.engineDrive({ ...GEARED, fuelCut: CUT }),
        actuator: { ...actuator, slack: 0.03, lag: 0.1, rateLimit: 2, resolution: 0.002, deadTime: 0.02 },
      },
    },
    { label: 'variator', vehicle: { ...plain, drive: library.variatorDrive(BELT) } },
    { label: 'electric with battery', vehicle: { ...plain, drive: library.electricDrive(ELECTRIC) } },
    {
      label: 'sensor that counts pulses',
      vehicle: {
        ...plain,
        sensor: {
          ...sensor,
          pulses: { spacing: 0.04, reading: { kind: 'counted', window: 0.1 } },
          filter: 0.05,
          delay: 0.02,
        },
      },
    },
    {
      label: 'sensor that times pulses',
      vehicle: {
        ...plain,
        sensor: {
          ...sensor,
          pulses: { spacing: 0.04, reading: { kind: 'timed', clock: 1e-5 } },
          filter: 0.05,
          delay: 0.02,
        },
      },
    },
    {
      label: 'sensor with noise',
      vehicle: { ...plain, sensor: { ...sensor, noise: { sd: 0.01, seed: 7 } } },
    },
    {
      label: 'automatic gearbox',
      vehicle: { ...plain, drive: library.engineDrive({ ...GEARED, gearbox: LINES }) },
    },
    {
      label: 'crosswind, drag by yaw',
      vehicle: { ...plain, roadLoad: { ...plain.roadLoad, yawGain: 1 } },
      road: windy,
    },
  ];
}

const ROUNDS = 9;
const WARM_UP = 3;

/** Ratios of CPU time a sample of a kind over the plain force, alternating. */
function ratiosOf(library, label) {
  const plain = benchPlan(library, benchRoad(50_000), 'exact');
  const { vehicle, road = plain.road } = benchKinds(library, plain).find((kind) => kind.label === label);
  const perTick = (plan) => {
    const { seconds, result } = cpu(() => library.runLoop(plan));
    if (result.status !== 'completed') throw new Error(`a run of the bench ended: ${result.status}`);
    return seconds / result.endTime;
  };
  const ratios = [];
  for (let i = 0; i < WARM_UP + ROUNDS; i++) {
    const ratio = perTick({ ...plain, vehicle, road }) / perTick(plain);
    if (i >= WARM_UP) ratios.push(ratio);
  }
  return ratios;
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const [index, label] = process.argv.slice(2);
  console.log(JSON.stringify(ratiosOf(await import(index), label)));
}
