import type { DesignRecord } from '../control/setup.ts';
import { InputError } from '../problems/input-error.ts';
import { fromPctPerKmh } from '../units/convert.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { CandidateFile } from './case-schema.ts';
import type { CaseDocument } from './read-case-file.ts';
import { placeOf } from './yaml-source.ts';

/** Gains of a PI candidate [1/(m/s)], [1/(m/s)/s], and the design they come from; null: typed. */
export interface GainsOfCandidate {
  readonly kp: number;
  readonly ki: number;
  readonly record: DesignRecord | null;
}

interface Context {
  readonly document: CaseDocument;
  readonly vehicle: Vehicle;
  readonly surroundings: Surroundings;
  readonly index: number;
}

/** The gains as typed, or as worked out from what was asked. */
export function gainsOf(file: Extract<CandidateFile, { kind: 'pi' }>, context: Context): GainsOfCandidate {
  if (!('design' in file)) {
    const kp = fromPctPerKmh(file.kp_pct_per_kmh);
    const ki = 'ti_s' in file ? kp / file.ti_s : fromPctPerKmh(file.ki_pct_per_kmh_s);
    return { kp, ki, record: null };
  }
  throw new InputError({
    code: 'design-not-met',
    place: placeOf(context.document.source, ['candidates', context.index, 'design']),
    message: 'the design cannot be met',
  });
}
