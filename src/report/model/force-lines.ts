import type { Road } from '../../road/road.ts';
import { fromPct } from '../../units/convert.ts';
import { atCharge } from '../../vehicle/at-charge.ts';
import { derateFactor } from '../../vehicle/derating.ts';
import type { Drive } from '../../vehicle/drive.ts';
import { requiredForce } from '../../vehicle/resistance.ts';
import { gripForce } from '../../vehicle/traction.ts';
import { turningRange } from '../../vehicle/turning-range.ts';
import type { Vehicle } from '../../vehicle/vehicle.ts';
import { fixed, signed, withUnit } from '../quantity.ts';
import { endForces } from './end-forces.ts';
import { hasGears } from './gear-words.ts';
import type { View } from './view.ts';

/** Force over speed: what the drive gives, what the tyre passes on, or what a grade asks. SI. */
export interface ForceLine {
  /** `full`: full throttle in the thickest air; `thin`: in the thinnest; `ratio`: full throttle of a belt held at an end of its ratios. */
  readonly kind: 'full' | 'thin' | 'least' | 'ratio' | 'grip' | 'required';
  /** Index into the drive's gears; null for what no gear has a part in. */
  readonly gear: number | null;
  /** Of the engaged gear. */
  readonly engaged: boolean;
  readonly words: string;
  /** For narrow drawings. */
  readonly short: string;
  readonly speed: readonly number[];
  readonly force: readonly number[];
}

export interface ForceLines {
  readonly lines: readonly ForceLine[];
  readonly topSpeed: number;
  /** Thin air takes so much that full throttle is drawn twice: the elevations of the two [m]. */
  readonly airs: readonly [thick: number, thin: number] | null;
}

const POINTS = 121;
const GRADES_PCT = [-8, -4, 0, 4, 8, 12] as const;
/** Air that takes less than this share makes no second line. */
const LEAST_DIFFERENCE = 0.005;

/** Knots of the route's thickest and thinnest air. */
export function airExtremes({ airDensity, size }: Road): readonly [thick: number, thin: number] {
  let [thick, thin] = [0, 0];
  for (let i = 0; i < size; i++) {
    if (airDensity[i]! > airDensity[thick]!) thick = i;
    if (airDensity[i]! < airDensity[thin]!) thin = i;
  }
  return [thick, thin];
}

/** A belt held at one ratio. */
const heldAt = (drive: Drive, ratio: number): Drive => ({
  ...drive,
  belt: null,
  gears: [{ ratio, inertia: 0 }],
  gear: 0,
});

/**
 * What the drive has against what steady speed asks without wind: full throttle of each gear in the thickest and, for a
 * drive that altitude derates, the thinnest air of the route; the least force; both ends of a belt's ratios; the grip of
 * the driven wheel on the level; and the grades, in the thickest air. A gear's lines begin where it can turn at all
 * and end at its rev limit.
 */
