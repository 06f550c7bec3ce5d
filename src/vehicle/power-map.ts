import type { LossMapSpec } from './battery-spec.ts';
import { cellIndex } from './drive-law.ts';
import type { PowerMap } from './energy-source.ts';

/**
 * Power drawn at a shaft speed and torque [W]: bilinear in the cell, whose law goes on beyond the ends of the map.
 *
 * @param shaftSpeed [rad/s, or m/s for a drive without gears]
 * @param torque as in the drive's cells [N m, or N]
 */
export function powerDrawn(map: PowerMap, shaftSpeed: number, torque: number): number {
  const { shaftSpeed: speeds, torque: torques, power, least } = map;
  const columns = torques.length;
  const i = cellIndex(speeds.subarray(1, -1), shaftSpeed);
  const j = cellIndex(torques.subarray(1, -1), torque);
  const across = (shaftSpeed - speeds[i]!) / (speeds[i + 1]! - speeds[i]!);
  const along = (torque - torques[j]!) / (torques[j + 1]! - torques[j]!);
  const at = i * columns + j;
  const low = power[at]! + along * (power[at + 1]! - power[at]!);
  const high = power[at + columns]! + along * (power[at + columns + 1]! - power[at + columns]!);
  return Math.max(least, low + across * (high - low));
}

/**
 * Constant efficiencies: T w / drive while the shaft drives, (T + drag) w regeneration where it is driven by more than
 * the drag, nothing in between: drag is lost, it charges no battery. The products are bilinear, so that the map is exact.
 *
 * @param drag of the closed throttle [N m, or N], >= 0. Where it fades at low speed the whole of it still counts as lost.
 */
export function constantEfficiencyMap(drive: number, regeneration: number, drag = 0): PowerMap {
  const torque = Float64Array.of(-drag - 1, ...(drag > 0 ? [-drag] : []), 0, 1);
  const power = torque.map((t) => (t > 0 ? t / drive : Math.min(0, t + drag) * regeneration));
  return {
    shaftSpeed: Float64Array.of(0, 1),
    torque,
    power: Float64Array.of(...torque.map(() => 0), ...power),
    least: Number.NEGATIVE_INFINITY,
  };
}

/**
 * Power F v + loss of a loss map, exact in its bilinear cells. A map that begins at a force of 0 or above is mirrored
 * for the forces below. Of what holds back the drag at least is lost: it charges no battery.
 *
 * @param losses checked: increasing, two or more rows and columns
 * @param drag of the closed throttle [N], >= 0
 */
export function lossMap({ speed, force, loss }: LossMapSpec, drag = 0): PowerMap {
  const columns = force.length;
  const mirrored = force[0]! >= 0;
  const source = Array.from(force, (_, j) => j);
  const back = mirrored ? source.filter((j) => force[j]! > 0).reverse() : [];
  const forces = [...back.map((j) => -force[j]!), ...force];
  const from = [...back, ...source];
  const power = Array.from(speed, (v, i) => from.map((j, k) => forces[k]! * v + loss[i * columns + j]!));
  const map = {
    shaftSpeed: speed,
    torque: Float64Array.from(forces),
    power: Float64Array.from(power.flat()),
    least: Number.NEGATIVE_INFINITY,
  };
  return drag === 0 ? map : withDragLost(map, drag);
}

function withDragLost(map: PowerMap, drag: number): PowerMap {
  const torque = Float64Array.from(new Set([...map.torque, -drag, 0])).sort();
  const rows = Array.from(map.shaftSpeed, (w) =>
    Array.from(torque, (t) => Math.max(powerDrawn(map, w, t), Math.min(0, t + drag) * w)),
  );
  return { ...map, torque, power: Float64Array.from(rows.flat()) };
}

/**
 * A map through a function of its power, tabulated at nodes of its own and at the inner nodes of the map, where that
 * has its corners.
 *
 * @param shaftSpeeds any order
 * @param torques any order
 * @param through what becomes of a power [W]
 */
export function refinedMap(
  map: PowerMap,
  shaftSpeeds: readonly number[],
  torques: readonly number[],
  through: (power: number) => number,
): PowerMap {
  const merged = (own: Float64Array, more: readonly number[]): Float64Array =>
    Float64Array.from(new Set([...own.subarray(1, -1), ...more])).sort();
  const shaftSpeed = merged(map.shaftSpeed, shaftSpeeds);
  const torque = merged(map.torque, torques);
  const rows = Array.from(shaftSpeed, (w) => Array.from(torque, (t) => through(powerDrawn(map, w, t))));
  return { shaftSpeed, torque, power: Float64Array.from(rows.flat()), least: map.least };
}
