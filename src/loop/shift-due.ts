import * as fit from './fittings.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';

/**
 * True where an automatic gearbox wants another gear at the start of this sample: the journey then starts the shift.
 * It only looks, so that it may be asked again. False while a shift or the rest after it is under way.
 */
export function shiftDue(machine: Machine): boolean {
  return gearDue(machine) !== machine.s[at.GEAR];
}

/**
 * Gear that the lines ask for: the next one up where the shaft turns faster than the upper line at the present throttle,
 * the next one down where it turns slower than the lower one, else the present one. Between the lines nothing happens.
 */
export function gearDue({ s, fittings }: Machine): number {
  const f = fittings.gearbox;
  const gear = s[at.GEAR];
  if (f.length === 0 || gear < 0 || s[at.SHIFT_PART] !== 0) return gear;
  const shaftSpeed = s[at.RATIO] * s[at.SPEED];
  const throttle = s[at.PLATE];
  const corners = f[fit.F_CORNERS];
  if (gear < f[fit.F_GEARS] - 1 && shaftSpeed > lineAt(f, fit.F_LINES + corners, corners, throttle))
    return gear + 1;
  if (gear > 0 && shaftSpeed < lineAt(f, fit.F_LINES + 2 * corners, corners, throttle)) return gear - 1;
  return gear;
}

/** A line over throttle; its ends hold on. */
function lineAt(f: Float64Array, line: number, corners: number, throttle: number): number {
  const first = fit.F_LINES;
  if (throttle <= f[first]) return f[line];
  for (let i = 1; i < corners; i++) {
    const next = f[first + i];
    if (throttle > next) continue;
    const low = f[first + i - 1];
    return f[line + i - 1] + ((throttle - low) / (next - low)) * (f[line + i] - f[line + i - 1]);
  }
  return f[line + corners - 1];
}
