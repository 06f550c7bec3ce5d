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

/** How one loop stands at one operating point. Sampled, with every lag of the replay, without limits. */
export interface PointMargins {
  readonly stable: boolean;
  /** Factor on the gain, Infinity: none oscillates. Of an unstable loop all of these are null. */
  readonly gainMargin: number | null;
  /** [rad], Infinity: no crossover. */
  readonly phaseMargin: number | null;
  /** Dead time that may be added [s]. */
  readonly delayMargin: number | null;
  /** Greatest |S|, and where [rad/s]. */
  readonly sensitivity: number | null;
  readonly sensitivityAt: number | null;
  /** Where |T| falls below 1/sqrt(2) for good [rad/s]. */
  readonly bandwidth: number | null;
}
