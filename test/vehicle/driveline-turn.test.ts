// Where torque turns from holding back to driving, the driveline takes its share on the other side: T eta above 0, T / eta below.
import { expect, test } from 'vitest';
import { wheelForce } from '../../src/vehicle/drive-law.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import type { EngineDriveSpec } from '../../src/vehicle/engine-spec.ts';
import { singleWithGears } from './engines.ts';

const row = (...values: number[]): Float64Array => Float64Array.from(values);

/** Plain interpolation, for the definition. */
function along(x: ArrayLike<number>, y: ArrayLike<number>, at: number): number {
  const last = x.length - 1;
  if (at <= x[0]!) return y[0]!;
  for (let i = 1; i <= last; i++)
    if (at <= x[i]!) return y[i - 1]! + ((y[i]! - y[i - 1]!) * (at - x[i - 1]!)) / (x[i]! - x[i - 1]!);
  return y[last]!;
}

const parabola = { kind: 'parabola', peak: 60, peakSpeed: 550, falloff: 0.4 } as const;
const falling = {
  kind: 'full_load',
  shaftSpeed: row(150, 300, 500, 650, 850),
  torque: row(35, 52, 62, 30, 6),
  shape: 4,
  shapeSpeed: null,
} as const;
const pointed = {
  ...falling,
  torque: row(35, 52, 62, 60, 44),
  shape: 0,
};

const cases: readonly (readonly [string, EngineDriveSpec['torque'], number])[] = [
  ['a parabola, 80 %', parabola, 0.8],
  ['a parabola, 92 %', parabola, 0.92],
  ['a full load that falls to 6 N m, 80 %', falling, 0.8],
  ['a full load in proportion to the throttle, 80 %', pointed, 0.8],
];

test.each(cases)('%s, is the definition to 0.3 per cent of full torque', (_name, torque, efficiency) => {
  const spec = { ...singleWithGears, torque, efficiency, fuelCut: null, revLimit: null };
  const drive = engineDrive(spec);
  const ratio = 5.3 / 0.31;
  const full = (w: number): number =>
    torque.kind === 'parabola'
      ? 60 * (1 - 0.4 * (w / 550 - 1) ** 2)
      : along(row(150, 300, 500, 650, 850), torque.kind === 'full_load' ? torque.torque : [], w);
  const share = (x: number): number => (torque === falling ? Math.expm1(-4 * x) / Math.expm1(-4) : x);
  let worst = 0;
  for (let w = 172; w < 850; w += 7)
    for (let x = 0; x <= 1; x += 0.004) {
      const drag = along([150, 450, 900], [5, 7.5, 13], w);
      const free = -drag + share(x) * (full(w) + drag);
      const exact = free > 0 ? free * efficiency : free / efficiency;
      worst = Math.max(worst, Math.abs(wheelForce(drive, 5, w / ratio, x, 1) / ratio - exact));
    }
  // Of the greatest span, some 69 N m.
  expect(worst).toBeLessThan(0.003 * 69);
});

test('a parabola without drag, or without losses, keeps its closed form and its one cell', () => {
  const spec = { ...singleWithGears, torque: parabola, fuelCut: null, revLimit: null };
  expect(engineDrive({ ...spec, drag: null }).throttleEdges).toHaveLength(0);
  expect(engineDrive({ ...spec, efficiency: 1 }).throttleEdges).toHaveLength(0);
});
