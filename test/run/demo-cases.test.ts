// The stories that README.md tells of the demo's cases, as the program finds them.

import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { vehicleOf } from '../../src/case/vehicle-of.ts';
import { runCase } from '../../src/run/run-case.ts';
import { throttleFor } from '../../src/vehicle/drive-law.ts';
import { equilibriumSpeeds } from '../../src/vehicle/equilibrium.ts';
import { requiredForce } from '../../src/vehicle/resistance.ts';

const routes = new URL('../../routes/', import.meta.url);
const run = (name: string, overrides: readonly string[] = []) =>
  runCase({ file: name, read: (file) => readFileSync(new URL(file, routes)), overrides });

it('surges on the descent over the fuel cut, and not without it', () => {
  const { cycles, candidates } = run('harrow-descent.yaml', ['requirements=[]']);
  expect(cycles.map(({ candidate, cause }) => [candidate, cause])).toEqual([['pi-brisk', 'fuel_cut']]);
  const [surge] = cycles;
  // The descent of 2400 m at 9 % begins at km 1.3.
  expect(surge!.from).toBeGreaterThan(1200);
  expect(surge!.to).toBeLessThan(3800);
  expect(surge!.to - surge!.from).toBeGreaterThan(1500);
  expect(candidates.every(({ result }) => result.status === 'completed')).toBe(true);
  expect(
    run('harrow-descent.yaml', ['vehicle.drive.fuel_cut.extra_drag_nm=0', 'requirements=[]']).cycles,
  ).toEqual([]);
});

it('loses the pass in fifth, and not in third', () => {
  const lost = (gear: number): number => {
    const { candidates } = run('harrow-wrong-gear.yaml', [
      `hold.gear=${gear}`,
      'candidates=[{name: pi-droop2, kind: pi, design: {droop_kmh: 2, grade_step_pct: 6, damping: 0.8, at_kmh: 60}}]',
      'requirements=[]',
    ]);
    const { bins, status } = candidates[0]!.result;
    expect(status).toBe('completed');
    return bins.errorMin.subarray(0, bins.size).reduce((least, error) => Math.min(least, error), 0);
  };
  expect(lost(5)).toBeLessThan(-20 / 3.6);
  expect(lost(3)).toBeGreaterThan(-5 / 3.6);
});

it('shifts where the rider planned it, and the hold resumes', () => {
  const { candidates } = run('harrow-shifts.yaml', [
    'candidates.0={name: given, kind: locked, throttle_pct: 100}',
    'requirements=[]',
  ]);
  const { shifts } = candidates[1]!.result;
  expect(shifts.map(({ from, to }) => [from, to])).toEqual([
    [4, 2],
    [2, 3],
    [3, 4],
  ]);
  const planned = [10200, 15200, 19600];
  shifts.forEach(({ distance, time, resumedAt }, i) => {
    expect(Math.abs(distance - planned[i]!)).toBeLessThan(2);
    // Half a second with the clutch open, two until the rider resumes.
    expect(resumedAt! - time).toBeCloseTo(2.5, 1);
  });
});

it('settles with a locked throttle at one speed on every hill, lower the steeper it is', () => {
  const speed = 60 / 3.6;
  const level = { grade: 0, headwind: 0, crosswind: 0, airDensity: 1.2, airTemperature: 288.15 };
  for (const name of ['proving-125.yaml', 'proving-125-cable.yaml', 'proving-belt.yaml']) {
    const text = readFileSync(new URL(`vehicles/${name}`, routes), 'utf8');
    const vehicle = vehicleOf(readVehicleFile(text, name));
    const { drive } = vehicle;
    const throttle = throttleFor(drive, drive.gear, speed, requiredForce(vehicle, speed, level), 1)!;
    let faster = Number.POSITIVE_INFINITY;
    for (let grade = -0.05; grade < 0.095; grade += 0.005) {
      const found = equilibriumSpeeds(vehicle, { ...level, grade }, throttle);
      expect(found, `${name} at ${grade}`).toMatchObject([{ stable: true }]);
      expect(found[0]!.speed).toBeLessThan(faster);
      faster = found[0]!.speed;
    }
    expect(faster).toBeGreaterThan(15 / 3.6);
  }
});

