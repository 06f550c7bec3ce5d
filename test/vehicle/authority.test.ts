import { describe, expect, test } from 'vitest';
import { authority } from '../../src/vehicle/authority.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import { forceDrive } from '../../src/vehicle/force-drive.ts';
import { requiredForce } from '../../src/vehicle/resistance.ts';
import type { Traction } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { single, singleWithGears } from './engines.ts';
import { referenceMotorcycle, still } from './vehicles.ts';

// Closed form: sin(theta) + c cos(theta) = (efficiency P / v - F_aero) / (m g); 280 kg, CdA 0.6 m2, c 0.015, density 1.2.
// Grades recomputed by hand from it.
test.each([
  [15, 80, 0.1481],
  [15, 100, 0.0649],
  [15, 120, -0.0099],
  [8, 80, 0.0409],
  [35, 100, 0.322],
])(
  'an engine of %i kW and a driveline of 0.92 hold %i km/h on the grade %d at full throttle',
  (kilowatts, kmh, grade) => {
    const speed = kmh / 3.6;
    const torque = (kilowatts * 1000) / 600;
    const drive = engineDrive({
      ...singleWithGears,
      torque: {
        kind: 'full_load',
        shaftSpeed: Float64Array.of(600),
        torque: Float64Array.of(torque),
        shape: 4,
        shapeSpeed: null,
      },
      ratios: [(600 / speed) * 0.31],
      gear: 0,
    });
    const vehicle = referenceMotorcycle({ mass: 280, drive });
    const at = { ...still, grade };
    const left = authority(vehicle, 0, speed, at, 1).greatest - requiredForce(vehicle, speed, at);
    // They took g as 9.81 m/s2 and are printed to 0.01 %, together some 0.28 N; the steepest to 0.1 %.
    expectClose(left, 0, grade === 0.322 ? 1.4 : 0.28);
  },
);

// Mean effective pressure 1.5 bar times 650 cm3 over 4 pi is 7.76 N m, at 5.5 over 0.31 m 138 N. Recomputed by hand;
// coast grade (F_aero + F_roll + F_brake) / (m g), 280 kg.
test.each([
  [90, 0, 9.7],
  [90, 1.5e5, 14.7],
  [50, 0, 4.0],
])('at %i km/h with a mean pressure of %d Pa closed throttle holds on %d %%', (kmh, pressure, percent) => {
  const drag = (pressure * 650e-6) / (4 * Math.PI);
  const drive = engineDrive({
    ...single,
    drag: { shaftSpeed: Float64Array.of(200), torque: Float64Array.of(drag) },
    fuelCut: null,
    efficiency: 1,
    ratios: [5.5],
    gear: 0,
    wheelRadius: 0.31,
    gearbox: { kind: 'fixed' },
  });
  const vehicle = referenceMotorcycle({ mass: 280, drive });
  const speed = kmh / 3.6;
  const { least } = authority(vehicle, 0, speed, still, 1);
  if (pressure > 0) expectClose(least, -138, 0.5);
  expectClose((100 * (requiredForce(vehicle, speed, still) - least)) / (280 * 9.80665), percent, 0.05);
});

describe('authority', () => {
  test('is that of the gear asked for, derated by the air unless told otherwise', () => {
    const vehicle = referenceMotorcycle({ drive: engineDrive(singleWithGears) });
    // Third gear at 15 m/s: w = 8 / 0.31 15 = 387.1 rad/s; full load 52 + 10 (w - 300) / 200, efficiency 0.92.
    const w = (8 / 0.31) * 15;
    const full = (8 / 0.31) * 0.92 * (52 + (w - 300) / 20);
    const here = authority(vehicle, 2, 15, still, 1);
    expectClose(here.greatest, full, 1e-9);
    expectClose(here.least, (-(8 / 0.31) * (5 + (2.5 * (w - 150)) / 300 + 3)) / 0.92, 1e-9);
    expect([here.gear, here.leastGear, here.grip]).toEqual([2, 2, null]);
    // ISO 1585 at 85 kPa and 298 K: (85 / 99)^1.2.
    const thin = { ...still, airDensity: 85e3 / (287.05287 * 298), airTemperature: 298 };
    expectClose(authority(vehicle, 2, 15, thin).greatest, full * (85 / 99) ** 1.2, 1e-9);
  });

  test('ends at the end stops of the actuator', () => {
    const vehicle = referenceMotorcycle();
    const stopped = {
      ...vehicle,
      actuator: { ...vehicle.actuator, travel: { least: 0.05, greatest: 0.8 } },
    };
    expectClose(authority(stopped, 0, 20, still).least, 45, 1e-12);
    expectClose(authority(stopped, 0, 20, still).greatest, 720, 1e-12);
  });

  test('ends where the driven wheel slips or the front wheel lifts', () => {
    const traction: Traction = { friction: 0.9, wheelbase: 1.4, massCentreAhead: 0.7, massCentreHeight: 0.6 };
    const drive = forceDrive({
      peakForce: 9000,
      peakPower: null,
      closedThrottleForce: 2000,
      lag: 0,
      derate: 'none',
    });
    const weight = 260 * 9.80665;
    const dry = authority(referenceMotorcycle({ drive, traction }), 0, 20, still);
    // Spins at 0.9 m g 0.7 / (1.4 - 0.54), lifts at m g 0.7 / 0.6, slides at -0.9 m g 0.7 / (1.4 + 0.54).
    expectClose(dry.greatest, (0.9 * weight * 0.7) / 0.86, 1e-9);
    expectClose(dry.least, (-0.9 * weight * 0.7) / 1.94, 1e-9);
    const forward = { ...traction, massCentreAhead: 0.35 };
    expectClose(
      authority(referenceMotorcycle({ drive, traction: forward }), 0, 20, still).greatest,
      (weight * 0.35) / 0.6,
      1e-9,
    );
    const weak = referenceMotorcycle({ traction });
    expectClose(authority(weak, 0, 20, still).greatest, 900, 1e-12);
  });

  test('of an automatic gearbox is the best of the gears it can be in', () => {
    const drive = engineDrive({
      ...singleWithGears,
      fuelCut: null,
      gearbox: {
        kind: 'automatic',
        throttle: Float64Array.of(0, 1),
        upSpeed: Float64Array.of(400, 750),
        downSpeed: Float64Array.of(200, 450),
        gap: 0.3,
        dwell: 1,
      },
    });
    const vehicle = referenceMotorcycle({ drive });
    // 20 m/s: 916, 652, 516, 432, 381, 342 rad/s. Second gear pulls most below 750, fifth brakes most below 400.
    const here = authority(vehicle, 5, 20, still, 1);
    expect([here.gear, here.leastGear]).toEqual([1, 4]);
    expectClose(here.greatest, (10.1 / 0.31) * 0.92 * (60 - 0.08 * ((10.1 / 0.31) * 20 - 650)), 1e-9);
    // At 1 m/s no gear turns at 70 rad/s, at 60 m/s only the highest is not left at once.
    expect(authority(vehicle, 5, 1, still, 1).gear).toBe(0);
    expect(authority(vehicle, 0, 60, still, 1).gear).toBe(5);
  });
});
