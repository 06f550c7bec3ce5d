import { bracketedRoot } from '../numeric/root.ts';
import { STANDARD_GRAVITY } from '../units/constants.ts';
import { derateFactor } from '../vehicle/derating.ts';
import { throttleFor, wheelForce } from '../vehicle/drive-law.ts';
import { aeroForce } from '../vehicle/resistance.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { extrapolatedStep } from './extrapolated-step.ts';

/** The loop with a continuous controller, for checks against published solutions and for the small-signal limit. */
export interface ContinuousLoop {
  /** Lags and the sensor's filter count; rate limit, delay, scale error and stall do not. */
  readonly vehicle: Vehicle;
  readonly command: ContinuousCommand;
  /** What the vehicle meets, by distance along the slope [m] and time [s]: smooth between the corners. */
  readonly surroundings: (distance: number, time: number) => Surroundings;
  /** Where surroundings or reference have corners: distances along the slope [m] and times [s], increasing. */
  readonly corners: { readonly distances: readonly number[]; readonly times: readonly number[] };
  /** Where it starts, settled [m/s]. */
  readonly startSpeed: number;
  /** Instants to report [s], increasing from 0 or later. */
  readonly times: readonly number[];
  /** Of other models: gravity [m/s2], and rolling resistance without cos(theta). */
  readonly gravity?: number;
  readonly rollingWithoutSlope?: boolean;
}

export type ContinuousCommand =
  | { readonly kind: 'locked' }
  | {
      readonly kind: 'pi';
      /** [1/(m/s)], [1/(m/s)/s] */
      readonly kp: number;
      readonly ki: number;
      readonly setpointWeight: number;
      /** Back-calculation, 1 / tracking time [1/s]; 0: none. */
      readonly trackingRate: number;
      /** False: the command leaves the drive's range. */
      readonly limited: boolean;
      /** [m/s] at a time [s]. */
      readonly reference: (time: number) => number;
    };

/** Solution at the instants asked for. Equal lengths; SI. `command` is before it is limited. */
export interface ContinuousSeries {
  readonly time: Float64Array;
  readonly distance: Float64Array;
  readonly speed: Float64Array;
  readonly command: Float64Array;
  readonly applied: Float64Array;
  readonly throttle: Float64Array;
  readonly driveForce: Float64Array;
  readonly elevation: Float64Array;
}

const DISTANCE = 0;
const SPEED = 1;
const ACTUATOR = 2;
const THROTTLE = 3;
const FILTERED = 4;
const INTEGRAL = 5;
const ELEVATION = 6;
const STATES = 7;

/** Longest step [s]. */
const STEP = 0.02;
/** A crossing is met to this time [s]. */
const INSTANT = 1e-13;

/**
 * Solves the continuous loop
 *
 *     u = kp (b r - y) + I,  dI/dt = ki (r - y) + (sat(u) - u) / Tt,
 *
 * over the plant of the sampled loop (see exact.ts) by extrapolated midpoint steps of order 12, each cut where the
 * command enters or leaves saturation, the speed crosses an edge of the drive's cells, or a corner is met.
 */
export function solveContinuous(loop: ContinuousLoop): ContinuousSeries {
  const model = modelOf(loop);
  const times = [...loop.times];
  const stops = [...new Set([...loop.corners.times, ...times])].sort((a, b) => a - b);
  const state = model.start();
  const sides = model.crossings(state, 0).map((g) => Math.sign(g) || -1);
  const rows: number[][] = [];
  let time = 0;
  if (times[0] === 0) rows.push(model.report(state, 0, sides));

  for (const stop of stops) {
    while (stop - time > INSTANT) {
      const from = Float64Array.from(state);
      const most = Math.min(STEP, stop - time);
      const at = time;
      const slope = (t: number, y: Float64Array, out: Float64Array): void => model.slope(t, y, out, sides);
      const reach = (h: number): number[] => {
        state.set(from);
        extrapolatedStep(slope, at, state, h);
        return model.crossings(state, at + h);
      };
      let h = most;
      let crossed = -1;
      const end = reach(most);
      end.forEach((g, i) => {
        if (g * sides[i]! >= 0) return;
        const before = model.crossings(from, at)[i]! * sides[i]!;
        const root = before <= 0 ? 0 : bracketedRoot((t) => reach(t)[i]!, 0, most, INSTANT).x;
        if (crossed < 0 || root < h) {
          h = root;
          crossed = i;
        }
      });
      if (crossed >= 0) {
        reach(h);
        sides[crossed] = -sides[crossed]!;
      }
      time = stop - (time + h) < INSTANT ? stop : time + h;
    }
    time = stop;
    if (stop > 0 && times.includes(stop)) rows.push(model.report(state, stop, sides));
  }
  const column = (k: number): Float64Array => Float64Array.from(rows, (row) => row[k]!);
  return {
    time: column(0),
    distance: column(1),
    speed: column(2),
    command: column(3),
    applied: column(4),
    throttle: column(5),
    driveForce: column(6),
    elevation: column(7),
  };
}

