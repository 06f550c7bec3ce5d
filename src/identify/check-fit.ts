import { InputError, type Problem } from '../problems/input-error.ts';
import type { CoastDownFit } from './coast-down.ts';

/**
 * Refuses a fit that no vehicle has: then the log is not what it is taken for.
 *
 * @throws InputError `not-physical`, `no-fit`
 */
export function checkCoastDown(fit: CoastDownFit | null, file: string): CoastDownFit {
  if (fit === null)
    throw new InputError({
      code: 'no-fit',
      place: { file },
      message: 'the runs do not determine drag area and rolling resistance',
      allowed: 'a vehicle that slows down by itself, from high to low speed, both ways',
    });
  const faults = [
    ...fault(file, 'drag area', fit.cda.value, 'm2'),
    ...fault(file, 'rolling coefficient', fit.crr.value, ''),
  ];
  const [first, ...others] = faults;
  if (first !== undefined) throw new InputError(first, ...others);
  return fit;
}

function fault(file: string, name: string, value: number, unit: string): readonly Problem[] {
  if (value > 0) return [];
  return [
    {
      code: 'not-physical',
      place: { file },
      message: `the fit gives a ${name} that no vehicle has`,
      found: `${value.toPrecision(3)}${unit === '' ? '' : ` ${unit}`}`,
      allowed:
        'above 0; look at the unit of the speed, at the direction of the runs, and at whether a brake or a gear was in',
    },
  ];
}
