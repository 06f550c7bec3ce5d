import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { rideCsv } from '../../src/report/data/ride-series.ts';
import { summaryJson } from '../../src/report/data/summary.ts';
import { runCase } from '../../src/run/run-case.ts';
import type { RunResult } from '../../src/run/run-result.ts';
import { expectClose } from '../compare.ts';

const encode = (text: string) => new TextEncoder().encode(text);

/** A straight road of 3 km to the east, and rides over it at 16 m/s, by place or by distance. */
const track = `lat_deg,lon_deg,elevation_m\n${Array.from({ length: 151 }, (_, i) => `51.9,${(-14.6 + i * 0.00029).toFixed(6)},100`).join('\n')}\n`;
const log = (from = 0, to = 190, back = false): string => {
  const rows = Array.from({ length: to - from }, (_, i) => {
    const way = (back ? 190 - (from + i) : from + i) * 0.000232;
    return `${1000 + i},51.9,${(-14.6 + way).toFixed(6)},${30 + (i % 5)}`;
  });
  return `time_s,lat_deg,lon_deg,throttle_pct\n${rows.join('\n')}\n`;
};

function run(ride: string, some: Readonly<Record<string, unknown>> = {}): RunResult {
  const document = {
    track: { file: 'road.csv', trim_ends_m: 0 },
    vehicle: {
      mass: { kerb_kg: 120, rider_kg: 80 },
      road_load: { cda_m2: 0.6, crr: 0.015 },
      drive: { kind: 'force', peak_force_n: 400, peak_power_kw: 9, closed_throttle_force_n: 40 },
    },
    hold: { set_speed_kmh: 60 },
    candidates: [{ name: 'steady', kind: 'locked', throttle: 'level' }],
    logged_rides: [{ name: 'ridden', file: 'ride.csv' }],
    ...some,
  };
  const files: Record<string, string> = {
    'case.yaml': JSON.stringify(document),
    'road.csv': track,
    'ride.csv': ride,
  };
  return runCase({ file: 'case.yaml', read: (name) => encode(files[name]!) });
}

function problem(ride: string, some: Readonly<Record<string, unknown>> = {}): InputError {
  try {
    run(ride, some);
  } catch (error) {
    if (error instanceof InputError) return error;
    throw error;
  }
  throw new Error('it ran');
}

describe('a case with a logged ride', () => {
  it('has it beside its candidates, with its file among the inputs', () => {
    const { loggedRides, inputs } = run(log());
    const [ride] = loggedRides;
    expect(inputs.map(({ name }) => name)).toEqual(['case.yaml', 'road.csv', 'ride.csv']);
    // 0.000232 degrees of longitude at 51.9 degrees north are 15.97 m: WGS 84, a cos(lat) / sqrt(1 - e2 sin2 lat).
    const metres = (0.000232 * Math.PI * 6378137 * Math.cos((51.9 * Math.PI) / 180)) / 180;
    const stretched = metres / Math.sqrt(1 - 0.00669438 * Math.sin((51.9 * Math.PI) / 180) ** 2);
    expectClose(ride!.meanSpeed, stretched, 0.01);
    expectClose(ride!.figures.throttle_mean_pct as number, 32, 0.1);
    expect(ride!.beside.map(({ candidate }) => candidate)).toEqual(['steady']);
    expectClose(ride!.beside[0]!.meanSpeed, 60 / 3.6, 0.1);
    expect(ride!.beside[0]!.figures.within_band_pct).toBe(100);
  });

  it('is no candidate: nothing is required of it, and no hill names it', () => {
    const { requirements, hills } = run(log(), {
      requirements: [{ id: 'R-1', figure: 'worst_low_kmh', at_least: -1 }],
    });
    expect(requirements.map(({ candidate }) => candidate)).not.toContain('ridden');
    expect(hills.flatMap(({ outcomes }) => outcomes.map(({ candidate }) => candidate))).not.toContain(
      'ridden',
    );
  });

  it('leaks nothing of the trimmed ends', () => {
    const result = run(log(), { track: { file: 'road.csv', trim_ends_m: 400 } });
    const [ride] = result.loggedRides;
    const length = result.road.distance.at(-1)!;
    expect(length).toBeLessThan(2250);
    expect(ride!.distance[0]).toBeGreaterThanOrEqual(0);
    expect(ride!.distance.at(-1)).toBeLessThanOrEqual(length);
    const seconds = length / 15.9;
    expect(ride!.time.at(-1)).toBeLessThan(seconds);
    const written = `${rideCsv(ride!)}${summaryJson(result, [])}`;
    // Neither the clock of the log nor its positions.
    expect(written).not.toMatch(/-14\.6|51\.9/);
    expect(written.split('\n').some((line) => line.startsWith('1000.'))).toBe(false);
  });

  it('warns where the ride covers a part only', () => {
    const { warnings, loggedRides } = run(log(0, 100));
    expect(warnings.map(({ code }) => code)).toContain('ride-covers-part');
    expect(loggedRides[0]!.gaps.map(({ reason }) => reason)).toEqual(['the ride leaves the road before']);
  });

  it('refuses a ride the other way, with its file and what helps', () => {
    const error = problem(log(0, 190, true));
    expect([error.code, error.problems[0]!.place.file]).toEqual(['ride-wrong-way', 'ride.csv']);
    expect(error.message).toContain('track.direction');
    expect(
      run(log(0, 190, true), { track: { file: 'road.csv', direction: 'back' } }).loggedRides,
    ).toHaveLength(1);
  });

  it('refuses a road that is written by time', () => {
    const byTime = { track: { profile: [{ for_s: 60, grade_pct: 0 }] } };
    expect(problem(log(), byTime).code).toBe('ride-needs-distance');
  });

  it('lays a ride by distance where the road is written', () => {
    const rows = Array.from({ length: 100 }, (_, i) => `${i},${i * 15}`);
    const { loggedRides, warnings } = run(`time_s,distance_m\n${rows.join('\n')}\n`, {
      track: { profile: [{ length_m: 1600, grade_pct: 0 }] },
    });
    expectClose(loggedRides[0]!.meanSpeed, 15, 1e-6);
    expect(loggedRides[0]!.laidBy).toBe('distance');
    expect(warnings.map(({ code }) => code)).toContain('ride-laid-by-distance');
  });
});

