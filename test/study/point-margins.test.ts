import { describe, expect, test } from 'vitest';
import { continuousLoop } from '../../src/control/continuous-loop.ts';
import { linearController } from '../../src/control/linear-controller.ts';
import { sampledLoop } from '../../src/control/sampled-loop.ts';
import { replay } from '../../src/loop/replay.ts';
import type { Road } from '../../src/road/road.ts';
import type { OperatingPoint } from '../../src/study/operating-point.ts';
import { operatingPoints } from '../../src/study/operating-points.ts';
import { pointFigures } from '../../src/study/point-figures.ts';
import { gainsAtPoint, linearAt, pointLoop, pointMargins, vehicleAt } from '../../src/study/point-margins.ts';
import { wheelForce } from '../../src/vehicle/drive-law.ts';
import { requiredForce } from '../../src/vehicle/resistance.ts';
import type { Vehicle } from '../../src/vehicle/vehicle.ts';
import { expectClose } from '../compare.ts';
import { textbookCar } from '../vehicle/vehicles.ts';
import { electricOf } from './electric.ts';
import { beltVehicle, gearedVehicle } from './geared.ts';
import { roadOf } from './road-of.ts';
import { piOf, planOf, vehicleOf } from './vehicle-of.ts';

const KMH = 1 / 3.6;
const AIR = { airDensity: 1.2, airTemperature: 288.15 };

function pointOf(
  vehicle: Vehicle,
  { speedKmh = 60, gear = vehicle.drive.gear, grade = 0, headwind = 0 } = {},
): OperatingPoint {
  const { points } = operatingPoints({
    rides: [],
    grid: {
      speeds: [speedKmh * KMH],
      grades: [grade],
      headwinds: [headwind],
      gears: [gear],
      loads: [{ load: null, vehicle }],
      air: { ...AIR, grade: 0, headwind: 0, crosswind: 0 },
    },
  });
  expect(points.length).toBe(1);
  return points[0]!;
}

const late = vehicleOf({ actuator: { deadTime: 0.053 } });
const bent = gearedVehicle({
  torque: {
    kind: 'full_load',
    shaftSpeed: Float64Array.of(60, 200, 400, 900),
    torque: Float64Array.of(22, 30, 33, 24),
    shape: 4,
    shapeSpeed: null,
  },
  drag: { shaftSpeed: Float64Array.of(60, 900), torque: Float64Array.of(3, 7) },
});
const SCENES: readonly (readonly [string, OperatingPoint])[] = [
  ['a force, on the level', pointOf(vehicleOf())],
  ['uphill, against the wind', pointOf(vehicleOf(), { grade: 0.03, headwind: 3 })],
  ['a dead time of no whole samples', pointOf(late, { grade: 0.02 })],
  ['second gear', pointOf(gearedVehicle(), { gear: 1, speedKmh: 45, grade: 0.08 })],
  ['top gear, before the wind', pointOf(gearedVehicle(), { gear: 3, speedKmh: 70, headwind: -6 })],
  // Its throttle at 42 % is amid two nodes of the table, so that a small step meets no corner.
  ['an engine with a bent curve', pointOf(bent, { gear: 2, speedKmh: 61, grade: 0.049 })],
  ['an electric drive at its power limit', pointOf(electricOf(), { speedKmh: 90, grade: 0.01 })],
  ['regeneration downhill', pointOf(electricOf(), { speedKmh: 50, grade: -0.06 })],
  ['a belt', pointOf(beltVehicle(), { speedKmh: 50, grade: 0.02 })],
];

describe.each(SCENES)('at %s', (_, point) => {
  const vehicle = vehicleAt(point);
  const { surroundings, speed } = point;

  test('the model of the vehicle is the slope of its forces', () => {
    const model = linearAt(point);
    const surplus = (v: number, u: number, grade: number, headwind: number): number =>
      wheelForce(vehicle.drive, point.gear, v, u, 1) -
      requiredForce(vehicle, v, { ...surroundings, grade, headwind });
    const { grade, headwind } = surroundings;
    const slope = (f: (step: number) => number): number => (f(1e-5) - f(-1e-5)) / 2e-5 / model.effectiveMass;
    const { throttle } = model;
    expectClose(surplus(speed, throttle, grade, headwind), 0, 1e-9);
    expectClose(
      slope((d) => surplus(speed + d, throttle, grade, headwind)),
      model.a,
      1e-7,
    );
    expectClose(
      slope((d) => surplus(speed, throttle + d, grade, headwind)),
      model.b,
      1e-6,
    );
    expectClose(
      slope((d) => surplus(speed, throttle, grade + d, headwind)),
      model.gradeGain,
      1e-6,
    );
    expectClose(
      slope((d) => surplus(speed, throttle, grade, headwind + d)),
      model.headwindGain,
      1e-7,
    );
  });

  test('poles and zeros of the vehicle make its response', () => {
    const linear = linearController(piOf());
    if ('none' in linear) throw new Error(linear.none);
    const { plantPoles, plantZeros } = pointFigures(point, linear);
    const smooth = continuousLoop(vehicle, linearAt(point), { computingDelay: 0 });
    // Up to one factor the response is the product of (s - zero) over that of (s - pole): a ratio at two places.
    const size = (w: number): number =>
      plantZeros.reduce((product, { re, im }) => product * Math.hypot(re, w - im), 1) /
      plantPoles.reduce((product, { re, im }) => product * Math.hypot(re, w - im), 1);
    const seen = (w: number): number => {
      const { re, im } = smooth.plantAt({ re: 0, im: w });
      return Math.hypot(re, im);
    };
    for (const w of [0.001, 0.1, 2, 30]) expectClose(seen(w) / seen(1) / (size(w) / size(1)), 1, 1e-8);
    expect(plantZeros.length).toBe(vehicle.drive.belt === null ? 0 : 1);
  });

  test('a step of 0.1 km/h in the replay is the step of the linear loop to a thousandth', () => {
    const step = 0.1 * KMH;
    const start = 200;
    const road: Road = roadOf([{ length: 1500, grade: surroundings.grade, headwind: surroundings.headwind }]);
    const controller = piOf({ kp: 0.15, ki: 0.03, setpointWeight: 1, sample: 0.02, computingDelay: 0.007 });
    const plan = planOf(road, vehicle, controller, {
      hold: {
        setSpeed: speed,
        setSpeedIs: 'true_speed',
        startSpeed: speed,
        changes: [{ at: { distance: start }, setSpeed: speed + step, ramp: null }],
      },
    });
    const { series } = replay(plan, { settledAt: 0 }, Number.POSITIVE_INFINITY);
    const first = series.reference.findIndex((reference) => reference > speed + step / 2);
    const duration = 20;
    const linear = linearController(controller);
    if ('none' in linear) throw new Error(linear.none);
    const { speed: expected } = pointLoop(point, linear).loop.respond(
      gainsAtPoint(point, linear),
      { reference: step, setpointWeight: 1, disturbance: 0 },
      duration,
      0.02,
    );
    for (let k = 0; k * 0.02 < duration; k += 5) {
      const seen = series.speed[first + k]! - series.speed[first]!;
      expectClose(seen, expected[k]!, 1e-3 * step, `after ${k * 0.02} s`);
    }
  });
});

