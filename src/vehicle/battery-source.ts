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
/** Nodes of that table: even steps to a corner, then each greater than the one before by a ratio. */
const AHEAD = { steps: 6, ratio: 1.15 } as const;
const BACK = { steps: 2, ratio: 1.5 } as const;

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
  /** Drag at closed throttle [N], >= 0: lost whatever the efficiency. */
  readonly drag: number;
}

/**
 * Battery of an electric drive: its losses compiled to a power map over speed and wheel force. The map gives the power
 * that leaves the cells: what reaches the terminals and I^2 R, at the open-circuit voltage of the charge at the start
 * of the route. Without a battery it is the power at the terminals. The loss in the resistance is tabulated, with nodes
 * that lie close where power changes fast: to about a thousandth of peak power within the envelope.
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
function terminalMap({
  efficiency,
  lossMap: losses,
  battery,
  heating,
  drag,
}: BatterySourceSpec): PowerMap | null {
  if (losses !== null) {
    checkLosses(losses);
    return lossMap(losses, drag);
  }
  if (efficiency !== null) return constantEfficiencyMap(efficiency.drive, efficiency.regeneration, drag);
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
  // Within the envelope either speed is below the base speed or power bounds force: steps that are even up to the
  // corner and a constant ratio above it are alike in power.
  const base = Math.min(peakPower === null ? TABULATED_SPEED : peakPower / greatestForce, TABULATED_SPEED);
  const slow = base / TABULATED_SPEED;
  const speeds = nodesTo(TABULATED_SPEED, slow, AHEAD);
  const ahead = nodesTo(greatestForce, slow, AHEAD);
  const back = nodesTo(leastForce < 0 ? leastForce : -greatestForce, slow, BACK);
  return refinedMap(terminals, speeds, [...back, ...ahead], (power) =>
    cellPower(power, openVoltage, resistance),
  );
}

/** From 0 to an end: even steps to a share of it, then a constant ratio. */
function nodesTo(end: number, share: number, { steps, ratio }: typeof AHEAD | typeof BACK): number[] {
  const nodes = Array.from({ length: steps + 1 }, (_, i) => (end * share * i) / steps);
  for (let part = share * ratio; part < 1; part *= ratio) nodes.push(end * part);
  return share < 1 ? [...nodes, end] : nodes;
}

function checkBattery({ capacity, charge, reserve, cells, acceptance }: BatterySpec): void {
  checkSpec('battery', [
    { key: 'battery.capacity', value: capacity, unit: 'J', least: 0, above: true },
    { key: 'battery.charge', value: charge, unit: '', least: 0, greatest: 1 },
    { key: 'battery.reserve', value: reserve, unit: '', least: 0, greatest: 1 },
  ]);
  if (cells !== null) checkCells(cells);
  if (acceptance === null) return;
  const { charge: charges, share } = acceptance;
  checkTable('battery', [
    { key: 'battery.acceptance.charge', values: charges, unit: '', least: 0, greatest: 1, increasing: true },
    {
      key: 'battery.acceptance.share',
      values: share,
      unit: '',
      least: 0,
      greatest: 1,
      length: charges.length,
    },
  ]);
}

function checkLosses({ speed, force, loss }: LossMapSpec): void {
  checkTable('loss map', [
    { key: 'lossMap.speed', values: speed, unit: 'm/s', least: 0, increasing: true },
    { key: 'lossMap.force', values: force, unit: 'N', increasing: true },
    { key: 'lossMap.loss', values: loss, unit: 'W', least: 0, length: speed.length * force.length },
  ]);
  checkSpec('loss map', [
    { key: 'lossMap.speed.length', value: speed.length, unit: '', least: 2 },
    { key: 'lossMap.force.length', value: force.length, unit: '', least: 2 },
  ]);
}