describe('a ride that a candidate itself would have logged', () => {
  const hill = {
    track: {
      profile: [900, 500, 1400].map((length_m, i) => ({ length_m, grade_pct: i === 1 ? 9 : 0 })),
      vertical_curve_m: 60,
    },
    candidates: [{ name: 'pi', kind: 'pi', kp_pct_per_kmh: 3, ti_s: 9 }],
    logged_rides: [],
  };
  const { full } = run('', { ...hill, output: { series: 'full' } }).candidates[0]!;
  const samples = [...full!.time.keys()].filter((i) => i % 10 === 0);
  const rows = samples.map((i) =>
    [full!.time[i], full!.distance[i], 3.6 * full!.speed[i]!, 100 * full!.actuator[i]!].join(','),
  );
  const result = run(`time_s,distance_m,speed_kmh,throttle_pct\n${rows.join('\n')}\n`, {
    ...hill,
    logged_rides: [{ name: 'ridden', file: 'ride.csv' }],
  });
  const [ride] = result.loggedRides;

  it.each([
    ['time_s', 0.5],
    ['within_band_pct', 0.5],
    ['rms_error_kmh', 0.02],
    ['p95_abs_error_kmh', 0.05],
    ['mean_error_kmh', 0.01],
    ['worst_low_kmh', 0.01],
    ['worst_high_kmh', 0.01],
    ['time_lost_s', 0.02],
    ['throttle_mean_pct', 0.2],
  ])('has its %s', (name, tolerance) => {
    const own = ride!.beside[0]!.figures[name] as number;
    expectClose(ride!.figures[name] as number, own, tolerance);
  });

  it('is off its set speed on the hill, or these figures would say nothing', () => {
    expect(ride!.figures.worst_low_kmh as number).toBeLessThan(-3);
    expectClose(ride!.meanSpeed, ride!.beside[0]!.meanSpeed, 0.01);
  });
});

describe('the demo of a ride', () => {
  const routes = new URL('../../routes/', import.meta.url);
  const result = runCase({
    file: 'harrow-gap-ridden.yaml',
    read: (file) => readFileSync(new URL(file, routes)),
    overrides: ['candidates=[{name: locked, kind: locked, throttle: level}]', 'requirements=[]'],
  });
  const ride = result.loggedRides[0]!;

  it('waits 25 s at the crossing, and has no fixes in the wood', () => {
    expectClose(ride.pauses[0]!.duration, 25, 3);
    // 200 m are trimmed off: the crossing is at km 20.86 of the track, the wood from km 10.90 to 11.42.
    expectClose(ride.pauses[0]!.at, 20660, 60);
    expectClose(ride.gaps[0]!.from, 10700, 50);
    expectClose(ride.gaps[0]!.to, 11220, 60);
    expect(ride.leftOut).toBe(1);
  });

  it('is slow where the pass takes its power', () => {
    const pass = [...ride.distance.keys()].filter(
      (i) => ride.distance[i]! > 12000 && ride.distance[i]! < 14000,
    );
    const slowest = pass.reduce((least, i) => Math.min(least, ride.speed[i]!), 99);
    expect(slowest).toBeLessThan(50 / 3.6);
    expect(slowest).toBeGreaterThan(20 / 3.6);
    expectClose(
      ride.throttle!.reduce((most, u) => Math.max(most, u), 0),
      1,
      0.01,
    );
  });
});