it('loses speed on a hill of 6 % with a throttle locked in place, and gets over it', () => {
  const { candidates } = run('one-hill.yaml');
  const [locked] = candidates;
  expect(locked!.result.status).toBe('completed');
  const { bins } = locked!.result;
  const least = bins.errorMin.subarray(0, bins.size).reduce((worst, error) => Math.min(worst, error), 0);
  expect(least).toBeLessThan(-15 / 3.6);
  expect(least).toBeGreaterThan(-35 / 3.6);
});

it('holds the speed with a belt wherever its drive can, and the gains of another do not', () => {
  const { candidates, requirements } = run('harrow-belt.yaml');
  expect(candidates.every(({ result }) => result.status === 'completed')).toBe(true);
  const verdicts = (name: string) =>
    requirements.filter(({ candidate }) => candidate === name).map(({ verdict }) => verdict);
  expect(verdicts('pi-droop')).toEqual(['met', 'met']);
  expect(verdicts('pi-shipped')).toContain('not met');
});

it('swings over the slack of a worn cable, and not with a new one', () => {
  const brisk = (...overrides: string[]) =>
    run('harrow-cable.yaml', [
      'candidates=[{name: pi-brisk, kind: pi, sample_s: 0.02, kp_pct_per_kmh: 4, ti_s: 2.5}]',
      'requirements=[]',
      ...overrides,
    ]).cycles.map(({ cause }) => cause);
  expect(brisk()).toContain('slack');
  expect(brisk('vehicle.actuator.slack_pct=0')).not.toContain('slack');
});

it('loses two up what it holds alone', () => {
  const { matrix } = run('harrow-matrix.yaml', ['matrix={loads: [solo, two_up], directions: [there, back]}']);
  const verdicts = (load: string) =>
    matrix!.cells
      .filter(({ combination }) => combination.load.label === load)
      .flatMap(({ findings }) => findings.map(({ verdict }) => verdict));
  expect(verdicts('solo')).toHaveLength(6);
  expect(verdicts('solo')).not.toContain('not met');
  expect(verdicts('two up').filter((verdict) => verdict === 'not met').length).toBeGreaterThanOrEqual(3);
});

it('is ridden by hand through the bends of the pass, and hold comes back behind them', () => {
  const { bends, candidates, transients, warnings } = run('harrow-rider.yaml', [
    'candidates=[{name: pi-droop2, kind: pi, design: {droop_kmh: 2, grade_step_pct: 6, damping: 0.8, at_kmh: 60}}]',
    'requirements=[]',
    'scheme=fast',
  ]);
  const [{ result, figures }] = candidates as [(typeof candidates)[number]];
  expect(result.status).toBe('completed');
  expect(figures.command_step_pct).toBeLessThan(0.5);
  // What the road does in the minute behind it counts as well.
  expect(figures.engage_sag_kmh).toBeLessThan(1);
  const ends = result.holdEvents!.filter(({ kind, cause }) => kind === 'ended' && cause === 'bend');
  expect(ends).toHaveLength(bends!.stops.length);
  // The stops on the climb, each braked for at 2 m/s2, at no more than 2.5 m/s2 to the side.
  for (const { from, to, curvature } of bends!.bends) {
    const { edge, size, speedMax } = result.bins;
    for (let i = 0; i < size; i++)
      if (edge[i]! >= from && edge[i + 1]! <= to)
        expect(speedMax[i]! * speedMax[i]! * curvature).toBeLessThan(2.5 * 1.05);
  }
  expect(warnings.filter(({ code }) => code === 'hold-does-not-belong')).toHaveLength(bends!.unfit.length);
  expect(transients.shown.map(({ event }) => event.kind)).toContain('override_ended');
});
