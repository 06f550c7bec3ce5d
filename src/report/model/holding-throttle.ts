import { derateFactor } from '../../vehicle/derating.ts';
import { throttleFor } from '../../vehicle/drive-law.ts';
import type { View } from './view.ts';

/**
 * Throttle that would hold the set speed steadily at a knot of the road, in the gear that is engaged there. Beyond the range of the drive its law goes on in a
 * straight line, so that the value says how far out of reach the hold is.
 *
 * @returns ratio; NaN where no throttle gives the force
 */
export function holdingThrottle(view: View, knot: number): number {
  const { road, demand, vehicle } = view.result;
  const { drive } = vehicle;
  const derate = derateFactor(drive, road.airDensity[knot]!, road.airTemperature[knot]!);
  const force = demand.required[knot]!;
  return (
    throttleFor(drive, demand.gear[knot] ?? drive.gear, demand.setSpeed[knot]!, force, derate) ?? Number.NaN
  );
}
