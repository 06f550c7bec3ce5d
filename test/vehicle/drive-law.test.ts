import { describe, expect, test } from 'vitest';
import type { Drive } from '../../src/vehicle/drive.ts';
import { forceRange, throttleFor, wheelForce, wheelForceSlopes } from '../../src/vehicle/drive-law.ts';
import { type ElectricDriveSpec, electricDrive } from '../../src/vehicle/electric-drive.ts';
import { forceDrive } from '../../src/vehicle/force-drive.ts';
import { expectClose } from '../compare.ts';
import { textbookCar } from './vehicles.ts';

const petrol = forceDrive({
  peakForce: 260,
  peakPower: 8500,
  closedThrottleForce: 40,
  lag: 0.15,
  derate: 'naturally_aspirated',
});

const scooter: ElectricDriveSpec = {
  peakForce: 400,
  peakPower: 6000,
  closedThrottleForce: 15,
  regenerationForce: 120,
  regenerationPower: 1500,
  fadeSpeed: 2,
  throttleMin: -1,
  lag: 0.05,
  efficiency: { drive: 0.85, regeneration: 0.6 },
};

/** The envelope as its definition says, apart from the cells. */
function electricForce(spec: ElectricDriveSpec, v: number, u: number): number {
  const fade = spec.fadeSpeed === 0 ? 1 : Math.min(1, v / spec.fadeSpeed);
  const drag = spec.closedThrottleForce * fade;
  const push = Math.min(spec.peakForce, (spec.peakPower ?? Infinity) / v);
  const hold = Math.min(spec.regenerationForce, (spec.regenerationPower ?? Infinity) / v) * fade;
  return u >= 0 ? -drag + u * (push + drag) : -drag + u * hold;
}

function* sampled(count: number): Generator<[number, number]> {
  let seed = 99;
  const random = () => {
    seed = (seed * 1103515245 + 12345) % 2147483648;
    return seed / 2147483648;
  };
  for (let i = 0; i < count; i++) yield [40 * random() ** 2 + 0.01, 2 * random() - 1];
}

describe('a force drive', () => {
  test('gives its definition below and above the corner speed', () => {
    for (const [v, x] of sampled(300)) {
      const u = Math.abs(x);
      expectClose(wheelForce(petrol, 0, v, u, 1), -40 + u * (Math.min(260, 8500 / v) + 40), 1e-10);
    }
  });

  test('loses full-throttle force to altitude and keeps its closed-throttle force', () => {
    for (const [v, x] of sampled(100)) {
      const u = Math.abs(x);
      expectClose(wheelForce(petrol, 0, v, u, 0.8), -40 + u * (0.8 * Math.min(260, 8500 / v) + 40), 1e-10);
    }
    expectClose(forceRange(petrol, 0, 50, 0.8).least, -40, 1e-12);
    expectClose(forceRange(petrol, 0, 50, 0.8).greatest, 0.8 * 170, 1e-12);
  });

  test('without any force only coasts', () => {
    const none = forceDrive({ peakForce: 0, peakPower: 500, closedThrottleForce: 0, lag: 0, derate: 'none' });
    for (const [v, u] of sampled(20)) expect(wheelForce(none, 0, v, Math.abs(u), 1)).toBe(0);
    expect(throttleFor(none, 0, 10, 50, 1)).toBeNull();
  });

  test('refuses a power of nothing', () => {
    const spec = { peakForce: 260, peakPower: 0, closedThrottleForce: 40, lag: 0, derate: 'none' as const };
    expect(() => forceDrive(spec)).toThrow(/peakPower.*found 0; allowed: a finite number above 0 W/);
  });
});

