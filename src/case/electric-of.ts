import { fromKmh, fromKw, fromPct, fromWh } from '../units/convert.ts';
import type { BatterySpec, HeatingSpec, LossMapSpec } from '../vehicle/battery-spec.ts';
import type { ElectricDriveSpec } from '../vehicle/electric-drive.ts';
import type { DriveFileOf } from './drive-schemas.ts';

type ElectricFile = DriveFileOf<'electric'>;

const power = (kw: number | undefined): number | null => (kw === undefined ? null : fromKw(kw));

/** An electric drive, in SI. */
export function electricSpecOf(file: ElectricFile): ElectricDriveSpec {
  return {
    peakForce: file.peak_force_n,
    peakPower: power(file.peak_power_kw),
    closedThrottleForce: file.closed_throttle_force_n,
    regenerationForce: file.regeneration_force_n,
    regenerationPower: power(file.regeneration_power_kw),
    fadeSpeed: fromKmh(file.regeneration_fade_kmh),
    throttleMin: file.regeneration_force_n > 0 ? -1 : 0,
    lag: file.lag_s,
    efficiency:
      file.efficiency_pct === undefined
        ? null
        : {
            drive: fromPct(file.efficiency_pct.drive),
            regeneration: fromPct(file.efficiency_pct.regeneration),
          },
    lossMap: file.loss_map === undefined ? null : lossMapOf(file.loss_map),
    battery: file.battery === undefined ? null : batteryOf(file.battery),
    heating: file.heating === undefined ? null : heatingOf(file.heating),
  };
}

function lossMapOf(file: NonNullable<ElectricFile['loss_map']>): LossMapSpec {
  return {
    speed: Float64Array.from(file.speed_kmh, fromKmh),
    force: Float64Array.from(file.force_n),
    loss: Float64Array.from(file.loss_w.flat()),
  };
}

/** The rules of the file see to it that voltage, resistance and nominal voltage stand together. */
function batteryOf(file: NonNullable<ElectricFile['battery']>): BatterySpec {
  const { open_voltage: voltage, resistance_ohm: resistance, nominal_v: nominal, full_fade: fade } = file;
  const charges = (rows: readonly { readonly charge_pct: number }[]): Float64Array =>
    Float64Array.from(rows, ({ charge_pct }) => fromPct(charge_pct));
  return {
    capacity: fromWh(file.capacity_wh),
    charge: fromPct(file.charge_pct),
    reserve: fromPct(file.reserve_pct),
    cells:
      voltage === undefined || resistance === undefined || nominal === undefined
        ? null
        : {
            openVoltage: { charge: charges(voltage), voltage: Float64Array.from(voltage, ({ v }) => v) },
            resistance,
            nominalVoltage: nominal,
          },
    acceptance:
      fade === undefined
        ? null
        : {
            charge: charges(fade),
            share: Float64Array.from(fade, ({ accepts_pct }) => fromPct(accepts_pct)),
          },
  };
}

function heatingOf(file: NonNullable<ElectricFile['heating']>): HeatingSpec {
  return {
    continuousPower: fromKw(file.continuous_power_kw),
    peakPowerTime: file.peak_power_s,
    onset: fromPct(file.onset_pct),
  };
}
