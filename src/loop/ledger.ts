import { powerDrawn } from '../vehicle/power-map.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import type { Ledger } from './result.ts';

/** Adds the works of the samples that a kernel has just run to the account. */
export function addWorks({ s, p, chunk }: Machine): void {
  const mass = p[at.P_EFFECTIVE_MASS];
  s[at.DRIVE_WORK] += mass * chunk[at.C_PUSH];
  s[at.REGENERATION_WORK] += mass * chunk[at.C_HOLD];
  s[at.AERO_WORK] += mass * chunk[at.C_AERO];
  s[at.ROLLING_WORK] += mass * chunk[at.C_ROLLING];
  s[at.CLIMB_WORK] += mass * chunk[at.C_CLIMB];
  s[at.BRAKE_WORK] += mass * chunk[at.C_BRAKE];
  let magnitude = 0;
  for (let term = at.C_PUSH; term <= at.C_KINETIC; term++) magnitude += Math.abs(chunk[term]);
  s[at.WORK_MAGNITUDE] += mass * magnitude;
}

/** The account of energy up to the machine's present state. */
export function ledgerOf(machine: Machine, vehicle: Vehicle): Ledger {
  const { s, p } = machine;
  const v = s[at.SPEED];
  const start = s[at.START_SPEED];
  const drive = s[at.DRIVE_WORK];
  const regeneration = s[at.REGENERATION_WORK];
  const kinetic = 0.5 * p[at.P_EFFECTIVE_MASS] * (v * v - start * start);
  const spent = s[at.AERO_WORK] + s[at.ROLLING_WORK] + s[at.CLIMB_WORK] + s[at.BRAKE_WORK] + kinetic;
  const magnitude = s[at.WORK_MAGNITUDE];
  const { source } = vehicle.drive;
  return {
    drive,
    regeneration,
    aero: s[at.AERO_WORK],
    rolling: s[at.ROLLING_WORK],
    climb: s[at.CLIMB_WORK],
    brake: s[at.BRAKE_WORK],
    kinetic,
    shifts: 0,
    drawn:
      source === null ? null : powerDrawn(source.map, 1, drive) + powerDrawn(source.map, 1, regeneration),
    chargeAtEnd: null,
    residual: magnitude > 0 ? Math.abs(drive + regeneration - spent) / magnitude : 0,
  };
}
