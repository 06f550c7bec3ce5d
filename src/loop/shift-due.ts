import * as fit from './fittings.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';

/**
 * True where an automatic gearbox wants another gear at the start of this sample: the journey then starts the shift.
 * It only looks, so that it may be asked again. False while a shift or the rest after it is under way.
 */
export function shiftDue(machine: Machine): boolean {
  return gearsUp(machine) !== 0;
}

/**
 * Gear that the lines ask for: the next one up where the shaft turns faster than the upper line at the present throttle,
 * the next one down where it turns slower than the lower one, else the present one. Between the lines nothing happens.
 */
export function gearDue(machine: Machine): number {
  return machine.s[at.GEAR] + gearsUp(machine);
}

function gearsUp({ s, fittings }: Machine): number {
  const f = fittings.gearbox;
  const gear = s[at.GEAR];
  if (f.length === 0 || gear < 0 || s[at.SHIFT_PART] !== 0) return 0;
  const corners = f[fit.F_CORNERS] | 0;
  if (gear < f[fit.F_GEARS] - 1 && sideOfLine(s, f, fit.F_LINES + corners, corners) > 0) return 1;
  if (gear > 0 && sideOfLine(s, f, fit.F_LINES + 2 * corners, corners) < 0) return -1;
  return 0;
}

/** Sign of the shaft speed less a line at the present throttle; its ends hold on. */
function sideOfLine(s: Float64Array, f: Float64Array, line: number, corners: number): number {
  const first = fit.F_LINES;
  const throttle = s[at.PLATE];
  let value = f[line + corners - 1];
  if (throttle <= f[first]) value = f[line];
  else
    for (let i = 1; i < corners; i++) {
      const next = f[first + i];
      if (throttle > next) continue;
      const low = f[first + i - 1];
      value = f[line + i - 1] + ((throttle - low) / (next - low)) * (f[line + i] - f[line + i - 1]);
      break;
    }
  const shaftSpeed = s[at.RATIO] * s[at.SPEED];
  if (shaftSpeed > value) return 1;
  return shaftSpeed < value ? -1 : 0;
}
