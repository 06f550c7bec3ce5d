import type { LoopPlan } from '../loop/plan.ts';
import { scaledDrive } from '../vehicle/scaled-drive.ts';
import { inGear } from './gear-course.ts';

/** The plan at another set speed [m/s]: lower ones of the plan stay, higher ones come down to it. */
export function withSetSpeed(plan: LoopPlan, setSpeed: number): LoopPlan {
  const { hold } = plan;
  return {
    ...plan,
    hold: {
      ...hold,
      setSpeed: Math.min(hold.setSpeed, setSpeed),
      startSpeed: Math.min(hold.startSpeed, setSpeed),
      changes: hold.changes.map((change) => ({ ...change, setSpeed: Math.min(change.setSpeed, setSpeed) })),
    },
  };
}

/** The plan with less or more payload [kg]; the rest of the mass stays. */
export function withPayload(plan: LoopPlan, payload: number): LoopPlan {
  const { vehicle } = plan;
  return { ...plan, vehicle: { ...vehicle, mass: vehicle.mass - vehicle.payload + payload, payload } };
}

/** The plan in another gear all the way; the rider's shifts are left out. */
export function withGear(plan: LoopPlan, gear: number): LoopPlan {
  const { vehicle, rider } = plan;
  return { ...plan, vehicle: inGear(vehicle, gear), rider: { ...rider, shifts: [] } };
}

/** The plan with a shift at a place [m], and none of the rider's own behind it. */
export function withShift(plan: LoopPlan, distance: number, gear: number): LoopPlan {
  const before = plan.rider.shifts.filter((shift) => shift.distance < distance);
  return { ...plan, rider: { ...plan.rider, shifts: [...before, { distance, gear }] } };
}

/** The plan with a drive of `1 + more` times the full-throttle force at every speed; closed throttle and regeneration stay. */
export function withMoreForce(plan: LoopPlan, more: number): LoopPlan {
  const { vehicle } = plan;
  return {
    ...plan,
    vehicle: { ...vehicle, drive: scaledDrive(vehicle.drive, { force: 1 + more, regeneration: 1 }) },
  };
}
