import { altitudeDerate, driveLag, kind, mapping, number, optional, otherwise } from './fields.ts';

/** Greatest power at the wheel of a drive that is known there. */
export const peakPower = optional(
  number('kW', 0.01, 500, 'Greatest power at the wheel'),
  'none',
  'not given: no power limit',
);

/** A drive known by its force at the wheel. */
export const forceSchema = mapping('Force at the wheel by throttle, one fixed ratio', {
  kind: kind('force'),
  peak_force_n: number('N', 1, 20000, 'Greatest force at the wheel, at full throttle'),
  peak_power_kw: peakPower,
  closed_throttle_force_n: otherwise(
    number('N', 0, 5000, 'Force at the wheel that holds back at closed throttle, written positive'),
    0,
    'ideal: nothing holds back at closed throttle',
  ),
  lag_s: driveLag,
  altitude_derate: altitudeDerate,
});
