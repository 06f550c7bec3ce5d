import type { GainSchedule, ScheduleRow } from './setup.ts';

/**
 * Writes the gains in force at a speed in a gear: `out` becomes [kp, ki, kd].
 *
 * @param gear index into the drive's gears
 * @param speed [m/s]
 */
export type GainsAt = (gear: number, speed: number, out: Float64Array) => void;

/** A schedule in a gear without a row holds the gains as they are. */
const PLAIN: Pick<ScheduleRow, 'proportional' | 'integral'> = {
  proportional: new Float64Array(0),
  integral: new Float64Array(0),
};

/** Compiles gains and their schedule, one row a gear. Without a schedule, or in a gear without a row, the gains are constant. */
export function gainsAt(
  gains: { readonly kp: number; readonly ki: number; readonly kd: number },
  schedule: GainSchedule | null,
  gears: number,
): GainsAt {
  const constants = Float64Array.of(gains.kp, gains.ki, gains.kd);
  if (schedule === null) return (_gear, _speed, out) => out.set(constants);
  const { speed: corners } = schedule;
  const count = corners.length;
  const rowOf = (gear: number) =>
    schedule.rows.find((row) => row.gear === gear) ?? schedule.rows.find((row) => row.gear === null) ?? PLAIN;
  const factors = new Float64Array(2 * count * gears);
  for (let gear = 0; gear < gears; gear++) {
    const { proportional, integral } = rowOf(gear);
    for (let i = 0; i < count; i++) {
      factors[2 * (count * gear + i)] = proportional[i] ?? 1;
      factors[2 * (count * gear + i) + 1] = integral[i] ?? 1;
    }
  }
  return (gear, speed, out) => {
    let i = 1;
    while (i < count - 1 && speed > corners[i]) i++;
    const far = count > 1 ? i : 0;
    const near = count > 1 ? i - 1 : 0;
    const width = corners[far] - corners[near];
    const along = width > 0 ? (speed - corners[near]) / width : 0;
    const share = Math.min(Math.max(along, 0), 1);
    const row = 2 * count * (gear < gears ? gear : gears - 1);
    const proportional = factors[row + 2 * near] + share * (factors[row + 2 * far] - factors[row + 2 * near]);
    const integral =
      factors[row + 2 * near + 1] + share * (factors[row + 2 * far + 1] - factors[row + 2 * near + 1]);
    out[0] = constants[0] * proportional;
    out[1] = constants[1] * integral;
    out[2] = constants[2] * proportional;
  };
}
