/** What is kept of a chain of lags: one lag and one dead time. */
export interface LagAndDelay {
  /** [s]; Infinity: an integrator. */
  readonly lag: number;
  /** [s] */
  readonly delay: number;
}

/**
 * One lag and one dead time in place of a chain of lags: the longest is kept with half of the next one, the other half
 * and all the rest count as dead time (the half rule of S. Skogestad, J. Process Control 13 (2003) 291-309, section 2).
 * Of an integrator the half that is given to it adds nothing.
 *
 * @param lags [s], at least one, in any order; Infinity for an integrator
 * @param delay dead time [s]; an inverse response counts to it
 */
export function halfRule(lags: readonly number[], delay: number): LagAndDelay {
  const [longest = 0, next = 0, ...rest] = [...lags].sort((a, b) => b - a);
  return { lag: longest + next / 2, delay: rest.reduce((sum, lag) => sum + lag, delay + next / 2) };
}
