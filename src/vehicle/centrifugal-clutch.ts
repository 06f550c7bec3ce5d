import type { CombustionTable } from './combustion-table.ts';
import type { PowerMap } from './energy-source.ts';
import { powerDrawn } from './power-map.ts';

/**
 * Torque of an engine behind a centrifugal clutch, over the speed w of what the clutch drives. From the locked speed up
 * it is that of the engine. Below it the clutch slips while the engine turns at the locked speed: it passes on the
 * torque that the engine has there, whatever w. Torque that holds back fades in a straight line from the locked speed
 * to where the clutch begins to close; below that the clutch is open, and nothing holds back.
 *
 * @param table of the engine
 * @param begins shaft speed at which the clutch begins to close [rad/s], > 0
 * @param locked shaft speed from which it does not slip [rad/s], above `begins`
 */
export function throughClutch(table: CombustionTable, begins: number, locked: number): CombustionTable {
  const { shaftSpeed, throttle, torque, loss, curvature, fuelCut } = table;
  const columns = throttle.length;
  const above = shaftSpeed.findIndex((w) => w > locked);
  const first = above < 0 ? shaftSpeed.length : above;
  const at = (values: Float64Array, stride: number, column: number): number => {
    const low = values[(first - 1) * stride + column]!;
    if (first === shaftSpeed.length) return low;
    const [from, to] = [shaftSpeed[first - 1]!, shaftSpeed[first]!];
    return low + ((values[first * stride + column]! - low) * (locked - from)) / (to - from);
  };
  // A parabola bends between the nodes: at a node of its own that is in the torque.
  const sunk =
    first === shaftSpeed.length
      ? 0
      : curvature[first - 1]! * (locked - shaftSpeed[first - 1]!) * (locked - shaftSpeed[first]!);
  const lockedRow = Array.from(throttle, (x, j) => at(torque, columns, j) + x * sunk);
  const lockedLoss = Array.from(throttle, (x, j) => at(loss, columns, j) + x * sunk);
  const openRow = lockedRow.map((value) => Math.max(0, value));
  // Full torque loses itself and closed throttle nothing, as `combustionTable` has it: here closed throttle is 0.
  const openLoss = lockedRow[0]! < 0 ? openRow : lockedLoss;
  const cutAtLocked = fuelCut === null ? 0 : at(fuelCut.torque, 1, 0);
  return {
    shaftSpeed: Float64Array.of(0, begins, locked, ...shaftSpeed.subarray(first)),
    throttle,
    torque: Float64Array.of(...openRow, ...openRow, ...lockedRow, ...torque.subarray(first * columns)),
    loss: Float64Array.of(...openLoss, ...openLoss, ...lockedLoss, ...loss.subarray(first * columns)),
    curvature: Float64Array.of(0, 0, curvature[first - 1]!, ...curvature.subarray(first)),
    fuelCut:
      fuelCut === null
        ? null
        : {
            throttle: fuelCut.throttle,
            torque: Float64Array.of(0, 0, cutAtLocked, ...fuelCut.torque.subarray(first)),
          },
  };
}

/** A clutch that passes on less than this is open [N m]: at closed throttle the engine idles behind it. */
const NEXT_TO_NOTHING = 0.2;

/**
 * What the engine burns while the clutch slips: at the locked speed, where it has the torque that is passed on. Where the
 * clutch is open and passes on nothing it idles; between the two, and from where the clutch begins to close at closed
 * throttle to where it is locked, on straight lines.
 *
 * @param map of the engine
 * @param clutch shaft speeds between which it closes [rad/s]
 * @param idle [rad/s]
 */
export function burntThroughClutch(
  map: PowerMap,
  { begins, locked }: { readonly begins: number; readonly locked: number },
  idle: number,
): PowerMap {
  const speeds = [...map.shaftSpeed.filter((w) => w > locked)];
  const shaftSpeed = Float64Array.of(0, begins, locked, ...speeds, 2 * (speeds.at(-1) ?? locked));
  const torque = Float64Array.from(new Set([...map.torque, 0, NEXT_TO_NOTHING])).sort();
  const free = { ...map, least: Number.NEGATIVE_INFINITY };
  const rows = Array.from(shaftSpeed, (w) =>
    Array.from(torque, (t) =>
      w <= begins && t <= 0 ? powerDrawn(map, idle, 0) : powerDrawn(free, Math.max(w, locked), t),
    ),
  );
  return { ...map, shaftSpeed, torque, power: Float64Array.from(rows.flat()) };
}