export function forceLines(view: View): ForceLines {
  const { road, hold } = view.result;
  const vehicle = atCharge(view.result.vehicle);
  const { drive } = vehicle;
  const speeds = [hold.setSpeed, hold.startSpeed, ...hold.changes.map((change) => change.setSpeed)];
  const topSpeed = Math.max(...speeds) * 1.6;
  const [thick, thin] = airExtremes(road);
  const factor = (knot: number) => derateFactor(drive, road.airDensity[knot]!, road.airTemperature[knot]!);
  const differs = Math.abs(factor(thick) - factor(thin)) > LEAST_DIFFERENCE;
  const place = (knot: number) => withUnit(fixed(road.elevation[knot]!), 'm');
  const many = hasGears(drive);
  const line = (
    of: Pick<ForceLine, 'kind' | 'gear' | 'words' | 'short'>,
    from: Drive,
    force: (speed: number) => number,
  ): ForceLine[] => {
    const speed = speedsOf(from, of.gear === null ? 0 : Math.min(of.gear, from.gears.length - 1), topSpeed);
    return speed.length === 0
      ? []
      : [{ ...of, engaged: of.gear === drive.gear, speed, force: speed.map(force) }];
  };
  const inGear = (gear: number): ForceLine[] => {
    const name = many ? (gear === drive.gear ? `gear ${gear + 1}, engaged` : `gear ${gear + 1}`) : '';
    const at = (knot: number) => (differs ? place(knot) : '');
    const words = [many ? name : 'full throttle', many ? '' : at(thick)].filter((part) => part !== '');
    const leastName = drive.throttleMin < 0 ? 'full regeneration' : 'closed throttle';
    const engaged = gear === drive.gear;
    return [
      ...line(
        { kind: 'full', gear, words: words.join(', '), short: many ? String(gear + 1) : at(thick) || 'full' },
        drive,
        (v) => endForces(vehicle, gear, v, factor(thick)).greatest,
      ),
      ...(differs
        ? line(
            {
              kind: 'thin',
              gear,
              words: many ? `at ${place(thin)}` : `full throttle, ${place(thin)}`,
              short: place(thin),
            },
            drive,
            (v) => endForces(vehicle, gear, v, factor(thin)).greatest,
          )
        : []),
      ...(engaged || drive.belt === null
        ? line(
            {
              kind: 'least',
              gear,
              words: leastName,
              short: drive.throttleMin < 0 ? 'regen.' : 'closed',
            },
            drive,
            (v) => endForces(vehicle, gear, v, factor(thick)).least,
          )
        : []),
    ];
  };
  const others = drive.gears.map((_, gear) => gear).filter((gear) => gear !== drive.gear);
  const limits = (drive.belt === null ? [] : (['greatest', 'least'] as const)).flatMap((end) => {
    const held = heldAt(drive, drive.belt![end]);
    const words = end === 'greatest' ? 'shortest ratio' : 'longest ratio';
    return line(
      { kind: 'ratio', gear: null, words, short: end === 'greatest' ? 'shortest' : 'longest' },
      held,
      (v) => endForces({ ...vehicle, drive: held }, 0, v, factor(thick)).greatest,
    );
  });
  return {
    lines: [
      ...inGear(drive.gear),
      ...others.flatMap(inGear),
      ...limits,
      ...gripLines(vehicle, topSpeed),
      ...requiredLines(view, topSpeed, thick),
    ],
    topSpeed,
    airs: differs ? [road.elevation[thick]!, road.elevation[thin]!] : null,
  };
}

/** Speeds of a line from where the gear can turn to where its limiter begins; none where that is beyond the plot. */
function speedsOf(drive: Drive, gear: number, topSpeed: number): readonly number[] {
  const { least, greatest } = turningRange(drive, gear);
  const [from, to] = [Math.max(least, topSpeed / POINTS), Math.min(greatest, topSpeed)];
  return from < to ? Array.from({ length: POINTS }, (_, i) => from + ((to - from) * i) / (POINTS - 1)) : [];
}

function gripLines(vehicle: Vehicle, topSpeed: number): ForceLine[] {
  const grip = gripForce(vehicle, 0);
  if (grip === null) return [];
  const mu = vehicle.traction!.friction;
  const across = (force: number, words: string, short: string): ForceLine[] =>
    Number.isFinite(force)
      ? [
          {
            kind: 'grip',
            gear: null,
            engaged: false,
            words,
            short,
            speed: [0, topSpeed],
            force: [force, force],
          },
        ]
      : [];
  return [
    ...across(grip.greatest, `grip of the tyre, µ ${mu}`, 'grip'),
    ...across(grip.least, 'grip, holding back', 'grip'),
    ...(grip.lift < grip.greatest ? across(grip.lift, 'front wheel lifts', 'lift') : []),
  ];
}

function requiredLines(view: View, topSpeed: number, thick: number): ForceLine[] {
  const { vehicle, road } = view.result;
  const speed = Array.from({ length: POINTS }, (_, i) => (topSpeed * (i + 1)) / POINTS);
  return GRADES_PCT.map((pct): ForceLine => {
    const words = withUnit(signed(pct), '%');
    return {
      kind: 'required',
      gear: null,
      engaged: false,
      words,
      short: words,
      speed,
      force: speed.map((v) =>
        requiredForce(vehicle, v, {
          grade: fromPct(pct),
          headwind: 0,
          crosswind: 0,
          airDensity: road.airDensity[thick]!,
          airTemperature: road.airTemperature[thick]!,
        }),
      ),
    };
  });
}
