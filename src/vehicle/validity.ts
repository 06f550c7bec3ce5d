import type { Vehicle } from './vehicle.ts';

/** Something the vehicle model leaves out or takes for granted: a whole sentence for the report. */
export interface ValidityNote {
  /** Stable, kebab-case. */
  readonly code: string;
  readonly words: string;
}

const ALWAYS: readonly ValidityNote[] = [
  {
    code: 'straight-ahead',
    words:
      'The vehicle is a point mass that rides straight ahead: lean, steering, cornering drag and the line through a bend are left out.',
  },
  {
    code: 'no-slip',
    words: 'The driven wheel does not slip, and no limit of grip, wheel lift or load transfer is checked.',
  },
  {
    code: 'steady-tyres',
    words: 'Rolling resistance does not change with tyre temperature, pressure, wet road or surface.',
  },
  {
    code: 'steady-air',
    words:
      'Drag follows the air at once: gusts within the length of the vehicle, passing traffic and a change of posture are left out.',
  },
  {
    code: 'ideal-brake',
    words:
      'The rider by the brake waits for no reaction time: overspeed beyond what is allowed goes with a time constant of 0.5 s, by at most 3 m/s² of braking; no brake heats or fades.',
  },
  {
    code: 'no-cut-outs',
    words: "The rider's own throttle, and the cut-outs by brake, clutch and stand, are outside of the model.",
  },
];

/**
 * Plain statements of what the model of this vehicle leaves out or takes for granted.
 *
 * @returns general statements first, then those of its drive and road load
 */
export function validityNotes(vehicle: Vehicle): readonly ValidityNote[] {
  const { drive, roadLoad } = vehicle;
  const notes = [...ALWAYS];
  if (drive.peakPower !== null && drive.kind === 'force')
    notes.push({
      code: 'ideal-ratio',
      words:
        'The drive is a force with a power limit: it takes for granted that a gear or belt always lets the engine give its peak power, and it has no gear changes.',
    });
  if (drive.kind === 'force')
    notes.push({
      code: 'linear-throttle',
      words:
        'Drive force grows in proportion to the throttle; a real throttle plate gives most of its torque in the first third of its travel.',
    });
  if (drive.kind === 'force')
    notes.push({
      code: 'part-throttle-force',
      words: `At part throttle${drive.peakPower === null ? '' : ', below the speed at which its power limit sets in,'} the force of this drive does not rise as it slows, as that of many engines does: a locked throttle does worse here than on such an engine, because on a climb that takes more than the air drag gives back it has no steady speed to settle at.`,
    });
  if (drive.derate === 'naturally_aspirated')
    notes.push({
      code: 'altitude-correction',
      words:
        'Full-throttle force falls with air pressure and temperature by the correction of ISO 1585, taken for dry air; beyond factors of 0.93 to 1.07 that is extrapolation.',
    });
  if (drive.kind === 'electric')
    notes.push({
      code: 'steady-battery',
      words:
        'The electric drive keeps its envelope: state of charge, voltage, temperature and derating of motor and battery are left out, and regeneration never meets a full battery.',
    });
  if (drive.source?.kind === 'battery')
    notes.push({
      code: 'constant-efficiency',
      words: 'Battery energy uses one constant efficiency for driving and one for regeneration.',
    });
  if (roadLoad.yawTable === null)
    notes.push({
      code: 'yaw-formula',
      words:
        roadLoad.yawGain === 0
          ? 'The drag area does not grow with crosswind.'
          : 'The drag area grows with the square of the yaw angle up to 0.44 rad and stays there beyond it.',
    });
  return notes;
}
