import { describe, expect, test } from 'vitest';
import { fitRide } from '../../src/identify/fit-ride.ts';
import type { RideFit, RideStretch, RideUnknown, RideVehicle } from '../../src/identify/ride.ts';
import { seededStream } from '../../src/numeric/random.ts';
import { expectClose } from '../compare.ts';

const GRAVITY = 9.80665;
const TRUTH = { mass: 215, turning: 12, cda: 0.6, crr: 0.015, density: 1.2 };
const asFiled: RideVehicle = {
  mass: 215,
  rotatingMass: 12,
  cda: 0.5,
  yawFactor: () => 1,
  crr: 0.012,
  c1: 0,
  c2: 0,
};

const height = (x: number) => 20 * Math.sin(x / 400) + 5 * Math.sin(x / 150);
const slope = (x: number) => 0.05 * Math.cos(x / 400) + (5 / 150) * Math.cos(x / 150);

/** A ride with a given force at the wheel over waves of hills, by the classic Runge-Kutta rule; logged every half second. */
function ridden(seconds: number, noise: () => number = () => 0): RideStretch {
  const force = (t: number, x: number) =>
    110 + 60 * Math.sin(t / 47) + 20 * Math.sin(t / 9) + 2109 * slope(x) * 0.8;
  const rate = (t: number, x: number, v: number) => {
    const tan = slope(x);
    const cosine = 1 / Math.sqrt(1 + tan * tan);
    const resistance =
      (TRUTH.density / 2) * TRUTH.cda * v * v + TRUTH.mass * GRAVITY * cosine * (TRUTH.crr + tan);
    return { x: v * cosine, v: (force(t, x) - resistance) / (TRUTH.mass + TRUTH.turning) };
  };
  const h = 0.05;
  const rows: [number, number, number][] = [];
  for (let i = 0, x = 0, v = 15; i * h <= seconds; i++) {
    if (i % 10 === 0) rows.push([i * h, x, v]);
    const t = i * h;
    const a = rate(t, x, v);
    const b = rate(t + h / 2, x + (h / 2) * a.x, v + (h / 2) * a.v);
    const c = rate(t + h / 2, x + (h / 2) * b.x, v + (h / 2) * b.v);
    const d = rate(t + h, x + h * c.x, v + h * c.v);
    x += (h / 6) * (a.x + 2 * b.x + 2 * c.x + d.x);
    v += (h / 6) * (a.v + 2 * b.v + 2 * c.v + d.v);
  }
  const column = (of: (row: [number, number, number]) => number) => Float64Array.from(rows, of);
  const push = column(([t, x]) => force(t, x));
  return {
    time: column(([t]) => t),
    speed: column(([, , v]) => v + noise()),
    place: column(([, x]) => x),
    elevation: column(([, x]) => height(x)),
    grade: column(([, x]) => slope(x)),
    headwind: column(() => 0),
    crosswind: column(() => 0),
    airDensity: column(() => TRUTH.density),
    driveForce: (i) => push[i]!,
    driven: Uint8Array.from(push, (f) => (f > 0 ? 1 : 0)),
  };
}
const found = (fit: RideFit, name: RideUnknown) => fit.unknowns.find((one) => one.name === name)!.estimate;

describe('the fit of a ride without noise', () => {
  const stretch = ridden(1500);

  test.each<[RideUnknown[]]>([[['cda_m2', 'crr']], [['crr', 'cda_m2']], [['cda_m2', 'crr', 'mass_kg']]])(
    'finds what moved the vehicle: %j',
    (unknowns) => {
      const fit = fitRide([stretch], asFiled, unknowns, 500)!;
      expectClose(found(fit, 'cda_m2').value, 0.6, 2e-4);
      expectClose(found(fit, 'crr').value, 0.015, 1e-5);
      if (unknowns.includes('mass_kg')) expectClose(found(fit, 'mass_kg').value, 215, 0.05);
      expect(fit.rmsForce).toBeLessThan(0.05);
      expect(fit.rmsForceBefore).toBeGreaterThan(15);
      expect(fit.unknowns[0]!.was).toBe(unknowns[0] === 'crr' ? 0.012 : 0.5);
    },
  );

  test('takes the rest from the vehicle: with its mass and tyres right, the drag area alone', () => {
    const fit = fitRide([stretch], { ...asFiled, crr: 0.015 }, ['cda_m2'], 500)!;
    expectClose(found(fit, 'cda_m2').value, 0.6, 1e-4);
    expect(fit.correlation).toBe(null);
  });

  test('closes the height of the road with the same numbers', () => {
    const { closure } = fitRide([stretch], asFiled, ['cda_m2', 'crr'], 500)!;
    expectClose(closure!.cda.value, 0.6, 2e-3);
    expectClose(closure!.crr.value, 0.015, 1e-4);
    expect(closure!.after).toBeLessThan(0.01);
    expect(closure!.before).toBeGreaterThan(0.05);
  });

  test('leaves nothing in any segment, neither of energy nor of speed', () => {
    const { segments, length } = fitRide([stretch], asFiled, ['cda_m2', 'crr'], 500)!;
    expect(segments.length).toBe(Math.round(length / 500));
    for (const segment of segments) {
      expectClose(segment.given, segment.neededAfter, 60);
      expect(Math.abs(segment.given - segment.needed)).toBeGreaterThan(2000);
      expect(segment.rmsSpeedAfter).toBeLessThan(0.01);
      // too little drag and rolling resistance: the simulation is faster than the ride
      expect(segment.endSpeed).toBeGreaterThan(0.1);
    }
    expectClose(segments.at(-1)!.to, stretch.place.at(-1)!, 1e-9);
  });
});

describe('the intervals of a ride', () => {
  test('hold the truth in about 95 % of seeded rides with a noisy speed and a drifting height', () => {
    const random = seededStream(4);
    const TRIALS = 40;
    const clean = ridden(900);
    let hits = 0;
    for (let trial = 0; trial < TRIALS; trial++) {
      let drift = 0;
      const stretch = {
        ...clean,
        speed: clean.speed.map((v) => v + 0.05 * random.normal()),
        elevation: clean.elevation.map((z) => {
          drift = 0.99 * drift + 0.2 * Math.sqrt(1 - 0.99 ** 2) * random.normal();
          return z + drift;
        }),
      };
      const { low, high } = found(fitRide([stretch], asFiled, ['cda_m2', 'crr'], 500)!, 'cda_m2');
      hits += low <= 0.6 && 0.6 <= high ? 1 : 0;
    }
    expect(hits / TRIALS).toBeGreaterThan(0.85);
  });

  test('are none for a ride too short, or with the drive closed all along', () => {
    expect(fitRide([ridden(200)], asFiled, ['cda_m2', 'crr'], 500)).toBe(null);
    const stretch = ridden(600);
    expect(fitRide([{ ...stretch, driven: stretch.driven.map(() => 0) }], asFiled, ['crr'], 500)).toBe(null);
  });
});
