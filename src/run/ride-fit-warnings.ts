import type { RideFit } from '../identify/ride.ts';
import type { Warning } from '../problems/warning.ts';
import { toPct } from '../units/convert.ts';

const WIDE = 0.15;
const TIED = 0.95;
/** Share of a ride that is left out, beyond which it should be told. */
const LARGE_PART = 0.3;
/** Closed share of a segment below which it counts as driven. */
const MOSTLY_DRIVEN = 0.1;
/** Share of the work of the drive that no drag explains. */
const UNLIKE = 0.2;
/** Disagreement of two estimates, in half-widths of their intervals together. */
const APART = 1;

/** What the user should know of a fit to a ride. */
export function rideFitWarnings(
  fit: RideFit,
  { byPower, airAssumed }: { readonly byPower: boolean; readonly airAssumed: boolean },
): readonly Warning[] {
  const warnings: Warning[] = [];
  const add = (code: string, message: string): void => {
    warnings.push({ code, message });
  };
  if (airAssumed)
    add(
      'air-assumed',
      'Temperature or pressure of the air was not given and is that of the standard atmosphere: 10 K or 35 hPa of error change the drag area by 3.5 %.',
    );
  if (!byPower)
    add(
      'drive-in-the-fit',
      "The force at the wheel is that of the vehicle's drive at the logged throttle: what the drive is wrong by goes into the fitted numbers. A logged power at the wheel has no such error.",
    );
  const driven = fit.segments.filter(({ closed }) => closed < MOSTLY_DRIVEN);
  const length = driven.reduce((sum, { from, to }) => sum + to - from, 0);
  const [given, over] = driven.reduce(
    ([all, rest], one) => [all! + one.given, rest! + one.given - one.needed],
    [0, 0],
  );
  if (!byPower && Math.abs(over!) > UNLIKE * Math.abs(given!))
    add(
      'drive-apart',
      `Where it was driven, the logged throttle gave ${Math.abs(over! / length).toFixed(0)} N ${over! > 0 ? 'more' : 'less'} than the vehicle needed, of ${(given! / length).toFixed(0)} N: look at the drive of the file (its curves, its throttle plate, the gear) before its drag.`,
    );
  for (const { name, estimate } of fit.unknowns) {
    const half = (estimate.high - estimate.low) / 2 / estimate.value;
    if (half >= 1)
      add(
        'not-told',
        `${name} is not told by this ride: its interval takes in zero, and the file keeps what it had.`,
      );
    else if (half > WIDE)
      add(
        'wide-interval',
        `${name} is known to ±${toPct(half).toFixed(0)} % only: a longer ride at more than one speed makes it better, or a coast-down.`,
      );
  }
  if (fit.correlation !== null && Math.abs(fit.correlation) > TIED)
    add(
      'tied-coefficients',
      `The first two numbers are tied (correlation ${fit.correlation.toFixed(2)}): the ride has too little of other speeds to tell them apart.`,
    );
  const left = 1 - fit.fitted / fit.length;
  if (left > LARGE_PART)
    add(
      'left-out',
      `${toPct(left).toFixed(0)} % of the ride is left out of the fit: there the drive gave nothing, and a brake may have been on.`,
    );
  const cda = fit.unknowns.find(({ name }) => name === 'cda_m2');
  if (cda !== undefined && fit.closure !== null) {
    const gap = Math.abs(fit.closure.cda.value - cda.estimate.value);
    const room = (cda.estimate.high - cda.estimate.low + fit.closure.cda.high - fit.closure.cda.low) / 2;
    if (gap > APART * room)
      add(
        'closure-apart',
        'The elevation closure gives another drag area than the balance of energy: brakes, a drifting height or a wind that nobody logged are in one of them.',
      );
  }
  return warnings;
}
