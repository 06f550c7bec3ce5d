import type { Drive } from './drive.ts';
import { drivetrainNotes } from './validity-drivetrain.ts';
import type { NoteRule, ValidityNote } from './validity-note.ts';
import { sourceNotes } from './validity-source.ts';
import type { Vehicle } from './vehicle.ts';

const ALWAYS: readonly NoteRule[] = [
  [
    true,
    'straight-ahead',
    'The vehicle is a point mass that rides straight ahead: lean, steering, cornering drag and the line through a bend are left out.',
  ],
  [
    true,
    'steady-tyres',
    'Rolling resistance does not change with tyre temperature, pressure, wet road or surface.',
  ],
  [
    true,
    'steady-air',
    'Drag follows the air at once: gusts within the length of the vehicle, passing traffic and a change of posture are left out.',
  ],
  [
    true,
    'ideal-brake',
    'The rider by the brake waits for no reaction time: overspeed beyond what is allowed goes with a time constant of 0.5 s, by at most 3 m/s² of braking; no brake heats or fades.',
  ],
  [
    true,
    'no-cut-outs',
    "The rider's own throttle and the cut-outs by brake and clutch act only where the case writes them; that of the stand never does.",
  ],
];

/**
 * Plain statements of what the model of this vehicle leaves out or takes for granted.
 *
 * @returns general statements first, then those of its grip, drive, energy, actuator, sensor and road load; none that
 * is not about this vehicle
 */
export function validityNotes(vehicle: Vehicle): readonly ValidityNote[] {
  const { drive } = vehicle;
  const rules = [
    ...ALWAYS,
    ...gripNotes(vehicle),
    ...forceNotes(drive),
    ...drivetrainNotes(drive),
    ...sourceNotes(drive),
    ...deviceNotes(vehicle),
    ...airNotes(vehicle),
  ];
  return rules.filter(([applies]) => applies).map(([, code, words]) => ({ code, words }));
}

function gripNotes({ traction }: Vehicle): readonly NoteRule[] {
  const known = traction !== null;
  return [
    [
      !known,
      'no-slip',
      'The driven wheel does not slip, and no limit of grip, wheel lift or load transfer is checked.',
    ],
    [
      known,
      'no-slip',
      'The driven wheel does not slip: where it would pass its limit of grip the run says so, but goes on as if it held. A wheel that spins or slides makes the speed sensor read wrong.',
    ],
    [
      known,
      'straight-grip',
      'The limit of grip is that of riding straight ahead on an even surface with the load moved by the drive alone: a bend takes its share of it, and so do a bump, paint, metal and leaves.',
    ],
  ];
}

function forceNotes(drive: Drive): readonly NoteRule[] {
  const known = drive.kind === 'force';
  const limited = drive.peakPower !== null;
  return [
    [
      known && limited,
      'ideal-ratio',
      'The drive is a force with a power limit: it takes for granted that a gear or belt always lets the engine give its peak power, and it has no gear changes.',
    ],
    [
      known,
      'linear-throttle',
      'Drive force grows in proportion to the throttle; a real throttle plate gives most of its torque in the first third of its travel.',
    ],
    [
      known,
      'part-throttle-force',
      `At part throttle${limited ? ', below the speed at which its power limit sets in,' : ''} the force of this drive does not rise as it slows, as that of many engines does: a locked throttle does worse here than on such an engine, because on a climb that takes more than the air drag gives back it has no steady speed to settle at.`,
    ],
    [
      drive.derate === 'naturally_aspirated',
      'altitude-correction',
      'Full-throttle force falls with air pressure and temperature by the correction of ISO 1585, taken for dry air; beyond factors of 0.93 to 1.07 that is extrapolation.',
    ],
  ];
}

function deviceNotes({ actuator, sensor }: Vehicle): readonly NoteRule[] {
  const pulses = sensor.pulses !== null;
  return [
    [
      actuator.slack > 0,
      'play-operator',
      'The slack of the actuator is pure lost motion: the throttle stays where it was left, without return spring, friction or stretch of a cable.',
    ],
    [
      pulses,
      'even-pulses',
      'The teeth of the speed sensor are evenly spaced on a round wheel of a fixed circumference: run-out, a missing tooth, tyre growth with speed and false pulses are left out.',
    ],
    [
      sensor.noise !== null,
      'white-noise',
      'The noise of the speed sensor is white and normal: no sample knows of the one before.',
    ],
  ];
}

function airNotes({ roadLoad }: Vehicle): readonly NoteRule[] {
  const words =
    roadLoad.yawGain === 0
      ? 'The drag area does not grow with crosswind.'
      : 'The drag area grows with the square of the yaw angle up to 0.44 rad and stays there beyond it.';
  return [[roadLoad.yawTable === null, 'yaw-formula', words]];
}
