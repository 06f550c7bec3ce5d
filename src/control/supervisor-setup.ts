/**
 * The written rules by which a speed-hold unit takes over, ends, and comes back. SI; speeds as the sensor indicates them.
 * A locked throttle has no unit: of all this it knows only what the rider's hand does.
 */
export interface SupervisorSetup {
  /** Below this speed hold ends, and cannot be engaged [m/s]; 0: no such rule. */
  readonly lowestSpeed: number;
  /** Hold ends when the speed has been this far below the set speed for so long; null: no such rule. */
  readonly tooSlow: SpeedRule | null;
  /** The same above the set speed; null: no such rule. */
  readonly tooFast: SpeedRule | null;
  /** Greatest believable change of the measured speed [m/s2]: more between two samples ends hold; null: anything is believed. */
  readonly believable: number | null;
  /** Rate at which the reference goes from the measured speed to the set speed at a resume [m/s2]; null: it steps. */
  readonly resumeRamp: number | null;
  /** What one tap changes the set speed by [m/s], and the rate of the reference after it [m/s2]; null: the controller's own ramp. */
  readonly tap: number;
  readonly tapRamp: number | null;
  readonly override: OverrideRule;
}

export interface SpeedRule {
  /** [m/s], > 0 */
  readonly by: number;
  /** [s] */
  readonly for: number;
}

/** While the rider's grip asks for more than the controller, the grip has the throttle. */
export interface OverrideRule {
  /**
   * `held`: the integral stands as it was until the speed is back within `reentry` of the set speed. `runs`: it goes on
   * integrating, and winds down while the rider is above the set speed.
   */
  readonly integral: 'held' | 'runs';
  /** [m/s] */
  readonly reentry: number;
}
