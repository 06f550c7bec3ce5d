import type { PlannedShift } from '../loop/plan.ts';
import type { Road } from '../road/road.ts';
import type { Drive } from '../vehicle/drive.ts';

/** Gear that is engaged by the rider's plan, knot by knot of a road; at the place of a shift the new one. Only a clutch gearbox takes such a plan. */
export function plannedGears(road: Road, drive: Drive, shifts: readonly PlannedShift[]): Uint8Array {
  const gears = new Uint8Array(road.size).fill(drive.gear);
  if (drive.gearbox.kind !== 'clutch') return gears;
  let k = -1;
  for (let i = 0; i < road.size; i++) {
    while (k + 1 < shifts.length && shifts[k + 1].distance <= road.distance[i]) k++;
    if (k >= 0) gears[i] = shifts[k].gear;
  }
  return gears;
}

/** The same vehicle with another gear engaged; what is said of its forces at the wheel goes with the ratio. */
export function inGear<V extends { readonly drive: Drive }>(vehicle: V, gear: number): V {
  const { drive } = vehicle;
  if (gear === drive.gear) return vehicle;
  const scale = drive.gears[gear].ratio / drive.gears[drive.gear].ratio;
  return {
    ...vehicle,
    drive: {
      ...drive,
      gear,
      peakForce: scale * drive.peakForce,
      closedThrottleForce: scale * drive.closedThrottleForce,
      regenerationForce: scale * drive.regenerationForce,
      withoutFuelCut:
        drive.withoutFuelCut === null ? null : inGear({ drive: drive.withoutFuelCut }, gear).drive,
    },
  };
}

/** The same, and a gearbox that shifts by itself stays there. */
export function keptInGear<V extends { readonly drive: Drive }>(vehicle: V, gear: number): V {
  const engaged = inGear(vehicle, gear);
  if (engaged.drive.gearbox.kind !== 'automatic') return engaged;
  return { ...engaged, drive: { ...engaged.drive, gearbox: { kind: 'fixed' } } };
}
