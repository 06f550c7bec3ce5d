import type { Surroundings } from '../vehicle/surroundings.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';

/** A steady state in which the loop will run, and how much of the driving it stands for. */
export interface OperatingPoint {
  /** True speed [m/s]. */
  readonly speed: number;
  /** Rise over run, headwind, air: where the point is. */
  readonly surroundings: Surroundings;
  /** Index into the drive's gears. */
  readonly gear: number;
  /** The vehicle with this load. */
  readonly vehicle: Vehicle;
  /** Name of the load; null: the case's own. */
  readonly load: string | null;
  /** Throttle that holds the speed. */
  readonly throttle: number;
  /** Share of the time of the points that the route visits, 0 to 1; 0: a point of the grid that it does not visit. */
  readonly weight: number;
  /** `route`: visited; `grid`: asked for. */
  readonly from: 'route' | 'grid';
}

/** Why a speed is not held somewhere. */
export type NotHeld = 'too_much_asked' | 'less_than_least' | 'no_effect' | 'gear_cannot_turn';

/** A point at which no steady throttle holds the speed: there is no loop around it. */
export interface PointNotHeld {
  readonly speed: number;
  readonly gear: number;
  readonly surroundings: Surroundings;
  readonly load: string | null;
  readonly reason: NotHeld;
  /** Of a route: all such visits in this gear, as a share of the time of all visits; of a grid 0. */
  readonly share: number;
  readonly from: 'route' | 'grid';
}

/** How one loop stands at one operating point. Sampled, with every lag of the replay, without limits. */
export interface PointMargins {
  readonly stable: boolean;
  /** Factor on the gain, Infinity: none oscillates. Of an unstable loop all of these are null. */
  readonly gainMargin: number | null;
  /** Its frequency [rad/s]; null: none. */
  readonly phaseCrossover: number | null;
  /** Factor to which the gain may fall before the loop oscillates or runs away, 0: it never does. */
  readonly gainReduction: number | null;
  /** [rad], Infinity: no crossover. */
  readonly phaseMargin: number | null;
  /** Its frequency [rad/s]; null: none. */
  readonly gainCrossover: number | null;
  /** Dead time that may be added [s]. */
  readonly delayMargin: number | null;
  /** Greatest |S|, and where [rad/s]; null there: |S| is nowhere above 1. */
  readonly sensitivity: number | null;
  readonly sensitivityAt: number | null;
  /** From where |T| stays below its value at the lowest frequency over sqrt(2) [rad/s]. */
  readonly bandwidth: number | null;
}
