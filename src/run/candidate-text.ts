import { candidateSchema } from '../case/candidate-schema.ts';
import type { Editable } from '../case/edit-case.ts';
import type { CaseDocument } from '../case/read-case-file.ts';
import { isMapping } from '../case/schema-walk.ts';
import { valueAt } from '../case/yaml-source.ts';
import type { Gains } from '../control/sampled-loop.ts';
import type { GainSchedule } from '../control/setup.ts';
import { fromPctPerKmh, toKmh, toPctPerKmh } from '../units/convert.ts';
import type { CandidateText } from './tune-result.ts';

/** Gains are written with so many digits. */
const DIGITS = 5;
const SPEED_DIGITS = 7;
/** What a proposal has of the candidate that it is made like. */
const KEPT = ['sample_s', 'computing_delay_s', 'integration', 'setpoint_ramp_m_s2', 'anti_windup'] as const;

type Keys = { readonly [key: string]: Editable };

/** Sampling, anti-windup and weight of the set speed of a candidate, as its file has them; null: the defaults. */
export function keysLike({ source, file }: CaseDocument, like: number | null): Keys {
  const written = like === null ? undefined : valueAt(source.value, ['candidates', like]);
  const candidate = like === null ? undefined : file.candidates[like];
  const weight = candidate !== undefined && 'setpoint_weight' in candidate ? candidate.setpoint_weight : 0;
  const kept = KEPT.flatMap((key) =>
    isMapping(written) && written[key] !== undefined ? [[key, written[key] as Editable] as const] : [],
  );
  return { ...Object.fromEntries(kept), setpoint_weight: weight };
}

/** PI by gain and integral time. */
export const textOfGains = (name: string, like: Keys, { kp, ki }: Gains): CandidateText => ({
  name,
  kind: 'pi',
  ...like,
  kp_pct_per_kmh: digits(toPctPerKmh(kp)),
  ti_s: digits(kp / ki),
});

/** A case may have these gains: neither is out of its range. */
export const isWritable = (gains: Gains): boolean =>
  candidateSchema.safeParse(textOfGains('written', {}, gains)).success;

/** PI by a design. */
export const textOfDesign = (name: string, like: Keys, design: Keys): CandidateText => ({
  name,
  kind: 'pi',
  ...like,
  design,
});

/** Gears from 1. */
export const textOfSchedule = ({ speed, rows }: GainSchedule): Keys => ({
  at_kmh: Array.from(speed, (corner) => digits(toKmh(corner), SPEED_DIGITS)),
  rows: rows.map(({ gear, proportional }) => ({
    ...(gear === null ? {} : { gear: gear + 1 }),
    factor: [...proportional],
  })),
});

/** The gains that stand in the text of these. */
export function writtenGains({ kp, ki }: Gains): Gains {
  const written = fromPctPerKmh(digits(toPctPerKmh(kp)));
  return { kp: written, ki: written / digits(kp / ki) };
}

const digits = (value: number, count = DIGITS): number => Number(value.toPrecision(count));
