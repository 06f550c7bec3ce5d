import { InputError } from '../problems/input-error.ts';
import type { LoopPlan, RiderDeed, RoutePlace } from './plan.ts';

/**
 * Refuses rules of the unit, acts of the rider and faults of the sensor that cannot be run.
 *
 * @throws InputError `out-of-range`, `not-in-order`, `needs-supervisor`, `no-clutch`
 */
export function checkHold({ supervisor, faults = [], rider, vehicle }: LoopPlan): void {
  if (supervisor !== undefined) {
    const { tooSlow, tooFast, believable, resumeRamp, tapRamp, tap, lowestSpeed, override } = supervisor;
    atLeast('supervisor.lowestSpeed', lowestSpeed, 0, 'm/s');
    atLeast('supervisor.tap', tap, 0, 'm/s');
    atLeast('supervisor.override.reentry', override.reentry, 0, 'm/s');
    for (const [name, value] of Object.entries({ believable, resumeRamp, tapRamp }))
      if (value !== null) above(`supervisor.${name}`, value, 'm/s2');
    for (const [name, rule] of Object.entries({ tooSlow, tooFast })) {
      if (rule === null) continue;
      above(`supervisor.${name}.by`, rule.by, 'm/s');
      atLeast(`supervisor.${name}.for`, rule.for, 0, 's');
    }
  }
  inOrder('faults', faults);
  for (const [i, fault] of faults.entries()) above(`faults[${i}].for`, fault.for, 's');
  const { acts = [], resumesAfter = null } = rider;
  if (resumesAfter !== null) atLeast('rider.resumesAfter', resumesAfter, 0, 's');
  inOrder('rider.acts', acts);
  const { gearbox, belt } = vehicle.drive;
  for (const [i, { does }] of acts.entries()) {
    const key = `rider.acts[${i}].does`;
    checkDeed(key, does);
    if (does.kind === 'tap' && supervisor === undefined)
      refuse('needs-supervisor', key, 'a tap', 'a unit that knows what a tap is');
    if (does.kind === 'clutch' && (gearbox.kind === 'automatic' || belt !== null))
      refuse('no-clutch', key, 'a clutch lever', 'a drive that has one');
  }
}

function checkDeed(key: string, does: RiderDeed): void {
  switch (does.kind) {
    case 'tap':
      if (!Number.isInteger(does.taps)) refuse('out-of-range', `${key}.taps`, `${does.taps}`, 'whole taps');
      return;
    case 'override':
      atLeast(`${key}.throttle`, does.throttle, 0, '');
      above(`${key}.for`, does.for, 's');
      return;
    case 'brake':
      above(`${key}.to`, does.to, 'm/s');
      above(`${key}.deceleration`, does.deceleration, 'm/s2');
      return;
    case 'ride':
      above(`${key}.to`, does.to, 'm/s');
      above(`${key}.acceleration`, does.acceleration, 'm/s2');
      return;
    case 'clutch':
      above(`${key}.for`, does.for, 's');
      return;
  }
}

/** Places of one kind never go back; of a distance and a time nobody knows which comes first. */
function inOrder(key: string, of: readonly { readonly at: RoutePlace }[]): void {
  let distance = Number.NEGATIVE_INFINITY;
  let time = 0;
  for (const [i, { at }] of of.entries()) {
    const [value, least, unit] =
      'distance' in at ? ([at.distance, distance, 'm'] as const) : ([at.time, time, 's'] as const);
    if (!Number.isFinite(value))
      refuse('out-of-range', `${key}[${i}].at`, `${value} ${unit}`, 'a place or a time');
    if (value < least)
      refuse('not-in-order', `${key}[${i}].at`, `${value} ${unit}`, `at least ${least} ${unit}`);
    if ('distance' in at) distance = value;
    else time = value;
  }
}

function above(key: string, value: number, unit: string): void {
  if (!(value > 0 && Number.isFinite(value)))
    refuse('out-of-range', key, `${value} ${unit}`, `above 0 ${unit}`);
}

function atLeast(key: string, value: number, least: number, unit: string): void {
  if (!(value >= least && Number.isFinite(value)))
    refuse('out-of-range', key, `${value} ${unit}`, `at least ${least} ${unit}`);
}

function refuse(code: string, key: string, found: string, allowed: string): never {
  throw new InputError({ code, place: { key }, message: 'cannot be run', found, allowed });
}
