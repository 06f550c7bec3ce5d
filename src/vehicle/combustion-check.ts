import { InputError, type Problem } from '../problems/input-error.ts';
import { checkSpec } from './check-spec.ts';
import { checkTable } from './check-table.ts';
import { combustionCurves } from './combustion-curves.ts';
import { GOVERNOR_BAND, governedTorque } from './combustion-row.ts';
import type { CombustionSpec, TorqueSpec } from './engine-spec.ts';

/** Shape of part throttle beyond which a throttle plate is an on-off valve. */
const GREATEST_SHAPE = 20;

/**
 * The door of everything that is built from an engine: numbers and rows in their ranges, idle above stall and below the
 * rev limit, no map that turns back as the throttle opens, full load above closed throttle everywhere.
 *
 * @throws InputError `out-of-range`, `not-increasing`, `wrong-length`, `conflict`
 */
export function checkCombustion(spec: CombustionSpec): void {
  const limit = spec.revLimit ?? Number.MAX_VALUE;
  checkSpec('engine', [
    { key: 'stall', value: spec.stall, unit: 'rad/s', least: 0 },
    { key: 'idle', value: spec.idle, unit: 'rad/s', least: spec.stall, above: true },
    { key: 'revLimit', value: limit, unit: 'rad/s', least: spec.idle, above: true },
    {
      key: 'limitBand',
      value: spec.revLimit === null ? 1 : spec.limitBand,
      unit: 'rad/s',
      least: 0,
      above: true,
    },
    { key: 'inertia', value: spec.inertia, unit: 'kg m2', least: 0 },
    { key: 'efficiency', value: spec.efficiency, unit: '', least: 0, above: true, greatest: 1 },
    { key: 'lag', value: spec.lag, unit: 's', least: 0 },
  ]);
  checkFuelCut(spec);
  checkTorque(spec.torque);
  checkDrag(spec);
  checkFullAboveClosed(spec);
}

function checkFuelCut({ fuelCut, idle }: CombustionSpec): void {
  if (fuelCut === null) return;
  checkSpec('fuel cut', [
    { key: 'fuelCut.above', value: fuelCut.above, unit: 'rad/s', least: idle },
    { key: 'fuelCut.blend', value: fuelCut.blend, unit: 'rad/s', least: 0, above: true },
    { key: 'fuelCut.throttle', value: fuelCut.throttle, unit: '', least: 0, above: true, greatest: 0.5 },
    { key: 'fuelCut.torque', value: fuelCut.torque, unit: 'N m', least: 0 },
  ]);
}

function checkTorque(torque: TorqueSpec): void {
  switch (torque.kind) {
    case 'parabola':
      checkSpec('torque', [
        { key: 'torque.peak', value: torque.peak, unit: 'N m', least: 0, above: true },
        { key: 'torque.peakSpeed', value: torque.peakSpeed, unit: 'rad/s', least: 0, above: true },
        { key: 'torque.falloff', value: torque.falloff, unit: '', least: 0 },
      ]);
      return;
    case 'full_load':
      checkTable('torque', [
        shaftSpeeds('torque.shaftSpeed', torque.shaftSpeed),
        { key: 'torque.torque', values: torque.torque, unit: 'N m', length: torque.shaftSpeed.length },
      ]);
      checkSpec('torque', [
        { key: 'torque.shape', value: torque.shape, unit: '', least: 0, greatest: GREATEST_SHAPE },
        { key: 'torque.shapeSpeed', value: torque.shapeSpeed ?? 1, unit: 'rad/s', least: 0, above: true },
      ]);
      return;
    case 'map':
      checkMap(torque);
  }
}

function checkMap({ shaftSpeed, throttle, torque }: Extract<TorqueSpec, { readonly kind: 'map' }>): void {
  const columns = throttle.length;
  checkTable('map', [
    shaftSpeeds('torque.shaftSpeed', shaftSpeed),
    { key: 'torque.throttle', values: throttle, unit: '', least: 0, greatest: 1, increasing: true },
    { key: 'torque.torque', values: torque, unit: 'N m', length: shaftSpeed.length * columns },
  ]);
  if (columns < 2 || throttle[0] !== 0 || throttle[columns - 1] !== 1)
    refuse({
      code: 'out-of-range',
      key: 'torque.throttle',
      message: 'the map does not reach from closed to full throttle',
      found: [...throttle].join(', '),
      allowed: 'from 0 to 1',
    });
  for (let at = 1; at < torque.length; at++)
    if (at % columns !== 0 && torque[at]! < torque[at - 1]!)
      refuse({
        code: 'not-increasing',
        key: `torque.torque[${at}]`,
        message: 'torque falls as the throttle opens',
        found: `${torque[at]} N m after ${torque[at - 1]} N m at ${shaftSpeed[Math.floor(at / columns)]} rad/s`,
        allowed: 'as much or more at the next throttle',
      });
}

function checkDrag({ torque, drag }: CombustionSpec): void {
  if (drag === null) return;
  if (torque.kind === 'map')
    refuse({
      code: 'conflict',
      key: 'drag',
      message: 'closed throttle is told twice',
      found: 'a drag beside a map',
      allowed: 'the first column of the map alone',
    });
  checkTable('drag', [
    shaftSpeeds('drag.shaftSpeed', drag.shaftSpeed),
    { key: 'drag.torque', values: drag.torque, unit: 'N m', least: 0, length: drag.shaftSpeed.length },
  ]);
}

/** All curves are straight between these corners, but for the parabola, which is nowhere below 0. */
function checkFullAboveClosed(spec: CombustionSpec): void {
  const { idle } = spec;
  const curves = combustionCurves(spec);
  for (const w of [...curves.corners, idle, idle + GOVERNOR_BAND]) {
    const full = curves.full(w);
    const closed = governedTorque(curves, idle, w);
    if (full < closed)
      refuse({
        code: 'conflict',
        key: 'torque.torque',
        message: `full load is below closed throttle at ${w} rad/s`,
        found: `${full} N m`,
        allowed: `${closed} N m or more`,
      });
  }
}

function shaftSpeeds(key: string, values: Float64Array) {
  return { key, values, unit: 'rad/s', least: 0, increasing: true } as const;
}

function refuse({ key, ...problem }: Omit<Problem, 'place'> & { readonly key: string }): never {
  throw new InputError({ ...problem, place: { key } });
}
