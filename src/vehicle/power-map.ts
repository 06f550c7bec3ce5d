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
 * Constant efficiencies: T w / drive while the shaft drives, T w regeneration while it is driven. The product T w is
 * bilinear, so that the map is exact.
 */
export function constantEfficiencyMap(drive: number, regeneration: number): PowerMap {
  return {
    shaftSpeed: Float64Array.of(0, 1),
    torque: Float64Array.of(-1, 0, 1),
    power: Float64Array.of(0, 0, 0, -regeneration, 0, 1 / drive),
    least: Number.NEGATIVE_INFINITY,
  };
}
