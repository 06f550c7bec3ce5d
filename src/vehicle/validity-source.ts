import type { Drive } from './drive.ts';
import type { NoteRule } from './validity-note.ts';

/** What the account of fuel or battery, and what limits an electric drive, take for granted. */
export function sourceNotes({ kind, source, regenerationForce }: Drive): readonly NoteRule[] {
  const electric = kind === 'electric';
  const battery = source?.kind === 'battery' ? source : null;
  const followed = battery !== null && battery.capacity !== null;
  const sags = battery !== null && battery.sag !== null;
  const heats = battery !== null && battery.heating !== null;
  const regenerates = regenerationForce > 0;
  const steady = [
    ...(followed ? [] : ['the state of charge']),
    ...(sags ? [] : ['the voltage']),
    'the temperature of the battery',
    ...(heats ? [] : ['the heat of motor and controller']),
  ];
  return [
    [
      source?.kind === 'fuel',
      'steady-fuel',
      'Fuel is that of a warm engine at steady speed and torque, by a Willans line or a table of specific consumption: cold start, enrichment and the time a fuel cut takes are left out.',
    ],
    [
      electric,
      'steady-battery',
      `The electric drive keeps its envelope whatever ${steady.slice(0, -1).join(', ')}${steady.length > 1 ? ' or ' : ''}${steady.at(-1)}.`,
    ],
    [
      electric && regenerates && (battery === null || battery.acceptance === null),
      'never-full',
      'Regeneration never meets a full battery.',
    ],
    [
      sags,
      'battery-voltage',
      'The voltage of the battery follows charge and current at once, by one resistance; it shrinks the whole envelope of the drive, as it is at peak power. The loss in that resistance is reckoned at the voltage of the charge at the start.',
    ],
    [
      heats,
      'one-heat',
      'Motor and controller are one body that warms with the square of the wheel power, from cold at the start, whatever the air and the speed; torque at standstill does not heat it.',
    ],
    [
      battery !== null,
      'battery-account',
      'Battery energy follows speed and force at once, by constant efficiencies or a map of losses; age, cold and what lamps and instruments draw are left out.',
    ],
  ];
}
