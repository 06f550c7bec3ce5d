import { InputError } from '../problems/input-error.ts';
import { checkSpec } from './check-spec.ts';
import { checkTable } from './check-table.ts';
import type { Gearbox } from './drive.ts';
import type { EngineDriveSpec } from './engine-spec.ts';

/**
 * The door of ratios and gearbox. An automatic gearbox must not hunt: after a shift, at the same speed and throttle, it
 * must not want to shift back. From gear k to k + 1 at the up line the shaft falls to up r(k+1) / r(k), which must stay
 * above the down line; both are straight between the same throttles, so that these decide.
 *
 * @throws InputError `out-of-range`, `not-in-order`, `not-increasing`, `wrong-length`, `hunting`
 */
export function checkGearbox(spec: EngineDriveSpec): void {
  const { ratios, gear, gearbox } = spec;
  checkTable('gears', [
    { key: 'ratios', values: Float64Array.from(ratios), unit: '', least: 0, above: true },
  ]);
  for (let k = 1; k < ratios.length; k++)
    if (!(ratios[k]! < ratios[k - 1]!))
      throw new InputError({
        code: 'not-in-order',
        place: { key: `ratios[${k}]` },
        message: 'ratios do not fall from gear to gear',
        found: `${ratios[k]} after ${ratios[k - 1]}`,
        allowed: 'less than in the gear below',
      });
  if (!(Number.isInteger(gear) && gear >= 0 && gear < ratios.length))
    throw new InputError({
      code: 'out-of-range',
      place: { key: 'gear' },
      message: 'the engaged gear is none of the gears',
      found: `${gear}`,
      allowed: `a whole number from 0 to ${ratios.length - 1}`,
    });
  if (gearbox.kind === 'clutch')
    checkSpec('gearbox', [
      { key: 'gearbox.open', value: gearbox.open, unit: 's', least: 0 },
      { key: 'gearbox.resume', value: gearbox.resume, unit: 's', least: 0 },
    ]);
  if (gearbox.kind === 'automatic') checkAutomatic(spec, gearbox);
}

function checkAutomatic(
  { ratios, stall, revLimit }: EngineDriveSpec,
  gearbox: Extract<Gearbox, { readonly kind: 'automatic' }>,
): void {
  const { throttle, upSpeed, downSpeed } = gearbox;
  const limit = revLimit ?? Number.MAX_VALUE;
  const line = {
    unit: 'rad/s',
    length: throttle.length,
    least: stall,
    above: true,
    greatest: limit,
  } as const;
  checkTable('gearbox', [
    { key: 'gearbox.throttle', values: throttle, unit: '', least: 0, greatest: 1, increasing: true },
    { key: 'gearbox.upSpeed', values: upSpeed, ...line },
    { key: 'gearbox.downSpeed', values: downSpeed, ...line },
  ]);
  checkSpec('gearbox', [
    { key: 'gearbox.gap', value: gearbox.gap, unit: 's', least: 0 },
    { key: 'gearbox.dwell', value: gearbox.dwell, unit: 's', least: 0 },
  ]);
  for (let i = 0; i < throttle.length; i++)
    for (let k = 1; k < ratios.length; k++) {
      const after = (upSpeed[i]! * ratios[k]!) / ratios[k - 1]!;
      if (after > downSpeed[i]!) continue;
      throw new InputError({
        code: 'hunting',
        place: { key: `gearbox.downSpeed[${i}]` },
        message: `the gearbox would shift to and fro between gears ${k} and ${k + 1}`,
        found: `down at ${downSpeed[i]} rad/s, and ${after} rad/s after a shift up at ${upSpeed[i]} rad/s`,
        allowed: `a down line below ${after} rad/s`,
      });
    }
}
