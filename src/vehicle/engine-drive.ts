import { checkSpec } from './check-spec.ts';
import { combustionCells } from './combustion-cells.ts';
import { checkCombustion } from './combustion-check.ts';
import { combustionTable } from './combustion-table.ts';
import type { Drive } from './drive.ts';
import type { EngineDriveSpec } from './engine-spec.ts';
import { fuelSource } from './fuel-source.ts';
import { checkGearbox } from './gearbox-check.ts';
import { peakFigures } from './peak-figures.ts';

/**
 * An engine with gears, compiled to the drive law: bilinear between the corners of its curves (`combustionTable`), in
 * every gear the same cells over shaft speed. The engine's inertia counts in each gear with its ratio squared.
 *
 * @param spec steady torque, gears, gearbox, fuel; shaft speeds are those of the crankshaft [rad/s]
 * @throws InputError `out-of-range`, `not-increasing`, `wrong-length`, `not-in-order`, `conflict`, `hunting`
 */
export function engineDrive(spec: EngineDriveSpec): Drive {
  checkCombustion(spec);
  checkGearbox(spec);
  checkSpec('engine drive', [
    { key: 'wheelRadius', value: spec.wheelRadius, unit: 'm', least: 0, above: true },
  ]);
  const table = combustionTable(spec);
  const gears = spec.ratios.map((whole) => {
    const ratio = whole / spec.wheelRadius;
    return { ratio, inertia: spec.inertia * ratio * ratio };
  });
  const smooth = driveOf(spec, gears, combustionCells(table, false));
  if (table.fuelCut === null) return smooth;
  return {
    ...driveOf(spec, gears, combustionCells(table, true)),
    withoutFuelCut: smooth,
    fuelCutBelow: table.fuelCut.throttle,
  };
}

function driveOf(
  spec: EngineDriveSpec,
  gears: Drive['gears'],
  law: ReturnType<typeof combustionCells>,
): Drive {
  const { ratio } = gears[spec.gear]!;
  const peak = peakFigures(law, spec.stall, spec.revLimit ?? Number.POSITIVE_INFINITY);
  return {
    kind: 'engine',
    ...law,
    gears,
    gear: spec.gear,
    gearbox: spec.gearbox,
    belt: null,
    throttleMin: 0,
    throttleMax: 1,
    lag: spec.lag,
    derate: spec.derate,
    stallSpeed: spec.stall,
    idleSpeed: spec.idle,
    source: spec.fuel === null ? null : fuelSource(spec.fuel, spec.efficiency, spec.idle),
    withoutFuelCut: null,
    fuelCutBelow: 0,
    peakForce: ratio * peak.torque,
    peakPower: peak.power,
    closedThrottleForce: ratio * peak.drag,
    regenerationForce: 0,
  };
}
