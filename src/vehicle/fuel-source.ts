import { checkSpec } from './check-spec.ts';
import { checkTable } from './check-table.ts';
import type { FuelTank, PowerMap } from './energy-source.ts';
import type { FuelSpec } from './engine-spec.ts';

/**
 * Fuel tank of an engine, its consumption compiled to a power map over shaft speed w and torque T as in the drive's
 * cells. The driveline's efficiency, which is in T, is undone: brake torque is T / efficiency where it drives and
 * T efficiency where it is driven.
 *
 * - Willans line: P = max(0, (T_brake + friction) w / slope); exact, since it is bilinear on each side of T = 0.
 * - Specific consumption: P = b T_brake w heat at the nodes of the table, bilinear in between (power, not b, is
 *   interpolated). Outside of the table b of its end row or column holds on. Below the first column the power goes in a
 *   straight line to what turning without load takes, idlePower w / idle, and on in the same line below that.
 *
 * Nothing below 0 is drawn, so that an engine driven hard enough burns nothing.
 *
 * @param fuel consumption, heating value [J/kg], density [kg/m3], tank [m3]
 * @param efficiency wheel power over engine power, in (0, 1]
 * @param idle shaft speed of idling [rad/s]; 0: the idle consumption holds at every speed
 * @throws InputError `out-of-range`, `not-increasing`, `wrong-length`
 */
export function fuelSource(fuel: FuelSpec, efficiency: number, idle: number): FuelTank {
  checkSpec('fuel', [
    { key: 'efficiency', value: efficiency, unit: '', least: 0, above: true, greatest: 1 },
    { key: 'idle', value: idle, unit: 'rad/s', least: 0 },
    { key: 'fuel.heat', value: fuel.heat, unit: 'J/kg', least: 0, above: true },
    { key: 'fuel.density', value: fuel.density, unit: 'kg/m3', least: 0, above: true },
    { key: 'fuel.tank', value: fuel.tank ?? 1, unit: 'm3', least: 0, above: true },
  ]);
  const heat = fuel.heat * fuel.density;
  return {
    kind: 'fuel',
    map:
      fuel.use.kind === 'willans'
        ? willansMap(fuel.use.friction, fuel.use.slope, efficiency)
        : consumptionMap(fuel.use, fuel.heat, efficiency, idle),
    heat,
    capacity: fuel.tank === null ? null : fuel.tank * heat,
  };
}

function willansMap(friction: number, slope: number, efficiency: number): PowerMap {
  checkSpec('fuel', [
    { key: 'fuel.use.friction', value: friction, unit: 'N m', least: 0 },
    { key: 'fuel.use.slope', value: slope, unit: '', least: 0, above: true, greatest: 1 },
  ]);
  const power = (brake: number): number => (brake + friction) / slope;
  return {
    shaftSpeed: Float64Array.of(0, 1),
    torque: Float64Array.of(-1, 0, 1),
    power: Float64Array.of(0, 0, 0, power(-efficiency), power(0), power(1 / efficiency)),
    least: 0,
  };
}

type Consumption = Extract<FuelSpec['use'], { readonly kind: 'bsfc' }>;

function consumptionMap(use: Consumption, heat: number, efficiency: number, idle: number): PowerMap {
  const { shaftSpeed, torque, consumption, idlePower } = use;
  checkTable('fuel', [
    {
      key: 'fuel.use.shaftSpeed',
      values: shaftSpeed,
      unit: 'rad/s',
      least: 0,
      above: true,
      increasing: true,
    },
    { key: 'fuel.use.torque', values: torque, unit: 'N m', least: 0, above: true, increasing: true },
    {
      key: 'fuel.use.consumption',
      values: consumption,
      unit: 'kg/J',
      least: 0,
      above: true,
      length: shaftSpeed.length * torque.length,
    },
  ]);
  checkSpec('fuel', [{ key: 'fuel.use.idlePower', value: idlePower, unit: 'W', least: 0 }]);
  const rows = shaftSpeed.length;
  const columns = torque.length;
  // One row and one column more on each side, at which the end of the table still holds: its product with T w is
  // bilinear, so that nothing is lost between and beyond them.
  const speeds = [0, ...shaftSpeed, 2 * shaftSpeed[rows - 1]!];
  const brakes = [...torque, 2 * torque[columns - 1]!];
  const power = speeds.flatMap((w, i) => {
    const row = Math.min(Math.max(i - 1, 0), rows - 1) * columns;
    const loaded = brakes.map((brake, j) => consumption[row + Math.min(j, columns - 1)]! * brake * w * heat);
    const unloaded = idle === 0 ? idlePower : (idlePower * w) / idle;
    return [2 * unloaded - loaded[0]!, unloaded, ...loaded];
  });
  const shaftTorques = [-brakes[0]! / efficiency, 0, ...brakes.map((brake) => brake * efficiency)];
  return {
    shaftSpeed: Float64Array.from(speeds),
    torque: Float64Array.from(shaftTorques),
    power: Float64Array.from(power),
    least: 0,
  };
}
