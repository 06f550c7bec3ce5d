import { BUS_LIMITED, BUS_LOCK, BUS_MEASURED, BUS_REFERENCE } from '../control/bus.ts';
import { cellOf } from '../numeric/interpolate.ts';
import { beltRatio } from '../vehicle/belt-law.ts';
import { derateFactor } from '../vehicle/derating.ts';
import { cellIndex, throttleFor, wheelForce } from '../vehicle/drive-law.ts';
import { levelThrottle } from '../vehicle/equilibrium.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import { loadBelt } from './belt.ts';
import { settleSource } from './draw-power.ts';
import { gearInHand, loadGear } from './engage-gear.ts';
import { gearInForce } from './gearbox.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import { distanceAt, stationAt, surroundingsAt } from './places.ts';
import type { LoopPlan, RoutePlace } from './plan.ts';
import { settleSlope } from './sense-slope.ts';
import { settleSensor } from './sense-speed.ts';
import { gearDue } from './shift-due.ts';

/**
 * Puts the machine at a station in the steady state of a speed: gear, force and throttle that hold it there, limited to
 * the actuator's travel, the plate in the middle of the slack, and a controller that takes over without a bump. Under a given locked throttle the throttle is that
 * one, and the speed is only where the run starts.
 *
 * @param speed in the units of the set speed [m/s]
 */
export function settle(machine: Machine, plan: LoopPlan, station: number, speed: number): void {
  const { s, p } = machine;
  const { drive } = plan.vehicle;
  const v = speed * p[at.P_TO_TRUE];
  s.fill(0);
  s[at.STATION] = station;
  s[at.CELL] = cellOf(plan.road.station, station);
  s[at.SPEED] = v;
  s[at.START_SPEED] = v;
  s[at.FILTERED] = v;
  s[at.BRAKE_REFERENCE] = Number.POSITIVE_INFINITY;
  settleSource(machine);
  settleGear(machine, plan, gearInForce(plan, distanceAt(plan.road, station)));
  // An automatic gearbox has shifted up or down as far as its lines ask, a gear at a time.
  for (let shifts = 1; shifts < drive.gears.length && gearDue(machine) !== s[at.GEAR]; shifts++)
    settleGear(machine, plan, gearDue(machine));
  const throttle = s[at.PLATE];
  for (let i = at.HISTORY; i < s.length; i += at.HISTORY_STRIDE) s[i] = v;
  settleSensor(machine);
  settleSlope(machine);
  s[BUS_MEASURED] = p[at.P_SCALE] * v;
  s[BUS_REFERENCE] = speed;
  s[BUS_LIMITED] = throttle;
  machine.controller.engage(s);
  markLock(machine, plan);
  settleHold(machine, plan);
}

/**
 * Hold as it is at this place where every act of the rider up to it has been done: on, or off with the rider at this
 * speed. Acts by time, and what the run itself does to hold, are not known here.
 */
function settleHold({ s }: Machine, plan: LoopPlan): void {
  const { acts = [] } = plan.rider;
  const passed = ({ at: place }: { readonly at: RoutePlace }): boolean =>
    'distance' in place && stationAt(plan.road, place.distance) < s[at.STATION];
  const countOf = (of: readonly { readonly at: RoutePlace }[]): number => {
    const next = of.findIndex((one) => !passed(one));
    return next < 0 ? of.length : next;
  };
  s[at.HOLD_ACTS] = countOf(acts);
  s[at.FAULTS_BEGUN] = countOf(plan.faults ?? []);
  const last = acts
    .slice(0, s[at.HOLD_ACTS])
    .findLast(({ does }) => does.kind !== 'tap' && does.kind !== 'override')?.does.kind;
  const on = last === undefined ? plan.hold.starts !== 'by_hand' : last === 'engage' || last === 'resume';
  s[at.HOLD_MODE] = on ? at.ENGAGED : at.BY_HAND;
  s[at.HAND_SPEED] = s[at.SPEED];
  s[at.RULES_MEMORY] = s[BUS_MEASURED];
}

/** Puts a gear in hand, with the throttle that holds the speed at this place, and what follows from it. */
function settleGear(machine: Machine, plan: LoopPlan, gear: number): void {
  const { s, p } = machine;
  const { vehicle, controller } = plan;
  const { drive } = vehicle;
  const v = s[at.SPEED];
  const here = surroundingsAt(plan.road, s[at.STATION]);
  const derate = derateFactor(drive, here.airDensity, here.airTemperature);
  const force = requiredForce(vehicle, v, here);
  const pushed = derate * s[at.DRIVE_FACTOR];
  const held = derate * s[at.REGENERATION_FACTOR];
  let needed = throttleFor(drive, gear, v, force, pushed) ?? 0;
  if (needed < 0) needed = throttleFor(drive, gear, v, force, held) ?? 0;
  const given =
    controller.kind === 'locked' && controller.throttle !== 'level' && plan.hold.starts !== 'by_hand'
      ? controller.throttle
      : needed;
  const throttle = Math.min(Math.max(given, p[at.P_LEAST]), p[at.P_GREATEST]);
  loadGear(machine, gear);
  if (drive.belt !== null) {
    const ratio = beltRatio(drive.belt, v, throttle);
    loadBelt(machine, ratio, ratio * v >= drive.belt.locked);
  }
  s[at.START_MASS] = s[at.EFFECTIVE_MASS];
  const push = wheelForce(drive, gear, v, throttle, throttle < 0 ? held : pushed);
  s[at.ACCELERATION] = (push - force) / s[at.EFFECTIVE_MASS];
  s[at.ACTUATOR] = s[at.PLATE] = s[at.THROTTLE] = s[at.LAST_COMMAND] = throttle;
  s[at.THROTTLE_CELL] = cellIndex(machine.throttleEdges, throttle);
}

/** Remembers the air at this place and the gear in hand for a throttle locked `level`. */
export function markLock(machine: Machine, plan: LoopPlan): void {
  machine.s[at.LOCK_GEAR] = gearInHand(machine.s);
  const here = surroundingsAt(plan.road, machine.s[at.STATION]);
  machine.s[at.LOCK_DENSITY] = here.airDensity;
  machine.s[at.LOCK_TEMPERATURE] = here.airTemperature;
}

/** Locks a locked throttle for a set speed, in the air and the gear that were remembered. */
export function lockThrottle(machine: Machine, plan: LoopPlan, setSpeed: number): void {
  const { controller, vehicle } = plan;
  if (controller.kind !== 'locked') return;
  const { s, p } = machine;
  const gear = Math.min(s[at.LOCK_GEAR], vehicle.drive.gears.length - 1);
  const inGear = { ...vehicle, drive: { ...vehicle.drive, gear } };
  s[BUS_LOCK] =
    controller.throttle === 'level'
      ? levelThrottle(inGear, setSpeed * p[at.P_TO_TRUE], s[at.LOCK_DENSITY], s[at.LOCK_TEMPERATURE])
      : controller.throttle;
}
