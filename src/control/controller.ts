/**
 * What the loop calls once a sample. All that a controller reads, writes and remembers lies in the bus (see bus.ts),
 * the first places of the loop's state, so that a copy of the state is a whole copy of the controller.
 */
export interface Controller {
  /** Sample time [s]; null: the loop's own. */
  readonly sample: number | null;
  /** From sample to command [s]. */
  readonly computingDelay: number;
  /** Greatest rate of the reference after a change of set speed [m/s2]; null: it steps. */
  readonly ramp: number | null;
  /** Places of the bus in which the integral lies: put back after a step, it has not integrated. */
  readonly integralAt: readonly number[];
  /** Takes over at BUS_LIMITED, with BUS_REFERENCE and BUS_MEASURED as they stand, without a bump. */
  readonly engage: (bus: Float64Array) => void;
  /** Reads BUS_MEASURED and BUS_REFERENCE, writes BUS_COMMAND, BUS_LIMITED and its parts. */
  readonly step: (bus: Float64Array) => void;
}
