import { cellIndex, lawAt } from './cell-law.ts';
import type { Drive } from './drive.ts';
import type { NoteRule } from './validity-note.ts';

/** What an engine, its gears and its belt take for granted. */
export function drivetrainNotes(drive: Drive): readonly NoteRule[] {
  const engine = drive.kind === 'engine' || drive.kind === 'variator';
  const belt = drive.belt !== null;
  const { kind: gearbox } = drive.gearbox;
  return [
    [
      engine,
      'steady-torque',
      'The engine gives the torque of its steady curves behind one first-order lag; filling of the manifold, the play and wind-up of chain and damper, and a cold engine are left out.',
    ],
    [
      engine,
      'steady-efficiency',
      'The driveline passes on the same share of the torque at every load and speed, and torque is straight between the points that are told.',
    ],
    [
      drive.kind === 'engine' && sharesAlike(drive),
      'part-throttle-share',
      'At part throttle the engine gives the same share of its torque at every engine speed, as a throttle by wire may do. Behind a throttle plate torque rises as the engine slows: there a locked throttle settles on hills on which it may find no steady speed here.',
    ],
    [
      engine,
      'static-governor',
      'Idle governor and rev limiter are fixed curves of torque over engine speed, without dynamics of their own.',
    ],
    [
      drive.withoutFuelCut !== null,
      'static-fuel-cut',
      'The fuel cut is a step of torque at its throttle: it has no hysteresis and no delay, and does not fade in or out with time.',
    ],
    [
      engine && !belt,
      'rigid-clutch',
      'In gear the clutch is rigid: no rider slips it, and below its stall speed the engine dies and the run ends.',
    ],
    [
      gearbox === 'clutch',
      'planned-shifts',
      'Gears change only where the plan says so: hold is cancelled, the clutch is open and the throttle closed for a stated time, then the rider gives the throttle that holds the speed and lets the hold resume.',
    ],
    [
      gearbox === 'automatic',
      'automatic-shifts',
      'The gearbox shifts by lines of engine speed over throttle: for a stated time there is no torque, then all of it at once; hill logic, kick-down and learning are left out.',
    ],
    [
      belt,
      'belt-at-rest',
      'Margins and quasi-steady figures take the belt as at rest on its line of engine speed; the run itself moves it, with one first-order lag, and lets the kinetic energy of the engine come and go with the ratio. The belt does not slip.',
    ],
    [
      belt,
      'centrifugal-clutch',
      'Below the shaft speed at which it locks, the clutch passes on the torque that the engine has there, with no drag once it is open; it neither heats nor grabs.',
    ],
  ];
}

/** Where the share is looked at, and how far it may move over all engine speeds to be called the same. */
const PART = 0.3;
const ALIKE = 0.05;

/** The share of the way from closed to full torque hardly depends on engine speed, from idle up. */
function sharesAlike(drive: Drive): boolean {
  const smooth = drive.withoutFuelCut ?? drive;
  let [least, most] = [1, 0];
  for (const w of smooth.speedEdges) {
    const [closed, part, full] = [0, PART, 1].map((x) => {
      const law = lawAt(smooth, cellIndex(smooth.throttleEdges, x), w, 1);
      return law.closed + x * law.gain;
    }) as [number, number, number];
    if (w < drive.idleSpeed || full <= closed) continue;
    least = Math.min(least, (part - closed) / (full - closed));
    most = Math.max(most, (part - closed) / (full - closed));
  }
  return most - least < ALIKE;
}
