import { CELL_SIZE } from './cell-law.ts';
import type { Drive } from './drive.ts';

/**
 * The drive with so many times its full-throttle force and its regeneration; what it holds back at closed throttle stays.
 *
 * T' = T + (f - 1) L with the drive's own losses L: they are what derating takes away for each unit, so that full
 * throttle gives f times its torque at every shaft speed and part throttle keeps its shape. L' = f L, so that altitude
 * takes its share of what there is then.
 *
 * @param force factor of what throttles above 0 give, >= 0
 * @param regeneration factor of what throttles below 0 hold back beside the drag, >= 0
 */
export function scaledDrive(
  drive: Drive,
  { force, regeneration }: { readonly force: number; readonly regeneration: number },
): Drive {
  const cells = drive.cells.slice();
  const losses = drive.losses.slice();
  const { throttleEdges, peakPower, withoutFuelCut } = drive;
  for (let at = 0; at < cells.length; at += CELL_SIZE) {
    const column = (at / CELL_SIZE) % (throttleEdges.length + 1);
    // The cell that ends at or below x = 0 is the regeneration side.
    const holds = column < throttleEdges.length && throttleEdges[column]! <= 0;
    const factor = holds ? regeneration : force;
    for (let k = at; k < at + CELL_SIZE; k++) {
      cells[k] = cells[k]! + (factor - 1) * drive.losses[k]!;
      losses[k] = factor * drive.losses[k]!;
    }
  }
  return {
    ...drive,
    cells,
    losses,
    withoutFuelCut: withoutFuelCut === null ? null : scaledDrive(withoutFuelCut, { force, regeneration }),
    peakForce: force * drive.peakForce,
    peakPower: peakPower === null ? null : force * peakPower,
    regenerationForce: regeneration * drive.regenerationForce,
  };
}
