import { DEFINED_HERE, type FigureRow } from './figure-row.ts';
import {
  commandStep,
  endsByRule,
  engageSag,
  resumeOvershoot,
  resumeSettling,
  timeOff,
} from './hold-measures.ts';

const row = (
  name: string,
  label: string,
  unit: string,
  weight: FigureRow['weight'],
  definition: string,
  measure: FigureRow['measure'],
): FigureRow => ({
  name,
  label,
  unit,
  weight,
  takesBand: false,
  better: 'lower',
  definition,
  source: DEFINED_HERE,
  wholeRoad: true,
  measure,
});

/** How hold takes over, comes back and ends. Of the whole road, also for `holdable`: what they are about is no hill's doing. */
export const HOLD_ROWS: readonly FigureRow[] = [
  row(
    'engage_sag_kmh',
    'Sag at engaging',
    'km/h',
    'event',
    'Furthest below the set speed behind an engaging, over the whole time that it is followed: to what comes next on the way, to where the drive cannot hold the set speed, or for a minute; the worst of all. Also for holdable, all of the road.',
    engageSag,
  ),
  row(
    'resume_overshoot_kmh',
    'Overshoot of a resume',
    'km/h',
    'event',
    'Furthest above the set speed behind a resume, from where the reference has arrived at it, over the whole time that it is followed: to what comes next on the way, to where the drive cannot hold the set speed, or for a minute; the worst of all. Also for holdable, all of the road.',
    resumeOvershoot,
  ),
  row(
    'resume_settling_s',
    'Settling of a resume',
    's',
    'event',
    'From a resume to the start of the first 3 s within 1 km/h of the set speed, as a recovery is measured; the longest of all. A slow loop may pass through so and go on: how far is in the overshoot. Also for holdable, all of the road.',
    resumeSettling,
  ),
  row(
    'command_step_pct',
    'Step of the command',
    '%',
    'event',
    'Jump of the throttle command, within its limits, from the sample before to the sample at which hold takes over: at engaging, at a resume, and where it is back behind an override; the greatest of all. 0 is bumpless. Also for holdable, all of the road.',
    commandStep,
  ),
  row(
    'hold_off_s',
    'Hold off',
    's',
    'time',
    "Time with hold off, by the rider's doing or by a rule of the unit; shifts are counted apart. Also for holdable, all of the road.",
    timeOff,
  ),
  row(
    'hold_off_events',
    'Holds ended by a rule',
    'events',
    'event',
    'How often a rule of the speed-hold unit ended hold: too slow, too fast, below its lowest speed, a sensor not believed. Also for holdable, all of the road.',
    endsByRule,
  ),
];
