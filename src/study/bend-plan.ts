/** How the rider rides bends. SI. */
export interface BendRiding {
  /** Greatest lateral acceleration [m/s2]. */
  readonly maxLateral: number;
  /** [m/s2] */
  readonly deceleration: number;
  /** From the end of a bend to where the rider resumes [s], at the speed of the bend. */
  readonly resumesAfter: number;
  /** Between bends nearer than this [s at the set speed] the rider does not resume. */
  readonly shortestHold: number;
}
