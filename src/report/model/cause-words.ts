import type { Cause, Derating, HillOutcome } from '../../study/findings.ts';

/** Why a hill defeats a design, as the end of `because ...`. */
const CAUSE_WORDS: Readonly<Record<Cause, string>> = {
  torque: 'full throttle gives too little force',
  power: 'there is too little power',
  closed_throttle: 'closed throttle holds back too little',
  gains: 'its gains are too soft for how fast road and wind change',
  rate: 'the throttle moves too slowly',
  slack: 'slack in the throttle swallows its command',
  windup: 'its integral wound up at the limit',
  derating: 'the thin air leaves too little force',
  wind: 'the headwind asks for too much',
  gear: 'the gear is too high',
  traction: 'the tyre cannot pass the force on',
  sensor: 'its speed sensor tells it a wrong speed',
};

/** A cause in a table, in as few words as it takes. */
const CAUSE_NAMES: Readonly<Record<Cause, string>> = {
  torque: 'torque',
  power: 'power',
  closed_throttle: 'closed throttle',
  gains: 'gains',
  rate: 'rate of the throttle',
  slack: 'slack',
  windup: 'windup',
  derating: 'thin air',
  wind: 'wind',
  gear: 'gear too high',
  traction: 'grip',
  sensor: 'sensor fault',
};

const DERATING_WORDS: Readonly<Record<Derating, string>> = {
  altitude: CAUSE_WORDS.derating,
  heat: 'heat leaves the drive too little force',
  voltage: 'the voltage of its battery leaves too little force',
  empty: 'its battery is empty',
  full: 'its battery takes too little regeneration',
};

const DERATING_NAMES: Readonly<Record<Derating, string>> = {
  altitude: CAUSE_NAMES.derating,
  heat: 'heat',
  voltage: 'voltage',
  empty: 'battery empty',
  full: 'battery takes no more',
};

type Reason = Pick<HillOutcome, 'cause' | 'derating'>;

/** The same for one outcome: a derating by what derates. Null where there is no cause. */
export function causeWords({ cause, derating }: Reason): string | null {
  if (typeof cause !== 'string') return null;
  return cause === 'derating' ? DERATING_WORDS[derating ?? 'altitude'] : CAUSE_WORDS[cause];
}

/** In as few words as it takes. */
export function causeName({ cause, derating }: Reason): string | null {
  if (typeof cause !== 'string') return null;
  return cause === 'derating' ? DERATING_NAMES[derating ?? 'altitude'] : CAUSE_NAMES[cause];
}

/** The same for a cause that is read from a file; one that is not known is told as it stands. */
export function causeNameOf(cause: string, derating: string | null): string {
  const names: Readonly<Record<string, string>> =
    cause === 'derating' && derating !== null ? DERATING_NAMES : CAUSE_NAMES;
  const key = names === DERATING_NAMES ? (derating ?? cause) : cause;
  return Object.hasOwn(names, key) ? names[key]! : key;
}
