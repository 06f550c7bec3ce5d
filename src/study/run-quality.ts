import { surroundingsBetween } from '../loop/places.ts';
import type { BinRecord } from '../loop/result.ts';
import { cellOf } from '../numeric/interpolate.ts';
import type { Road } from '../road/road.ts';
import { effectiveMass } from '../vehicle/linearise.ts';
import { requiredForce } from '../vehicle/resistance.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { type DriveQuality, type DriveStep, driveQuality, driveSums } from './drive-quality.ts';
import { heldTime } from './held-time.ts';

/**
 * Drive-quality ratings of a run against its set speed, over the chosen bins in which hold was on all the time. Driven is
 * the work of the drive while it pushes, with the brake's time in it; the target is the set speed in every bin for the
 * time that the bin took, at the place where the vehicle was, a change of set speed being a jump.
 *
 * @param bins with detail
 * @param chosen one a bin: 1 where the bin counts
 */
export function qualityOfRun(
  road: Road,
  vehicle: Vehicle,
  bins: BinRecord,
  chosen: Uint8Array,
): DriveQuality {
  const counts = (i: number): boolean => chosen[i] === 1 && bins.timeOff[i] === 0;
  const { detail } = bins;
  let [energy, distance, speedChange, inertialWork] = [0, 0, 0, 0];
  for (let i = 0; i < bins.size; i++) {
    if (!counts(i) || detail === null) continue;
    energy += bins.driveWork[i];
    distance += bins.speedMean[i] * bins.time[i];
    speedChange += detail.accelerationAbsolute[i];
    inertialWork += detail.inertialWork[i];
  }
  return driveQuality(
    { energy, distance, speedChange, inertialWork },
    driveSums(targetSteps(road, vehicle, bins, counts)),
  );
}

function* targetSteps(
  road: Road,
  vehicle: Vehicle,
  bins: BinRecord,
  counts: (i: number) => boolean,
): Generator<DriveStep> {
  for (let i = 0; i < bins.size; i++) {
    if (!counts(i)) continue;
    const speed = bins.setSpeed[i];
    const middle = (bins.edge[i] + bins.edge[i + 1]) / 2;
    const cell = cellOf(road.distance, middle);
    const width = road.distance[cell + 1] - road.distance[cell];
    const at = surroundingsBetween(road, cell, width > 0 ? (middle - road.distance[cell]) / width : 0);
    const mass = effectiveMass(vehicle, bins.speedMean[i], bins.throttleMean[i], bins.gear[i]);
    const load = requiredForce(vehicle, speed, at);
    const before = i > 0 ? bins.setSpeed[i - 1] : speed;
    if (before !== speed) yield { from: before, to: speed, time: 0, load, mass };
    yield { from: speed, to: speed, time: heldTime(bins, i), load, mass };
  }
}
