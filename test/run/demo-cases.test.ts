// The stories that README.md tells of the demo's cases, as the program finds them.

import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { runCase } from '../../src/run/run-case.ts';

const routes = new URL('../../routes/', import.meta.url);
const run = (name: string, overrides: readonly string[] = []) =>
  runCase({ file: name, read: (file) => readFileSync(new URL(file, routes)), overrides });

it('surges on the descent over the fuel cut, and not without it', () => {
  const { cycles, candidates } = run('harrow-descent.yaml');
  expect(cycles.map(({ candidate, cause }) => [candidate, cause])).toEqual([['pi-brisk', 'fuel_cut']]);
  const [surge] = cycles;
  // The descent of 2400 m at 9 % begins at km 1.3.
  expect(surge!.from).toBeGreaterThan(1200);
  expect(surge!.to).toBeLessThan(3800);
  expect(surge!.to - surge!.from).toBeGreaterThan(1500);
  expect(candidates.every(({ result }) => result.status === 'completed')).toBe(true);
  expect(run('harrow-descent.yaml', ['vehicle.drive.fuel_cut.extra_drag_nm=0']).cycles).toEqual([]);
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
