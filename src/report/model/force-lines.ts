import { fromPct } from '../../units/convert.ts';
import { derateFactor } from '../../vehicle/derating.ts';
import { forceRange } from '../../vehicle/drive-law.ts';
import { requiredForce } from '../../vehicle/resistance.ts';
import { fixed, signed, withUnit } from '../quantity.ts';
import type { View } from './view.ts';

/** Force over speed: what the drive gives, or what a grade asks. SI. */
export interface ForceLine {
  readonly kind: 'full' | 'least' | 'required';
  readonly words: string;
  /** For narrow drawings. */
  readonly short: string;
  readonly speed: readonly number[];
  readonly force: readonly number[];
}

export interface ForceLines {
  readonly lines: readonly ForceLine[];
  readonly topSpeed: number;
  /** Thin air takes so much that full throttle is drawn twice. */
  readonly derated: boolean;
}

const POINTS = 121;
const GRADES_PCT = [-8, -4, 0, 4, 8, 12] as const;

/** Knots of the route's thickest and thinnest air. */
function airExtremes(view: View): readonly [thick: number, thin: number] {
  const { airDensity, size } = view.result.road;
  let [thick, thin] = [0, 0];
  for (let i = 0; i < size; i++) {
    if (airDensity[i]! > airDensity[thick]!) thick = i;
    if (airDensity[i]! < airDensity[thin]!) thin = i;
  }
  return [thick, thin];
}

/**
 * What the drive has against what steady speed asks without wind: full throttle in the thickest and, for a drive that
 * altitude derates, the thinnest air of the route; the least force; and the grades, in the thickest air.
 */
export function forceLines(view: View): ForceLines {
  const { vehicle, road, hold } = view.result;
  const { drive } = vehicle;
  const speeds = [hold.setSpeed, hold.startSpeed, ...hold.changes.map((change) => change.setSpeed)];
  const topSpeed = Math.max(...speeds) * 1.6;
  const speed = Array.from({ length: POINTS }, (_, i) => (topSpeed * (i + 1)) / POINTS);
  const [thick, thin] = airExtremes(view);
  const factor = (knot: number) => derateFactor(drive, road.airDensity[knot]!, road.airTemperature[knot]!);
  const full = (knot: number, place: string): ForceLine => ({
    kind: 'full',
    words: place === '' ? 'full throttle' : `full throttle, ${place}`,
    short: place === '' ? 'full' : place,
    speed,
    force: speed.map((v) => forceRange(drive, drive.gear, v, factor(knot)).greatest),
  });
  const differs = Math.abs(factor(thick) - factor(thin)) > 0.005;
  const at = (knot: number) => withUnit(fixed(road.elevation[knot]!), 'm');
  const least: ForceLine = {
    kind: 'least',
    words: drive.throttleMin < 0 ? 'full regeneration' : 'closed throttle',
    short: drive.throttleMin < 0 ? 'regen.' : 'closed',
    speed,
    force: speed.map((v) => forceRange(drive, drive.gear, v, factor(thick)).least),
  };
  const required = GRADES_PCT.map((pct): ForceLine => {
    const words = withUnit(signed(pct), '%');
    return {
      kind: 'required',
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
  return {
    lines: [
      full(thick, differs ? at(thick) : ''),
      ...(differs ? [full(thin, at(thin))] : []),
      least,
      ...required,
    ],
    topSpeed,
    derated: differs,
  };
}
