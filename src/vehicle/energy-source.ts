/** What the drive lives on. */
export type EnergySource = FuelTank | Battery;

/** Power drawn from fuel or battery [W] over shaft speed (rows) and shaft torque as in the drive's cells (columns): bilinear, beyond the ends the outer cell goes on. */
export interface PowerMap {
  /** [rad/s, or m/s for a drive without gears], increasing, at least two. */
  readonly shaftSpeed: Float64Array;
  /** [N m, or N], increasing, at least two. */
  readonly torque: Float64Array;
  /** Row by row. */
  readonly power: Float64Array;
  /** Nothing less is drawn [W]: 0 for fuel, minus infinity for a battery. */
  readonly least: number;
}

export interface FuelTank {
  readonly kind: 'fuel';
  readonly map: PowerMap;
  /** Lower heating value by volume [J/m3]. */
  readonly heat: number;
  /** Heat in a full tank [J]; null: range is not told. */
  readonly capacity: number | null;
}

export interface Battery {
  readonly kind: 'battery';
  readonly map: PowerMap;
  /** Usable energy between full and empty [J]; null: not known, no range, and the charge stands still. */
  readonly capacity: number | null;
  /** Share of the capacity at the start of the route, 0 to 1, and that at which the range ends. */
  readonly charge: number;
  readonly reserve: number;
  /** Share of the full-throttle force that the voltage leaves, over the charge; null: all of it. */
  readonly sag: ShareOverCharge | null;
  /** Share of full regeneration that the battery takes, over the charge; null: all of it. */
  readonly acceptance: ShareOverCharge | null;
  /** Derating by time at power; null: none. */
  readonly heating: Heating | null;
}

/** Piecewise linear, ends hold on; `charge` increases. Shares in [0, 1]. */
export interface ShareOverCharge {
  readonly charge: Float64Array;
  readonly share: Float64Array;
}

/**
 * Heat h of motor and controller, 0 when cold: time dh/dt = (P / continuousPower)^2 - h, P the wheel power. Up to
 * `onset` all of the force is there; at h = 1 the share `least` of it is, in between on a straight line, beyond 1 `least` holds.
 */
export interface Heating {
  /** [W] */
  readonly continuousPower: number;
  /** [s] */
  readonly time: number;
  readonly onset: number;
  readonly least: number;
}
