import type { Cause } from '../../study/findings.ts';

/** Why a hill defeats a design, as the end of `because ...`. */
export const CAUSE_WORDS: Readonly<Record<Cause, string>> = {
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
};

/** A cause in a table, in as few words as it takes. */
export const CAUSE_NAMES: Readonly<Record<Cause, string>> = {
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
};
