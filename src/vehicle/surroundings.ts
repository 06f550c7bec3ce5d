/** What the vehicle meets at one place of the road. */
export interface Surroundings {
  /** tan(theta), positive uphill. */
  readonly grade: number;
  /** Positive against travel [m/s]. */
  readonly headwind: number;
  /** Positive from the right [m/s]. */
  readonly crosswind: number;
  /** [kg/m3] */
  readonly airDensity: number;
  /** [K] */
  readonly airTemperature: number;
}

/** The same air, on the level and without wind. */
export function stillAndLevel(airDensity: number, airTemperature: number): Surroundings {
  return { grade: 0, headwind: 0, crosswind: 0, airDensity, airTemperature };
}