interface Model {
  readonly start: () => Float64Array;
  readonly slope: (time: number, y: Float64Array, out: Float64Array, sides: readonly number[]) => void;
  /** Functions whose sign changes are kinks; the first two are the distances to the upper and lower limit. */
  readonly crossings: (y: Float64Array, time: number) => number[];
  readonly report: (y: Float64Array, time: number, sides: readonly number[]) => number[];
}

function modelOf(loop: ContinuousLoop): Model {
  const { vehicle, command } = loop;
  const { drive, roadLoad, mass } = vehicle;
  const gear = drive.gears[drive.gear]!;
  const effectiveMass = mass + vehicle.rotatingMass + gear.inertia;
  const weight = mass * (loop.gravity ?? STANDARD_GRAVITY);
  const ta = vehicle.actuator.lag;
  const td = drive.lag;
  const tf = vehicle.sensor.filter;
  const corners = drive.speedEdges.map((edge) => edge / gear.ratio);

  const force = (v: number, x: number, here: Surroundings): number =>
    wheelForce(drive, drive.gear, v, x, derateFactor(drive, here.airDensity, here.airTemperature));
  const resistance = (v: number, here: Surroundings): number => {
    const cosine = 1 / Math.sqrt(1 + here.grade * here.grade);
    const rolling = roadLoad.c0 + v * (roadLoad.c1 + v * roadLoad.c2);
    return (
      aeroForce(roadLoad, here.airDensity, v, here.headwind, here.crosswind) +
      weight * (loop.rollingWithoutSlope === true ? 1 : cosine) * rolling +
      weight * cosine * here.grade
    );
  };
  const first = loop.surroundings(0, 0);
  const derate = derateFactor(drive, first.airDensity, first.airTemperature);
  const v0 = loop.startSpeed;
  const settled = throttleFor(drive, drive.gear, v0, resistance(v0, first), derate) ?? 0;

  const commandOf = (y: Float64Array, time: number): number => {
    if (command.kind === 'locked') return settled;
    const measured = tf > 0 ? y[FILTERED]! : y[SPEED]!;
    return command.kp * (command.setpointWeight * command.reference(time) - measured) + y[INTEGRAL]!;
  };
  const applied = (u: number, sides: readonly number[]): number =>
    sides[0]! > 0 ? drive.throttleMax : sides[1]! > 0 ? drive.throttleMin : u;
  const throttle = (y: Float64Array, u: number): number =>
    td > 0 ? y[THROTTLE]! : ta > 0 ? y[ACTUATOR]! : u;

  return {
    start: () => {
      const y = new Float64Array(STATES);
      y[SPEED] = y[FILTERED] = v0;
      y[ACTUATOR] = y[THROTTLE] = settled;
      if (command.kind === 'pi')
        y[INTEGRAL] = settled - command.kp * (command.setpointWeight * command.reference(0) - v0);
      return y;
    },
    slope: (time, y, out, sides) => {
      const here = loop.surroundings(y[DISTANCE]!, time);
      const v = y[SPEED]!;
      const raw = commandOf(y, time);
      const u = applied(raw, sides);
      out[DISTANCE] = v;
      out[SPEED] = (force(v, throttle(y, u), here) - resistance(v, here)) / effectiveMass;
      out[ACTUATOR] = ta > 0 ? (u - y[ACTUATOR]!) / ta : 0;
      out[THROTTLE] = td > 0 ? ((ta > 0 ? y[ACTUATOR]! : u) - y[THROTTLE]!) / td : 0;
      out[FILTERED] = tf > 0 ? (v - y[FILTERED]!) / tf : 0;
      out[ELEVATION] = (v * here.grade) / Math.sqrt(1 + here.grade * here.grade);
      if (command.kind === 'locked') return;
      const error = command.reference(time) - (tf > 0 ? y[FILTERED]! : v);
      out[INTEGRAL] = command.ki * error + command.trackingRate * (u - raw);
    },
    crossings: (y, time) => {
      const limited = command.kind === 'pi' && command.limited;
      const u = limited ? commandOf(y, time) : 0;
      return [
        limited ? u - drive.throttleMax : -1,
        limited ? drive.throttleMin - u : -1,
        ...[...corners].map((edge) => y[SPEED]! - edge),
        ...loop.corners.distances.map((place) => y[DISTANCE]! - place),
      ];
    },
    report: (y, time, sides) => {
      const raw = commandOf(y, time);
      const u = applied(raw, sides);
      const here = loop.surroundings(y[DISTANCE]!, time);
      const x = throttle(y, u);
      return [time, y[DISTANCE]!, y[SPEED]!, raw, u, x, force(y[SPEED]!, x, here), y[ELEVATION]!];
    },
  };
}
