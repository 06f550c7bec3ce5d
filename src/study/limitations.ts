import type { LoopPlan } from '../loop/plan.ts';
import type { Drive } from '../vehicle/drive.ts';
import type { EnergySource } from '../vehicle/energy-source.ts';
import type { Actuator, Vehicle } from '../vehicle/vehicle.ts';

/** What a plan can have taken away with nothing else changed. */
export type Limitation =
  | 'windup'
  | 'rate'
  | 'range'
  | 'derating'
  | 'wind'
  | 'slack'
  | 'pulses'
  | 'resolution'
  | 'fuel_cut'
  | 'dead_time'
  | 'shifting'
  | 'grip';

/** A throttle range so wide that no hill reaches its ends; the drive's law goes on in a straight line, so the gain is the same. */
const UNLIMITED = 50;
/** Shortest tracking time of an integrator that does not wind up, in samples. */
const TRACKING_SAMPLES = 5;

/** True where the plan has this limitation at all. */
export function has(plan: LoopPlan, limitation: Limitation): boolean {
  const { controller, vehicle, road } = plan;
  const { actuator, drive } = vehicle;
  switch (limitation) {
    case 'windup':
      return controller.kind !== 'locked' && controller.ki > 0 && windsUp(controller);
    case 'rate':
      return actuator.rateLimit !== null;
    case 'range':
      return true;
    case 'derating':
      return drive.derate !== 'none' || deratesByItself(drive.source);
    case 'wind':
      return road.headwind.some((w) => w !== 0) || road.crosswind.some((w) => w !== 0);
    case 'slack':
      return actuator.slack > 0;
    case 'pulses':
      return vehicle.sensor.pulses !== null;
    case 'resolution':
      return actuator.resolution > 0;
    case 'fuel_cut':
      return drive.withoutFuelCut !== null;
    case 'dead_time':
      return actuator.deadTime > 0;
    case 'shifting':
      return drive.gearbox.kind === 'automatic' && drive.gears.length > 1;
    case 'grip':
      return vehicle.traction !== null;
  }
}

/**
 * Takes the limitation away: an integrator that follows the limited command at once; no rate limit; no throttle range
 * or end stops, whatever the battery; sea-level force and a battery that is always cold and full enough, also of room; still air; no lost motion; a sensor
 * that sees the speed itself; commands of any fineness; no step of a fuel cut; no dead time; an automatic gearbox that
 * stays in the gear it starts in; unbounded grip.
 */
export function without(plan: LoopPlan, limitation: Limitation): LoopPlan {
  const { controller, vehicle, road } = plan;
  const { drive } = vehicle;
  switch (limitation) {
    case 'windup':
      return controller.kind === 'locked' ? plan : { ...plan, controller: withoutWindup(controller) };
    case 'rate':
      return withActuator(plan, { rateLimit: null });
    case 'range': {
      const free = withActuator(plan, { travel: null });
      return withVehicle(free, {
        drive: {
          ...drive,
          throttleMin: -UNLIMITED,
          throttleMax: UNLIMITED,
          source: atItsBest(drive.source),
        },
      });
    }
    case 'derating':
      return withVehicle(plan, {
        drive: { ...drive, derate: 'none', source: atItsBest(drive.source) },
      });
    case 'wind':
      return {
        ...plan,
        road: {
          ...road,
          headwind: new Float64Array(road.size),
          crosswind: new Float64Array(road.size),
        },
      };
    case 'slack':
      return withActuator(plan, { slack: 0 });
    case 'pulses':
      return withVehicle(plan, { sensor: { ...vehicle.sensor, pulses: null } });
    case 'resolution':
      return withActuator(plan, { resolution: 0 });
    case 'fuel_cut':
      return withVehicle(plan, { drive: withoutFuelCut(drive) });
    case 'dead_time':
      return withActuator(plan, { deadTime: 0 });
    case 'shifting':
      return withVehicle(plan, { drive: { ...drive, gearbox: { kind: 'fixed' } } });
    case 'grip':
      return withVehicle(plan, { traction: null });
  }
}

type Feedback = Exclude<LoopPlan['controller'], { readonly kind: 'locked' }>;

/** A velocity form remembers no integral. */
function windsUp(controller: Feedback): boolean {
  return !(controller.kind === 'pid' && controller.form.kind === 'velocity');
}

/** Whole numbers have no back calculation: their integral keeps to what the range leaves it. */
function withoutWindup(controller: Feedback): Feedback {
  const antiWindup = {
    kind: 'back_calculation',
    trackingTime: TRACKING_SAMPLES * controller.sample,
  } as const;
  switch (controller.kind) {
    case 'pi':
      return { ...controller, antiWindup };
    case 'pid':
      return windsUp(controller) ? { ...controller, form: { kind: 'positional', antiWindup } } : controller;
    case 'integer':
      return { ...controller, integralRule: { kind: 'clamping' } };
  }
}

const withVehicle = (plan: LoopPlan, change: Partial<Vehicle>): LoopPlan => ({
  ...plan,
  vehicle: { ...plan.vehicle, ...change },
});

const withActuator = (plan: LoopPlan, change: Partial<Actuator>): LoopPlan =>
  withVehicle(plan, { actuator: { ...plan.vehicle.actuator, ...change } });

/** Voltage, heat or emptiness takes force away, or a full battery regeneration. */
export function deratesByItself(source: EnergySource | null): boolean {
  if (source === null || source.kind !== 'battery') return false;
  const { capacity, sag, acceptance, heating } = source;
  return capacity !== null || sag !== null || acceptance !== null || heating !== null;
}

function atItsBest(source: EnergySource | null): EnergySource | null {
  if (source === null || source.kind !== 'battery') return source;
  return { ...source, capacity: null, sag: null, acceptance: null, heating: null };
}

/** The law alone is exchanged: gear, range and what else a study has changed stay. */
function withoutFuelCut(drive: Drive): Drive {
  const smooth = drive.withoutFuelCut;
  if (smooth === null) return drive;
  const { speedEdges, throttleEdges, cells, losses, closedThrottleForce } = smooth;
  return {
    ...drive,
    speedEdges,
    throttleEdges,
    cells,
    losses,
    closedThrottleForce,
    withoutFuelCut: null,
    fuelCutBelow: 0,
  };
}
