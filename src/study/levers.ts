import type { LoopPlan } from '../loop/plan.ts';
import type { Drive } from '../vehicle/drive.ts';
import { CELL_SIZE } from '../vehicle/drive-law.ts';

/** The plan at another set speed [m/s]: lower ones of the plan stay, higher ones come down to it. */
export function withSetSpeed(plan: LoopPlan, setSpeed: number): LoopPlan {
  const { hold } = plan;
  return {
    ...plan,
    hold: {
      ...hold,
      setSpeed: Math.min(hold.setSpeed, setSpeed),
      startSpeed: Math.min(hold.startSpeed, setSpeed),
      changes: hold.changes.map((change) => ({ ...change, setSpeed: Math.min(change.setSpeed, setSpeed) })),
    },
  };
}

/** The plan with less or more payload [kg]; the rest of the mass stays. */
export function withPayload(plan: LoopPlan, payload: number): LoopPlan {
  const { vehicle } = plan;
  return { ...plan, vehicle: { ...vehicle, mass: vehicle.mass - vehicle.payload + payload, payload } };
}

/** The plan with a drive of `1 + more` times the full-throttle force at every speed; closed throttle and regeneration stay. */
export function withMoreForce(plan: LoopPlan, more: number): LoopPlan {
  const { vehicle } = plan;
  return { ...plan, vehicle: { ...vehicle, drive: strongerDrive(vehicle.drive, more) } };
}

/**
 * T' = T + more x T_full for x >= 0: the uppermost throttle cell's a + b, added to b of every cell above x = 0, so
 * that T' at x = 1 is (1 + more) T_full and T' at x = 0 is T.
 */
function strongerDrive(drive: Drive, more: number): Drive {
  const cells = drive.cells.slice();
  const row = drive.throttleEdges.length + 1;
  const columns = Array.from({ length: row }, (_, j) => j);
  for (let i = 0; i <= drive.speedEdges.length; i++) {
    const top = CELL_SIZE * (row * i + row - 1);
    const [a0, a1, b0, b1, b2, b3] = drive.cells.subarray(top, top + CELL_SIZE);
    for (const j of columns) {
      // The cell that ends at or below x = 0 is the regeneration side.
      if (j < row - 1 && drive.throttleEdges[j] <= 0) continue;
      const at = CELL_SIZE * (row * i + j);
      cells[at + 2] += more * (a0 + b0);
      cells[at + 3] += more * (a1 + b1);
      cells[at + 4] += more * b2;
      cells[at + 5] += more * b3;
    }
  }
  return {
    ...drive,
    cells,
    peakForce: (1 + more) * drive.peakForce,
    peakPower: drive.peakPower === null ? null : (1 + more) * drive.peakPower,
  };
}