describe('an electric drive', () => {
  // Every order of the three corner speeds, and drives without one or the other.
  const variants: Partial<ElectricDriveSpec>[] = [
    {},
    { fadeSpeed: 0 },
    { fadeSpeed: 14 },
    { fadeSpeed: 20 },
    { regenerationPower: 100 },
    { regenerationPower: null },
    { peakPower: null, regenerationForce: 0, throttleMin: 0 },
    { closedThrottleForce: 0, peakPower: 500 },
  ];
  test.each(variants)('gives its envelope: %o', (change) => {
    const spec = { ...scooter, ...change };
    const drive = electricDrive(spec);
    for (const [v, u] of sampled(300))
      expectClose(wheelForce(drive, 0, v, u, 1), electricForce(spec, v, u), 1e-9);
    expectClose(wheelForce(drive, 0, 0, 0.5, 1), 200 - (spec.fadeSpeed === 0 ? 7.5 : 0), 1e-9);
  });

  test('cannot regenerate at standstill, where only the driving half has an effect', () => {
    const drive = electricDrive(scooter);
    expect(throttleFor(drive, 0, 0, -20, 1)).toBeNull();
    expectClose(throttleFor(drive, 0, 0, 100, 1) ?? Number.NaN, 0.25, 1e-12);
  });
});

describe('throttleFor', () => {
  test('goes on beyond closed throttle where a drive cannot regenerate', () => {
    const plain = electricDrive({ ...scooter, regenerationForce: 0, peakPower: null });
    expect(plain.throttleMin).toBe(0);
    expectClose(throttleFor(plain, 0, 20, -98, 1) ?? Number.NaN, -0.2, 1e-12);
  });
  test('answers a step of the law with the throttle of the step', () => {
    const stepped: Drive = {
      ...petrol,
      speedEdges: new Float64Array(0),
      throttleEdges: Float64Array.of(0.5),
      cells: Float64Array.of(0, 0, 100, 0, 0, 0, 50, 0, 100, 0, 0, 0),
    };
    expect(throttleFor(stepped, 0, 10, 70, 1)).toBe(0.5);
    expectClose(throttleFor(stepped, 0, 10, 40, 1) ?? Number.NaN, 0.4, 1e-15);
    expectClose(throttleFor(stepped, 0, 10, 120, 1) ?? Number.NaN, 0.7, 1e-15);
  });
  const drives: [string, Drive, number][] = [
    ['force', petrol, 0.93],
    ['electric', electricDrive(scooter), 1],
    ['textbook engine', textbookCar().drive, 1],
  ];
  test.each(drives)('undoes wheelForce within and beyond the range: %s', (_, drive, derate) => {
    for (const [v, x] of sampled(300)) {
      const u = drive.throttleMin < 0 ? 1.4 * x : 1.4 * Math.abs(x);
      const force = wheelForce(drive, drive.gear, v, u, derate);
      expectClose(throttleFor(drive, drive.gear, v, force, derate) ?? Number.NaN, u, 1e-11);
    }
  });
});

test.each([
  ['force', petrol],
  ['electric', electricDrive(scooter)],
  ['textbook engine', textbookCar().drive],
])('slopes of the wheel force agree with central differences: %s', (_, drive) => {
  const h = 1e-5;
  for (const [v, u] of sampled(300)) {
    const { ratio } = drive.gears[drive.gear]!;
    if (
      [...drive.speedEdges].some((edge) => Math.abs(edge - ratio * v) < 2 * h * ratio) ||
      Math.abs(u) < 2 * h
    )
      continue;
    const force = (speed: number, throttle: number) => wheelForce(drive, drive.gear, speed, throttle, 0.9);
    const slopes = wheelForceSlopes(drive, drive.gear, v, u, 0.9);
    const scale = 1 + Math.abs(slopes.bySpeed);
    expectClose(slopes.bySpeed, (force(v + h, u) - force(v - h, u)) / (2 * h), 1e-4 * scale);
    expectClose(
      slopes.byThrottle,
      (force(v, u + h) - force(v, u - h)) / (2 * h),
      1e-5 * (1 + slopes.byThrottle),
    );
  }
});
