import { InputError } from '../problems/input-error.ts';
import { checkHold } from './check-hold.ts';
import type { LoopPlan } from './plan.ts';

/** Greatest number of samples of one run. */
const MOST_SAMPLES = 1e9;
const MOST_BANDS = 4;

/**
 * Refuses a plan that cannot be run at all. Values of road and vehicle are the matter of those who made them.
 *
 * @throws InputError `road-too-short`, `out-of-range`, and what `checkHold` throws
 */
export function checkPlan(plan: LoopPlan): void {
  const { road, hold } = plan;
  const sample = plan.controller.kind === 'locked' ? plan.lockedSample : plan.controller.sample;
  if (!(road.size >= 2 && road.station[road.size - 1] > 0)) {
    throw new InputError({
      code: 'road-too-short',
      place: { key: 'road' },
      message: 'the road has no length',
      found: `${road.size} knots`,
      allowed: 'at least 2, not all in one place',
    });
  }
  above('sample', sample, 0, 's');
  above('bin', plan.bin, 0, 'm');
  above('timeLimit', plan.timeLimit, 0, 's');
  above('hold.setSpeed', hold.setSpeed, 0, 'm/s');
  above('hold.startSpeed', hold.startSpeed, 0, 'm/s');
  for (const [i, change] of hold.changes.entries())
    above(`hold.changes[${i}].setSpeed`, change.setSpeed, 0, 'm/s');
  const { gearbox, gears } = plan.vehicle.drive;
  const { shifts } = plan.rider;
  for (const [i, { distance }] of shifts.entries()) {
    const before = shifts[i - 1]?.distance ?? Number.NEGATIVE_INFINITY;
    if (!(Number.isFinite(distance) && distance >= before))
      refuse(`rider.shifts[${i}].distance`, `${distance} m`, i === 0 ? 'a distance' : `at least ${before} m`);
  }
  for (const [i, { gear }] of shifts.entries())
    if (gearbox.kind === 'clutch' && gears[gear] === undefined)
      refuse(`rider.shifts[${i}].gear`, `gear ${gear}`, `0 to ${gears.length - 1}`);
  if (plan.timeLimit / sample > MOST_SAMPLES) refuse('timeLimit', `${plan.timeLimit} s`, '1e9 samples');
  checkHold(plan);
  if (plan.bands.length > MOST_BANDS) refuse('bands', `${plan.bands.length} bands`, `at most ${MOST_BANDS}`);
}

function above(key: string, value: number, least: number, unit: string): void {
  if (!(value > least && Number.isFinite(value))) refuse(key, `${value} ${unit}`, `above ${least} ${unit}`);
}

function refuse(key: string, found: string, allowed: string): never {
  throw new InputError({ code: 'out-of-range', place: { key }, message: 'out of range', found, allowed });
}
