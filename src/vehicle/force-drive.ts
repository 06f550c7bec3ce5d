import { checkSpec } from './check-spec.ts';
import type { Drive } from './drive.ts';
import { fullThrottleLosses } from './full-throttle-losses.ts';

/** A drive known by its force and power at the wheel. */
export interface ForceDriveSpec {
  /** Full-throttle force below the power limit [N]; 0: the vehicle only coasts. */
  readonly peakForce: number;
  /** Power limit at the wheel [W]; null: none. */
  readonly peakPower: number | null;
  /** Force that holds the vehicle back at closed throttle [N], >= 0. */
  readonly closedThrottleForce: number;
  /** First-order lag from throttle to force [s]. */
  readonly lag: number;
  readonly derate: Drive['derate'];
}

/**
 * F = -F_ct + u (min(F_peak, P_peak / v) + F_ct), u in [0, 1], compiled to one cell below the corner speed
 * P_peak / F_peak and one above it. One fixed ratio; with a power limit this takes an ideal ratio for granted above
 * the corner speed.
 *
 * @throws InputError `out-of-range`
 */
export function forceDrive(spec: ForceDriveSpec): Drive {
  const { peakForce, peakPower, closedThrottleForce, lag, derate } = spec;
  checkSpec('force drive', [
    { key: 'peakForce', value: peakForce, unit: 'N', least: 0 },
    { key: 'peakPower', value: peakPower ?? 1, unit: 'W', least: 0, above: true },
    { key: 'closedThrottleForce', value: closedThrottleForce, unit: 'N', least: 0 },
    { key: 'lag', value: lag, unit: 's', least: 0 },
  ]);
  const corner = peakPower === null || peakForce === 0 ? null : peakPower / peakForce;
  const belowCorner = [-closedThrottleForce, 0, peakForce + closedThrottleForce, 0, 0, 0];
  const aboveCorner = [-closedThrottleForce, 0, closedThrottleForce, 0, 0, peakPower ?? 0];
  const cells = Float64Array.from(corner === null ? belowCorner : [...belowCorner, ...aboveCorner]);
  return {
    kind: 'force',
    speedEdges: Float64Array.from(corner === null ? [] : [corner]),
    throttleEdges: new Float64Array(0),
    cells,
    losses: fullThrottleLosses(cells),
    gears: [{ ratio: 1, inertia: 0 }],
    gear: 0,
    gearbox: { kind: 'fixed' },
    belt: null,
    throttleMin: 0,
    throttleMax: 1,
    lag,
    derate,
    stallSpeed: 0,
    idleSpeed: 0,
    source: null,
    withoutFuelCut: null,
    fuelCutBelow: 0,
    peakForce,
    peakPower,
    closedThrottleForce,
    regenerationForce: 0,
  };
}
