import { atCharge } from '../vehicle/at-charge.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { keptInGear } from './gear-course.ts';
import type { OperatingPoint, PointNotHeld } from './operating-point.ts';
import { steadyThrottle } from './steady-throttle.ts';
import { type Ride, visitedPoints } from './visited-points.ts';

/** Where the loop will run: on the rides of a route, and on a grid. */
export interface OperatingPointsRequest {
  /** Empty: only the grid. */
  readonly rides: readonly Ride[];
  /** null: only what the route visits. */
  readonly grid: PointGrid | null;
}

/** Every speed on every grade in every wind, gear and load. */
export interface PointGrid {
  /** [m/s], > 0 */
  readonly speeds: readonly number[];
  /** Rise over run. */
  readonly grades: readonly number[];
  /** [m/s] */
  readonly headwinds: readonly number[];
  /** Indices into the drive's gears. */
  readonly gears: readonly number[];
  readonly loads: readonly { readonly load: string | null; readonly vehicle: Vehicle }[];
  /** Air of all of them; its grade and wind do not count. */
  readonly air: Surroundings;
}

export interface OperatingPoints {
  /** Those that the route visits first, in order of load, gear, speed and throttle. */
  readonly points: readonly OperatingPoint[];
  readonly notHeld: readonly PointNotHeld[];
}

/**
 * The operating points of a route and of a grid, apart from those that the drive cannot hold. A battery counts with
 * what it gives cold at its charge.
 */
export function operatingPoints({ rides, grid }: OperatingPointsRequest): OperatingPoints {
  const visited = visitedPoints(rides.map((ride) => ({ ...ride, vehicle: atCharge(ride.vehicle) })));
  if (grid === null) return visited;
  const asked = gridPoints(grid);
  return {
    points: [...visited.points, ...asked.points],
    notHeld: [...visited.notHeld, ...asked.notHeld],
  };
}

function gridPoints({ speeds, grades, headwinds, gears, loads, air }: PointGrid): OperatingPoints {
  const points: OperatingPoint[] = [];
  const notHeld: PointNotHeld[] = [];
  for (const { load, vehicle: rated } of loads) {
    const vehicle = atCharge(rated);
    for (const gear of gears) {
      const engaged = keptInGear(vehicle, gear);
      for (const speed of speeds)
        for (const grade of grades)
          for (const headwind of headwinds) {
            const surroundings = { ...air, grade, headwind, crosswind: 0 };
            const throttle = steadyThrottle(engaged, speed, surroundings);
            const place = { speed, gear, surroundings, load, from: 'grid' } as const;
            if (typeof throttle === 'number') points.push({ ...place, vehicle, throttle, weight: 0 });
            else notHeld.push({ ...place, reason: throttle, share: 0 });
          }
    }
  }
  return { points, notHeld };
}
