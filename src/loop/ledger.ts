import type { Vehicle } from '../vehicle/vehicle.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import type { Ledger } from './result.ts';

/** Adds the works of the samples that a kernel has just run to the account. */
export function addWorks({ s, chunk }: Machine): void {
  s[at.DRIVE_WORK] += chunk[at.C_PUSH];
  s[at.REGENERATION_WORK] += chunk[at.C_HOLD];
  s[at.AERO_WORK] += chunk[at.C_AERO];
  s[at.ROLLING_WORK] += chunk[at.C_ROLLING];
  s[at.CLIMB_WORK] += chunk[at.C_CLIMB];
  s[at.BRAKE_WORK] += chunk[at.C_BRAKE];
  let magnitude = 0;
  for (let term = at.C_PUSH; term <= at.C_KINETIC; term++) magnitude += Math.abs(chunk[term]);
  s[at.WORK_MAGNITUDE] += magnitude;
}

/** The account of energy up to the machine's present state. */
export function ledgerOf(machine: Machine, vehicle: Vehicle): Ledger {
  const { s } = machine;
  const energy = (mass: number, speed: number): number => 0.5 * mass * speed * speed;
  const drive = s[at.DRIVE_WORK];
  const regeneration = s[at.REGENERATION_WORK];
  const kinetic = energy(s[at.EFFECTIVE_MASS], s[at.SPEED]) - energy(s[at.START_MASS], s[at.START_SPEED]);
  const shifts = s[at.SHIFT_WORK];
  const spent = s[at.AERO_WORK] + s[at.ROLLING_WORK] + s[at.CLIMB_WORK] + s[at.BRAKE_WORK] + kinetic + shifts;
  const magnitude = s[at.WORK_MAGNITUDE];
  const { source } = vehicle.drive;
  const capacity = source?.kind === 'battery' ? source.capacity : null;
  return {
    drive,
    regeneration,
    aero: s[at.AERO_WORK],
    rolling: s[at.ROLLING_WORK],
    climb: s[at.CLIMB_WORK],
    brake: s[at.BRAKE_WORK],
    kinetic,
    shifts,
    drawn: source === null ? null : s[at.DRAWN],
    chargeAtEnd: capacity === null ? null : s[at.CHARGE] / capacity,
    residual: magnitude > 0 ? Math.abs(drive + regeneration - spent) / magnitude : 0,
  };
}
