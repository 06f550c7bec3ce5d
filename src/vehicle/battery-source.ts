import { InputError } from '../problems/input-error.ts';
import { cellPower, checkCells, openVoltageAt, sagOverCharge } from './battery-cells.ts';
import { heatingOf } from './battery-heating.ts';
import type { BatterySpec, HeatingSpec, LossMapSpec } from './battery-spec.ts';
import { checkSpec } from './check-spec.ts';
import { checkTable } from './check-table.ts';
import type { Battery, PowerMap } from './energy-source.ts';
import { constantEfficiencyMap, lossMap, powerDrawn, refinedMap } from './power-map.ts';

/** Highest wheel speed to which the losses within the battery are tabulated [m/s]; beyond, the last cell goes on. */
const TABULATED_SPEED = 60;
/** Steps of that table: over speed up to the base speed and as a share above it, over force ahead and back. */
const STEPS = { slow: 8, fast: 0.1, ahead: 32, back: 12 } as const;

/** What an electric drive needs for its energy account. */
export interface BatterySourceSpec {
  /** See `ElectricDriveSpec`. */
  readonly efficiency: { readonly drive: number; readonly regeneration: number } | null;
  readonly lossMap: LossMapSpec | null;
  readonly battery: BatterySpec | null;
  readonly heating: HeatingSpec | null;
  /** The drive's envelope at the wheel: greatest and least force [N], power limit [W] or null. */
  readonly greatestForce: number;
  readonly leastForce: number;
  readonly peakPower: number | null;
}

/**
 * Battery of an electric drive: its losses compiled to a power map over speed and wheel force. The map gives the power
 * that leaves the cells: what reaches the terminals and I^2 R, at the open-circuit voltage of the charge at the start
 * of the route. Without a battery it is the power at the terminals. The loss in the resistance is tabulated, with nodes
 * that lie close where power changes fast: to a thousandth of peak power within the envelope.
 *
 * @returns null where nothing of efficiency or losses is known
 * @throws InputError `out-of-range`, `not-increasing`, `wrong-length`; `missing-losses` for a battery or heating
 * without efficiency and loss map
 */
export function batterySource(spec: BatterySourceSpec): Battery | null {
  const { battery, peakPower } = spec;
  const terminals = terminalMap(spec);
  if (terminals === null) return null;
  const cells = battery?.cells ?? null;
  if (battery !== null) checkBattery(battery);
  const map = cells === null ? terminals : cellMap(terminals, spec, openVoltageAt(cells, battery!.charge));
  const atPeak = peakPower === null ? null : peakPower / spec.greatestForce;
  return {
    kind: 'battery',
    map,
    capacity: battery?.capacity ?? null,
    charge: battery?.charge ?? 1,
    reserve: battery?.reserve ?? 0,
    sag:
      cells === null || atPeak === null
        ? null
        : sagOverCharge(cells, powerDrawn(terminals, atPeak, spec.greatestForce)),
    acceptance: battery?.acceptance ?? null,
    heating: spec.heating === null ? null : heatingOf(spec.heating, peakPower),
  };
}

/** Power at the terminals: the loss map where there is one, or the constant efficiencies. */
function terminalMap({ efficiency, lossMap: losses, battery, heating }: BatterySourceSpec): PowerMap | null {
  if (losses !== null) {
    checkLosses(losses);
    return lossMap(losses);
  }
  if (efficiency !== null) return constantEfficiencyMap(efficiency.drive, efficiency.regeneration);
  if (battery === null && heating === null) return null;
  throw new InputError({
    code: 'missing-losses',
    place: { key: battery === null ? 'heating' : 'battery' },
    message: 'needs the losses of the drive',
    allowed: 'an efficiency or a loss map beside it',
  });
}

function cellMap(terminals: PowerMap, spec: BatterySourceSpec, openVoltage: number): PowerMap {
  const { greatestForce, leastForce, peakPower } = spec;
  const resistance = spec.battery?.cells?.resistance ?? 0;
  if (resistance === 0) return terminals;
  const base = Math.min(peakPower === null ? TABULATED_SPEED : peakPower / greatestForce, TABULATED_SPEED);
  const speeds = Array.from({ length: STEPS.slow + 1 }, (_, i) => (base * i) / STEPS.slow);
  for (let v = base; v < TABULATED_SPEED; speeds.push(v)) v *= 1 + STEPS.fast;
  const back = leastForce < 0 ? squareSteps(leastForce, STEPS.back) : [-greatestForce];
  const forces = [...back, ...squareSteps(greatestForce, STEPS.ahead)];
  return refinedMap(terminals, speeds, forces, (power) => cellPower(power, openVoltage, resistance));
}

/** From 0 to an end, closest at 0: at high speed forces are small. */
function squareSteps(to: number, steps: number): number[] {
  return Array.from({ length: steps + 1 }, (_, i) => (to * i * i) / (steps * steps));
}

function checkBattery({ capacity, charge, reserve, cells, acceptance }: BatterySpec): void {
  checkSpec('battery', [
    { key: 'capacity', value: capacity, unit: 'J', least: 0, above: true },
    { key: 'charge', value: charge, unit: '', least: 0, greatest: 1 },
    { key: 'reserve', value: reserve, unit: '', least: 0, greatest: 1 },
  ]);
  if (cells !== null) checkCells(cells);
  if (acceptance === null) return;
  const { charge: charges, share } = acceptance;
  checkTable('battery', [
    { key: 'acceptance.charge', values: charges, unit: '', least: 0, greatest: 1, increasing: true },
    { key: 'acceptance.share', values: share, unit: '', least: 0, greatest: 1, length: charges.length },
  ]);
}

function checkLosses({ speed, force, loss }: LossMapSpec): void {
  checkTable('loss map', [
    { key: 'speed', values: speed, unit: 'm/s', least: 0, increasing: true },
    { key: 'force', values: force, unit: 'N', increasing: true },
    { key: 'loss', values: loss, unit: 'W', least: 0, length: speed.length * force.length },
  ]);
  checkSpec('loss map', [
    { key: 'speed.length', value: speed.length, unit: '', least: 2 },
    { key: 'force.length', value: force.length, unit: '', least: 2 },
  ]);
}
