import { burntThroughClutch, throughClutch } from './centrifugal-clutch.ts';
import { checkSpec } from './check-spec.ts';
import { checkTable } from './check-table.ts';
import { combustionCells } from './combustion-cells.ts';
import { checkCombustion } from './combustion-check.ts';
import { combustionTable } from './combustion-table.ts';
import type { Belt, Drive } from './drive.ts';
import { wheelForce } from './drive-law.ts';
import type { VariatorDriveSpec } from './engine-spec.ts';
import { fuelSource } from './fuel-source.ts';
import { peakFigures } from './peak-figures.ts';
import { piecewiseLinear } from './piecewise-linear.ts';

/**
 * An engine with a belt variator and a centrifugal clutch. At rest the belt keeps the engine on its line over throttle
 * within its ratio limits, so that between them the wheel gets the power of the line, F = T(line(x), x) line(x) / v.
 * Below the locked speed the clutch slips (`throughClutch`); the engine never stalls. The belt's and the final drive's
 * losses are in the spec's efficiency, one for all ratios.
 *
 * For words, the peak force is that at the greatest ratio, the peak power that of the line at full throttle, the drag
 * that at the least ratio on the line of closed throttle.
 *
 * @param spec torque, ratios, line and clutch; shaft speeds are those of the crankshaft [rad/s]
 * @throws InputError `out-of-range`, `not-increasing`, `wrong-length`, `conflict`
 */
export function variatorDrive(spec: VariatorDriveSpec): Drive {
  checkCombustion(spec);
  checkVariator(spec);
  const belt: Belt = {
    least: spec.leastRatio / spec.wheelRadius,
    greatest: spec.greatestRatio / spec.wheelRadius,
    throttle: spec.line.throttle,
    shaftSpeed: spec.line.shaftSpeed,
    lag: spec.ratioLag,
    inertia: spec.inertia,
    locked: spec.clutch.locked,
  };
  const table = throughClutch(combustionTable(spec), spec.clutch.begins, spec.clutch.locked);
  const smooth = driveOf(spec, belt, combustionCells(table, false));
  if (table.fuelCut === null) return smooth;
  return {
    ...driveOf(spec, belt, combustionCells(table, true)),
    withoutFuelCut: smooth,
    fuelCutBelow: table.fuelCut.throttle,
  };
}

function driveOf(spec: VariatorDriveSpec, belt: Belt, law: ReturnType<typeof combustionCells>): Drive {
  const { throttle, shaftSpeed } = belt;
  const onLine = (x: number): number => piecewiseLinear(throttle, shaftSpeed, x);
  const source = spec.fuel === null ? null : fuelSource(spec.fuel, spec.efficiency, spec.idle);
  const drive: Drive = {
    kind: 'variator',
    ...law,
    gears: [{ ratio: belt.greatest, inertia: spec.inertia * belt.greatest * belt.greatest }],
    gear: 0,
    gearbox: { kind: 'fixed' },
    belt,
    throttleMin: 0,
    throttleMax: 1,
    lag: spec.lag,
    derate: spec.derate,
    stallSpeed: 0,
    idleSpeed: spec.idle,
    source:
      source === null ? null : { ...source, map: burntThroughClutch(source.map, spec.clutch, spec.idle) },
    withoutFuelCut: null,
    fuelCutBelow: 0,
    peakForce: belt.greatest * peakFigures(law, 0, onLine(1)).torque,
    peakPower: null,
    closedThrottleForce: 0,
    regenerationForce: 0,
  };
  const full = onLine(1) / belt.greatest;
  const coasting = onLine(0) / belt.least;
  return {
    ...drive,
    peakPower: wheelForce(drive, 0, full, 1, 1) * full,
    closedThrottleForce: Math.max(0, -wheelForce(drive, 0, coasting, 0, 1)),
  };
}

function checkVariator(spec: VariatorDriveSpec): void {
  const { leastRatio, clutch, line } = spec;
  const limit = spec.revLimit ?? Number.MAX_VALUE;
  checkSpec('variator drive', [
    { key: 'wheelRadius', value: spec.wheelRadius, unit: 'm', least: 0, above: true },
    { key: 'leastRatio', value: leastRatio, unit: '', least: 0, above: true },
    { key: 'greatestRatio', value: spec.greatestRatio, unit: '', least: leastRatio, above: true },
    { key: 'ratioLag', value: spec.ratioLag, unit: 's', least: 0 },
    { key: 'clutch.begins', value: clutch.begins, unit: 'rad/s', least: spec.idle, above: true },
    {
      key: 'clutch.locked',
      value: clutch.locked,
      unit: 'rad/s',
      least: clutch.begins,
      above: true,
      greatest: limit,
    },
  ]);
  checkTable('variator drive', [
    {
      key: 'line.throttle',
      values: line.throttle,
      unit: '',
      least: 0,
      greatest: 1,
      increasing: true,
    },
    {
      key: 'line.shaftSpeed',
      values: line.shaftSpeed,
      unit: 'rad/s',
      least: clutch.locked,
      greatest: limit,
      length: line.throttle.length,
    },
  ]);
}
