import * as z from 'zod';
import type { ControllerSetup } from '../control/setup.ts';
import { antiWindupSchemas, integerWindupSchemas } from './anti-windup-schema.ts';
import { fieldNotes, kind, kmh, mapping, NOT_GIVEN, number, optional, otherwise, word } from './fields.ts';
import { integerFields } from './integer-schema.ts';
import { familyFields } from './pid-schema.ts';

/** Lower case, digits, hyphens: a candidate's name becomes part of a file name. */
export const candidateName = z
  .string()
  .regex(/^[a-z0-9][a-z0-9-]{0,40}$/)
  .meta({ description: 'Name: lower-case letters, digits and hyphens' })
  .register(fieldNotes, { allowed: 'lower-case letters, digits and hyphens, up to 41, not a hyphen first' });
const name = optional(candidateName);
const throttle = (words: string) => number('%', -100, 100, words);

const lockedLevel = mapping('Throttle locked at what holds the set speed on the level in still air', {
  name,
  kind: kind('locked'),
  throttle: otherwise(
    word(
      ['level'],
      'Locked again at each change of the set speed',
      'level; a figure goes under throttle_pct',
    ),
    'level',
    NOT_GIVEN,
  ),
});
const lockedGiven = mapping('Throttle locked at a given value', {
  name,
  kind: kind('locked'),
  throttle_pct: throttle('Throttle; below 0 only where the drive regenerates'),
});

const sampling = {
  sample_s: otherwise(
    number('s', 0.0005, 2, 'Sample time'),
    0.02,
    'a usual period of a speed loop, 10 to 100 ms',
  ),
  computing_delay_s: otherwise(number('s', 0, 2, 'From sample to command'), 0, 'ideal: not given'),
};
const integration = otherwise(
  word(['forward', 'backward'], 'When the integral is added up: after the command, or before'),
  'forward',
  NOT_GIVEN,
);
const setpoint_ramp_m_s2 = optional(
  number('m/s2', 0.01, 20, 'Rate of the reference after a change of set speed'),
  'step',
  NOT_GIVEN,
);
const WINDUP = { description: 'What the integral does while the command is at a limit' };
const conditional = { kind: 'conditional' } as const;
const NO_FIGURE = 'needs no figure of its own';

const integralRest = {
  ...sampling,
  integration,
  setpoint_ramp_m_s2,
  anti_windup: otherwise(z.union(antiWindupSchemas).meta(WINDUP), conditional, NO_FIGURE),
  ...familyFields,
};
const piRest = { name, kind: kind('pi'), ...integralRest };
const pidRest = { name, kind: kind('pid'), ...integralRest };
const integerRest = {
  name,
  kind: kind('integer'),
  ...sampling,
  integration,
  setpoint_ramp_m_s2,
  ...integerFields,
  anti_windup: otherwise(z.union(integerWindupSchemas).meta(WINDUP), conditional, NO_FIGURE),
};
const weight = number('', 0, 1, 'Weight of the set speed in the proportional part');
const typedWeight = otherwise(weight, 1, 'the common form: P on the error');
const kp = (least: number) => number('% per km/h', least, 10000, 'Proportional gain');

const designSpeed = optional(
  kmh('True speed of the operating point, on the level in the still air of sea level'),
  'hold.set_speed_kmh',
  'not given: the true speed of the set speed, on the level in the still air of sea level',
);
const settlingDesign = mapping('Gains from how the set speed is reached', {
  settling_s: number('s', 0.1, 1000, 'Time after which the speed stays within 2 % of a step'),
  overshoot_pct: number('%', 0, 60, 'Overshoot of a step'),
  at_kmh: designSpeed,
});
const droopDesign = mapping('Gains from the hill', {
  droop_kmh: number('km/h', 0.05, 50, 'Greatest loss of speed on the step of grade'),
  grade_step_pct: number('%', 0.1, 40, 'Step of grade'),
  damping: number('', 0.1, 5, 'Damping ratio'),
  at_kmh: designSpeed,
});
const simcDesign = mapping('Gains from the delay of the loop', {
  closed_loop_s: number('s', 0.01, 1000, 'Time constant of the closed loop beside its delay'),
  rule: otherwise(
    word(
      ['simc', 'lambda'],
      'Integral time: by SIMC, at most four times closed loop and delay; or the lag of the vehicle',
    ),
    'simc',
    'the better one against hills: a lag as integral time is slow to take a load',
  ),
  at_kmh: designSpeed,
});
const rejectionDesign = mapping('Gains that take a load best under a bound', {
  max_sensitivity: number('', 1.05, 10, 'Greatest sensitivity of the loop'),
  at_kmh: designSpeed,
});
const piDesigned = mapping('PI with designed gains', {
  ...piRest,
  design: z.union([settlingDesign, droopDesign, simcDesign, rejectionDesign]).meta({
    description:
      'What the gains are worked out from, for the vehicle on the level in the still air of the case at sea level',
  }),
  setpoint_weight: otherwise(weight, 0, 'designed gains: the zero of P on the error is left out'),
});
const byTime = { kp_pct_per_kmh: kp(0.000001), ti_s: number('s', 0.01, 100000, 'Integral time') };
const byGain = {
  kp_pct_per_kmh: kp(0),
  ki_pct_per_kmh_s: number('% per km/h s', 0, 10000, 'Integral gain'),
};
const piByTime = mapping('PI by gain and integral time', {
  ...piRest,
  ...byTime,
  setpoint_weight: typedWeight,
});
const piByGain = mapping('PI by two gains', { ...piRest, ...byGain, setpoint_weight: typedWeight });

const derivativeFilter = optional(
  number('s', 0, 100, "Time constant of the derivative's filter"),
  'td_s / 10',
  'usual: a tenth of the derivative time',
);
const pidByTime = mapping('PID by gain, integral and derivative time', {
  ...pidRest,
  ...byTime,
  td_s: number('s', 0, 1000, 'Derivative time'),
  derivative_filter_s: derivativeFilter,
  setpoint_weight: typedWeight,
});
const pidByGain = mapping('PID by three gains', {
  ...pidRest,
  ...byGain,
  kd_pct_s_per_kmh: number('% s per km/h', 0, 10000, 'Derivative gain'),
  derivative_filter_s: number('s', 0, 100, "Time constant of the derivative's filter"),
  setpoint_weight: typedWeight,
});
const proportional = mapping('P alone, about the throttle that it takes over', {
  name,
  kind: kind('p'),
  ...sampling,
  setpoint_ramp_m_s2,
  ...familyFields,
  kp_pct_per_kmh: kp(0.000001),
});
const integerByTime = mapping('PI in whole numbers, by gain and integral time', {
  ...integerRest,
  ...byTime,
});
const integerByGain = mapping('PI in whole numbers, by two gains', { ...integerRest, ...byGain });

const candidateSchemas = {
  locked: [lockedLevel, lockedGiven],
  pi: [piDesigned, piByTime, piByGain],
  pid: [pidByTime, pidByGain, proportional],
  integer: [integerByTime, integerByGain],
} as const satisfies Record<ControllerSetup['kind'], readonly z.ZodType[]>;

/** What drives the throttle. */
export const candidateSchema = z.union([
  ...candidateSchemas.locked,
  ...candidateSchemas.pi,
  ...candidateSchemas.pid,
  ...candidateSchemas.integer,
]);
