import type { ShareOverCharge } from './energy-source.ts';

/** What is known of a battery. */
export interface BatterySpec {
  /** Usable energy between full and empty, at open-circuit voltage [J]. */
  readonly capacity: number;
  /** Share of it at the start of the route, in [0, 1], and that at which the range ends. */
  readonly charge: number;
  readonly reserve: number;
  /** Voltage and resistance; null: no sag, and no loss within the battery. */
  readonly cells: BatteryCells | null;
  /** Share of full regeneration that the battery takes near full, over the charge; null: all of it. */
  readonly acceptance: ShareOverCharge | null;
}

/** A battery as an open-circuit voltage behind a resistance: V = Voc(charge) - I R. */
export interface BatteryCells {
  /** Piecewise linear over the charge, which increases; ends hold on. Voltages [V], > 0. */
  readonly openVoltage: { readonly charge: Float64Array; readonly voltage: Float64Array };
  /** [ohm] */
  readonly resistance: number;
  /** Terminal voltage at which the drive just gives its peak power [V]. */
  readonly nominalVoltage: number;
}

/** Losses of a drive between wheel and battery terminals: bilinear over speed (rows) and force (columns). */
export interface LossMapSpec {
  /** [m/s], increasing, two or more. */
  readonly speed: Float64Array;
  /**
   * At the wheel [N], increasing, two or more. Where it begins at 0 or above, the map also serves for regeneration, as
   * its mirror image.
   */
  readonly force: Float64Array;
  /** Row by row [W], >= 0. */
  readonly loss: Float64Array;
}

/** Derating by time at power, as data sheets state it. */
export interface HeatingSpec {
  /** Wheel power that it gives for ever [W]. */
  readonly continuousPower: number;
  /** Time for which it would give peak power from cold before it is as hot as continuous power makes it [s]. */
  readonly peakPowerTime: number;
  /** Share of that heat at which force begins to fall, in [0, 1). */
  readonly onset: number;
}
