import type { LoopPlan } from '../loop/plan.ts';

/** The same plan with one limitation taken away and nothing else changed. */
export type Limitation = 'windup' | 'rate' | 'range' | 'derating' | 'wind';

/** A throttle range so wide that no hill reaches its ends; the drive's law goes on in a straight line, so the gain is the same. */
const UNLIMITED = 50;
/** Shortest tracking time of an integrator that does not wind up, in samples. */
const TRACKING_SAMPLES = 5;

/** True where the plan has this limitation at all. */
export function has(plan: LoopPlan, limitation: Limitation): boolean {
  const { controller, vehicle, road } = plan;
  switch (limitation) {
    case 'windup':
      return controller.kind === 'pi' && controller.ki > 0;
    case 'rate':
      return vehicle.actuator.rateLimit !== null;
    case 'range':
      return true;
    case 'derating':
      return vehicle.drive.derate !== 'none';
    case 'wind':
      return road.headwind.some((w) => w !== 0) || road.crosswind.some((w) => w !== 0);
  }
}

/** Takes the limitation away: an integrator that follows the limited command at once, no rate limit, no throttle range, sea-level force, still air. */
export function without(plan: LoopPlan, limitation: Limitation): LoopPlan {
  const { controller, vehicle, road } = plan;
  switch (limitation) {
    case 'windup':
      if (controller.kind !== 'pi') return plan;
      return {
        ...plan,
        controller: {
          ...controller,
          antiWindup: { kind: 'back_calculation', trackingTime: TRACKING_SAMPLES * controller.sample },
        },
      };
    case 'rate':
      return { ...plan, vehicle: { ...vehicle, actuator: { ...vehicle.actuator, rateLimit: null } } };
    case 'range':
      return {
        ...plan,
        vehicle: {
          ...vehicle,
          drive: { ...vehicle.drive, throttleMin: -UNLIMITED, throttleMax: UNLIMITED },
        },
      };
    case 'derating':
      return { ...plan, vehicle: { ...vehicle, drive: { ...vehicle.drive, derate: 'none' } } };
    case 'wind':
      return {
        ...plan,
        road: {
          ...road,
          headwind: new Float64Array(road.size),
          crosswind: new Float64Array(road.size),
        },
      };
  }
}