test('what a sampled loop is tends to the continuous one as its sample time falls', () => {
  const point = SCENES[2]![1];
  const controller = piOf({ kp: 0.25, ki: 0.06, sample: 0.04 });
  const at = (sample: number) => {
    const linear = linearController({ ...controller, sample });
    if ('none' in linear) throw new Error(linear.none);
    return { figures: pointFigures(point, linear, 1), linear };
  };
  const coarse = at(0.04).figures;
  const fine = at(0.01).figures;
  const { continuous } = fine;
  for (const key of ['gainMargin', 'phaseMargin', 'delayMargin', 'sensitivity', 'bandwidth'] as const) {
    const far = Math.abs(coarse.margins[key]! - continuous[key]!);
    const near = Math.abs(fine.margins[key]! - continuous[key]!);
    // A quarter of the sample time, a quarter of the difference.
    expect(near / far, key).toBeLessThan(0.3);
    expect(near / continuous[key]!, key).toBeLessThan(0.06);
  }
  const push = { reference: 1, setpointWeight: 1, disturbance: -0.2 };
  const gains = { kp: 0.25, ki: 0.06, kd: 0.02, derivativeFilter: 0.2 };
  const smooth = continuousLoop(vehicleAt(point), linearAt(point), { computingDelay: 0 });
  const target = smooth.respond(gains, push, 15, 0.053 / 10);
  const miss = [0.02, 0.01, 0.005].map((sample) => {
    const timing = { sample, computingDelay: 0, integration: 'forward' } as const;
    const { speed, spacing } = sampledLoop(vehicleAt(point), linearAt(point), timing).respond(
      gains,
      push,
      15,
      sample,
    );
    let worst = 0;
    target.speed.forEach((value, i) => {
      const at = (i * target.spacing) / spacing;
      const k = Math.floor(at);
      if (k + 1 >= speed.length) return;
      worst = Math.max(worst, Math.abs(speed[k]! + (at - k) * (speed[k + 1]! - speed[k]!) - value));
    });
    return worst;
  });
  expect(miss[2]!).toBeLessThan(0.01);
  expect(miss[0]! / miss[1]!).toBeGreaterThan(1.8);
  expect(miss[1]! / miss[2]!).toBeGreaterThan(1.8);
});

test('a vehicle that runs away by itself is held from a least gain on', () => {
  // Feedback Systems' car in gear 4 at 10 m/s on 4 degrees: the torque rises faster with speed than the resistance.
  const car = textbookCar();
  const grade = Math.tan((4 * Math.PI) / 180);
  const point = pointOf(car, { speedKmh: 36, grade });
  const { a, b } = linearAt(point);
  expect(a).toBeGreaterThan(0.005);
  const controllerOf = (kp: number, ki: number) => {
    const linear = linearController(piOf({ kp, ki, sample: 0.01 }));
    if ('none' in linear) throw new Error(linear.none);
    return linear;
  };
  // dv/dt = (a - kp b) v: P alone needs kp > a / b.
  const kp = 0.1;
  const margins = pointMargins(point, controllerOf(kp, 0));
  expect(margins.stable).toBe(true);
  expectClose(margins.gainReduction!, a / (kp * b), 1e-6);
  expect(pointMargins(point, controllerOf((0.99 * a) / b, 0)).stable).toBe(false);
  // With an integral the same holds: s^2 + (kp b - a) s + ki b; sampling changes it by parts of h.
  const withIntegral = pointMargins(point, controllerOf(kp, 0.001));
  expect(withIntegral.stable).toBe(true);
  expectClose(withIntegral.gainReduction! / (a / (kp * b)), 1, 1e-2);
  expect(pointMargins(point, controllerOf((0.98 * a) / b, 0.001)).stable).toBe(false);
});
