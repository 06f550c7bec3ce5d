import { batterySource } from './battery-source.ts';
import type { BatterySpec, HeatingSpec, LossMapSpec } from './battery-spec.ts';
import { checkSpec } from './check-spec.ts';
import type { Drive } from './drive.ts';

/** An electric drive known by its force and power at the wheel. */
export interface ElectricDriveSpec {
  /** Full-throttle force below the power limit [N]. */
  readonly peakForce: number;
  /** Power limit at the wheel [W]; null: none. */
  readonly peakPower: number | null;
  /** Drag of the motor at closed throttle [N], >= 0. */
  readonly closedThrottleForce: number;
  /** Force at full regeneration, on top of the closed-throttle drag [N]; 0: the drive does not regenerate. */
  readonly regenerationForce: number;
  /** Limit of that power at the wheel [W]; null: none. */
  readonly regenerationPower: number | null;
  /** Below this speed drag and regeneration fade to zero in a straight line [m/s]; 0: they do not fade. */
  readonly fadeSpeed: number;
  /** Lowest throttle, in [-1, 0]: -1 gives full regeneration. Without regeneration it is 0 whatever stands here. */
  readonly throttleMin: number;
  /** First-order lag from throttle to force [s]. */
  readonly lag: number;
  /** Wheel energy over battery energy while driving, battery energy over that of the regeneration without the drag, which charges nothing, in (0, 1] and [0, 1]; null: no battery account, unless there is a loss map. */
  readonly efficiency: { readonly drive: number; readonly regeneration: number } | null;
  /** Losses over speed and force, in the place of the efficiencies. */
  readonly lossMap?: LossMapSpec | null;
  /** Null: the battery gives and takes what it is asked for, and its charge is not followed. */
  readonly battery?: BatterySpec | null;
  /** Derating by time at power; null: none. Needs a power limit. */
  readonly heating?: HeatingSpec | null;
}

/**
 * Torque-power envelope of an electric drive at the wheel:
 *
 *     u >= 0:  F = -D(v) + u (min(F_peak, P_peak / v) + D(v))
 *     u <  0:  F = -D(v) + u R(v)
 *     D = F_ct fade(v),  R = min(F_reg, P_reg / v) fade(v),  fade = min(1, v / v_fade)
 *
 * compiled to cells between the corner speeds, with an edge at u = 0: the base speed P_peak / F_peak is one of them.
 * The voltage that sags and the heat take a share of the full-throttle force, a battery near full one of the
 * regeneration: those are in the source (`batterySource`), the cells are those of a full, cold battery.
 *
 * @throws InputError `out-of-range`, and what `batterySource` throws
 */
export function electricDrive(spec: ElectricDriveSpec): Drive {
  checkElectricSpec(spec);
  const { peakForce, peakPower, closedThrottleForce: drag, regenerationForce, regenerationPower } = spec;
  const fadeSpeed = spec.fadeSpeed;
  const powerCorner = peakPower === null ? Number.POSITIVE_INFINITY : peakPower / peakForce;
  const regenerationCorner =
    regenerationPower === null || regenerationForce === 0
      ? Number.POSITIVE_INFINITY
      : regenerationPower / regenerationForce;
  const corners = [powerCorner, regenerationCorner, fadeSpeed].filter((v) => v > 0 && Number.isFinite(v));
  const edges = [...new Set(corners)].sort((a, b) => a - b);
  const cells: number[] = [];
  const losses: number[] = [];
  for (let cell = 0; cell <= edges.length; cell++) {
    const from = cell === 0 ? 0 : edges[cell - 1]!;
    const fading = from < fadeSpeed;
    const a0 = fading ? 0 : -drag;
    const a1 = fading ? -drag / fadeSpeed : 0;
    const powerLimited = from >= powerCorner;
    const regeneration = from >= regenerationCorner ? [0, regenerationPower ?? 0] : [regenerationForce, 0];
    const [flat, hyperbolic] = regeneration as [number, number];
    // Fading multiplies by v / v_fade: constant becomes linear, 1 / v becomes constant.
    const holding = [
      fading ? hyperbolic / fadeSpeed : flat,
      fading ? flat / fadeSpeed : 0,
      0,
      fading ? 0 : hyperbolic,
    ];
    const full = [powerLimited ? 0 : peakForce, 0, 0, powerLimited ? (peakPower ?? 0) : 0] as const;
    cells.push(a0, a1, ...holding, a0, a1, full[0] - a0, -a1, 0, full[3]);
    losses.push(0, 0, ...holding, 0, 0, ...full);
  }
  return {
    kind: 'electric',
    speedEdges: Float64Array.from(edges),
    throttleEdges: Float64Array.of(0),
    cells: Float64Array.from(cells),
    losses: Float64Array.from(losses),
    gears: [{ ratio: 1, inertia: 0 }],
    gear: 0,
    gearbox: { kind: 'fixed' },
    belt: null,
    throttleMin: regenerationForce === 0 ? 0 : spec.throttleMin,
    throttleMax: 1,
    lag: spec.lag,
    derate: 'none',
    stallSpeed: 0,
    idleSpeed: 0,
    source: batterySource({
      efficiency: spec.efficiency,
      lossMap: spec.lossMap ?? null,
      battery: spec.battery ?? null,
      heating: spec.heating ?? null,
      greatestForce: peakForce,
      leastForce: -drag - regenerationForce,
      peakPower,
      drag,
    }),
    withoutFuelCut: null,
    fuelCutBelow: 0,
    peakForce,
    peakPower,
    closedThrottleForce: drag,
    regenerationForce,
  };
}

function checkElectricSpec(spec: ElectricDriveSpec): void {
  checkSpec('electric drive', [
    { key: 'peakForce', value: spec.peakForce, unit: 'N', least: 0, above: true },
    { key: 'peakPower', value: spec.peakPower ?? 1, unit: 'W', least: 0, above: true },
    { key: 'closedThrottleForce', value: spec.closedThrottleForce, unit: 'N', least: 0 },
    { key: 'regenerationForce', value: spec.regenerationForce, unit: 'N', least: 0 },
    { key: 'regenerationPower', value: spec.regenerationPower ?? 1, unit: 'W', least: 0, above: true },
    { key: 'fadeSpeed', value: spec.fadeSpeed, unit: 'm/s', least: 0 },
    { key: 'throttleMin', value: spec.throttleMin, unit: '', least: -1, greatest: 0 },
    { key: 'lag', value: spec.lag, unit: 's', least: 0 },
    {
      key: 'efficiency.drive',
      value: spec.efficiency?.drive ?? 1,
      unit: '',
      least: 0,
      greatest: 1,
      above: true,
    },
    {
      key: 'efficiency.regeneration',
      value: spec.efficiency?.regeneration ?? 1,
      unit: '',
      least: 0,
      greatest: 1,
    },
  ]);
}
