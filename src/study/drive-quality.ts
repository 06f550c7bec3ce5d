import type { Figure } from './findings.ts';

/** A piece of a drive in which the speed goes evenly from one value to another [m/s]. */
export interface DriveStep {
  readonly from: number;
  readonly to: number;
  /** [s]; 0: the speed jumps. */
  readonly time: number;
  /** Wheel force that the mean of the two speeds takes where the step is: air, rolling, slope [N]. */
  readonly load: number;
  /** Effective mass [kg]. */
  readonly mass: number;
}

/** What drives are rated by. */
export interface DriveSums {
  /** Sum of the work of the wheel force while it pushes [J]. */
  readonly energy: number;
  /** [m] */
  readonly distance: number;
  /** Sum of |change of speed| [m/s]. */
  readonly speedChange: number;
  /** Sum of the work into a rising speed [J]. */
  readonly inertialWork: number;
}

/**
 * Sums of the drive-quality metrics of SAE J2951 (formulas from memory), with the slope added to the road load: per step
 * of mean speed v, distance d = v t, acceleration a and F = load + m a,
 *
 *     energy = sum max(F, 0) d,  speedChange = sum |a| t,  inertialWork = sum max(m a, 0) d
 */
export function driveSums(steps: Iterable<DriveStep>): DriveSums {
  let [energy, distance, speedChange, inertialWork] = [0, 0, 0, 0];
  for (const { from, to, time, load, mass } of steps) {
    const way = 0.5 * (from + to) * time;
    const inertia = 0.5 * mass * (to - from) * (to + from);
    energy += Math.max(0, load * way + inertia);
    distance += way;
    speedChange += Math.abs(to - from);
    inertialWork += Math.max(0, inertia);
  }
  return { energy, distance, speedChange, inertialWork };
}

/** Ratings [%]; {none} where the target gives nothing to rate against. */
export interface DriveQuality {
  readonly energy: Figure;
  readonly distance: Figure;
  readonly energyEconomy: Figure;
  readonly speedChange: Figure;
  readonly inertialWork: Figure;
}

/**
 * Drive-quality ratings of SAE J2951 (formulas from memory), D driven and T target:
 *
 *     ER = 100 (E_D - E_T) / E_T, likewise DR of distance, ASCR of speed change, IWR of inertial work
 *     EER = 100 (1 - (1 + DR / 100) / (1 + ER / 100))
 */
export function driveQuality(driven: DriveSums, target: DriveSums): DriveQuality {
  const rate = (name: keyof DriveSums, none: string): Figure =>
    target[name] > 0 ? (100 * (driven[name] - target[name])) / target[name] : { none };
  const still = 'the set speed does not change there: the target has none of it';
  const energy = rate('energy', 'the set speed asks for no energy there');
  const distance = rate('distance', 'no such stretch was driven');
  return {
    energy,
    distance,
    energyEconomy: economyOf(energy, distance),
    speedChange: rate('speedChange', still),
    inertialWork: rate('inertialWork', still),
  };
}

function economyOf(energy: Figure, distance: Figure): Figure {
  if (typeof energy !== 'number') return energy;
  if (typeof distance !== 'number') return distance;
  return energy > -100
    ? 100 * (1 - (1 + distance / 100) / (1 + energy / 100))
    : { none: 'no energy was used there' };
}
