import type { BatteryCells } from './battery-spec.ts';
import { checkSpec } from './check-spec.ts';
import { checkTable } from './check-table.ts';
import type { ShareOverCharge } from './energy-source.ts';
import { piecewiseLinear } from './piecewise-linear.ts';

/** Share of the greatest power a battery can give at all up to which its voltage is solved for. */
const SOLVED = 0.96;

/**
 * Power that leaves the cells of a battery, Voc I = P + I^2 R, for a power P at its terminals. With V = Voc - I R and
 * P = V I the current is I = 2 P / (Voc + sqrt(Voc^2 - 4 R P)); charging, P < 0, less arrives than is sent. Above 96 %
 * of Voc^2 / (4 R), the most it can give, the line goes on straight.
 *
 * @param power at the terminals [W], negative while charging
 * @param openVoltage [V]
 * @param resistance [ohm]
 * @returns [W]
 */
export function cellPower(power: number, openVoltage: number, resistance: number): number {
  const most = (SOLVED * openVoltage * openVoltage) / (4 * resistance);
  const solved = Math.min(power, most);
  const root = Math.sqrt(openVoltage * openVoltage - 4 * resistance * solved);
  const within = (2 * openVoltage * solved) / (openVoltage + root);
  return power <= most ? within : within + ((power - most) * openVoltage) / root;
}

/**
 * Share of its full force that the terminal voltage leaves a drive at peak power. Its power is proportional to the
 * voltage, P = V I with the current that its controller allows, I = P_peak / V_nominal: share = V / V_nominal,
 * V = Voc - I R, at most 1. The whole envelope shrinks by it.
 *
 * @param cells checked by `checkCells`
 * @param peakPower at the terminals when the drive gives its peak power [W]
 * @returns at the charges of the voltage curve, and where the sag begins
 */
export function sagOverCharge(cells: BatteryCells, peakPower: number): ShareOverCharge {
  const { openVoltage, resistance, nominalVoltage } = cells;
  const drop = (resistance * peakPower) / nominalVoltage;
  const free = Array.from(openVoltage.voltage, (voltage) => (voltage - drop) / nominalVoltage);
  const charge: number[] = [];
  const share: number[] = [];
  free.forEach((value, i) => {
    const before = free[i - 1];
    if (before !== undefined && (before - 1) * (value - 1) < 0) {
      const from = openVoltage.charge[i - 1]!;
      charge.push(from + ((openVoltage.charge[i]! - from) * (1 - before)) / (value - before));
      share.push(1);
    }
    charge.push(openVoltage.charge[i]!);
    share.push(Math.min(Math.max(value, 0), 1));
  });
  return { charge: Float64Array.from(charge), share: Float64Array.from(share) };
}

/** Open-circuit voltage at a charge [V]. */
export function openVoltageAt({ openVoltage }: BatteryCells, charge: number): number {
  return piecewiseLinear(openVoltage.charge, openVoltage.voltage, charge);
}

/** @throws InputError `out-of-range`, `not-increasing`, `wrong-length` */
export function checkCells({ openVoltage, resistance, nominalVoltage }: BatteryCells): void {
  checkTable('battery', [
    {
      key: 'battery.cells.openVoltage.charge',
      values: openVoltage.charge,
      unit: '',
      least: 0,
      greatest: 1,
      increasing: true,
    },
    {
      key: 'battery.cells.openVoltage.voltage',
      values: openVoltage.voltage,
      unit: 'V',
      least: 0,
      above: true,
      length: openVoltage.charge.length,
    },
  ]);
  checkSpec('battery', [
    { key: 'battery.cells.resistance', value: resistance, unit: 'ohm', least: 0 },
    { key: 'battery.cells.nominalVoltage', value: nominalVoltage, unit: 'V', least: 0, above: true },
  ]);
}
