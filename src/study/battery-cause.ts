import type { LoopPlan } from '../loop/plan.ts';
import type { BinRecord } from '../loop/result.ts';
import { cellOf } from '../numeric/interpolate.ts';
import { type SharesLeft, sharesAtCharge } from '../vehicle/at-charge.ts';
import { scaledDrive } from '../vehicle/scaled-drive.ts';
import { NEARLY_EMPTY } from './battery-places.ts';
import type { Derating, Hill, Replayed, Stretch } from './findings.ts';
import { chargeAt, type HillWindow } from './hill-window.ts';
import { nominalCourse, setSpeedAt } from './hold-course.ts';
import { without } from './limitations.ts';
import { quasiSteadySpeeds } from './quasi-steady.ts';
import { extremeDemand, type RangeCause } from './range-cause.ts';
import { isSettling } from './series-measures.ts';
import { atKm, inNewton, inPct } from './wording.ts';

/** Less than this share lost is no reason. */
const NOTICED = 0.01;

/** What a battery took of the drive on a hill in a candidate's run; places of the whole road [m]. */
export interface TiredBattery {
  readonly force: TiredSide;
  readonly regeneration: TiredSide;
}

interface TiredSide {
  /** Share left where it was least, and the mean from where any is lost to the end of the hill. */
  readonly least: number;
  readonly mean: number;
  /** Where any is lost first, and the end of the bin where it is least. */
  readonly since: number;
  readonly at: number;
  /** Charge there; null: not known. */
  readonly charge: number | null;
  readonly why: Derating;
}

/** What voltage, heat and charge took of force and regeneration on a hill; null: nothing to speak of. */
export function tiredBattery(
  { plan, result: { bins } }: Replayed,
  { from, until }: Pick<Hill, 'from' | 'until'>,
): TiredBattery | null {
  const { source } = plan.vehicle.drive;
  if (source?.kind !== 'battery' || bins.size === 0) return null;
  const sideOf = (lost: Float64Array, side: keyof SharesLeft): TiredSide => {
    const { worst, since, mean } = lostOver(bins, lost, from, until);
    const charge = chargeAt(source, bins, worst);
    const least = 1 - lost[worst];
    const cold = sharesAtCharge({ ...source, charge: charge ?? source.charge })[side];
    // Both factors multiply: the smaller one is what to name.
    const heat = cold > 0 ? least / cold : 1;
    const empty = least === 0 && charge !== null && charge <= NEARLY_EMPTY;
    const byCharge = side === 'force' ? (empty ? 'empty' : 'voltage') : 'full';
    const why = byCharge !== 'empty' && heat < cold ? 'heat' : byCharge;
    return { least, mean, since: bins.edge[since], at: bins.edge[worst + 1], charge, why };
  };
  const force = sideOf(bins.driveLost, 'force');
  const regeneration = sideOf(bins.regenerationLost, 'regeneration');
  return 1 - force.least > NOTICED || 1 - regeneration.least > NOTICED ? { force, regeneration } : null;
}

function lostOver(bins: BinRecord, lost: Float64Array, from: number, until: number) {
  const first = Math.min(cellOf(bins.edge, from), bins.size - 1);
  let worst = first;
  let since = -1;
  let sum = 0;
  let count = 0;
  for (let i = first; i < bins.size && (i === first || bins.edge[i] < until); i++) {
    if (lost[i] > lost[worst]) worst = i;
    if (since < 0 && lost[i] > NOTICED) since = i;
    if (since < 0) continue;
    sum += 1 - lost[i];
    count++;
  }
  return { worst, since: since < 0 ? first : since, mean: count > 0 ? sum / count : 1 };
}

/**
 * Whether a battery is why the force does not reach: with the share that it left in the run the demand is out of range,
 * and with a battery that is cold and full enough it would be in range, or short by no more than half as much. An empty
 * battery is always the reason.
 *
 * @param up more force is asked for than there is; else less than there can be
 */
export function batteryRange(
  windowed: LoopPlan,
  window: HillWindow,
  hill: Pick<Hill, 'from' | 'until'>,
  up: boolean,
  battery: TiredBattery,
): RangeCause | null {
  const side = up ? battery.force : battery.regeneration;
  if (1 - side.least <= NOTICED) return null;
  if (side.why === 'empty')
    return {
      cause: 'derating',
      derating: 'empty',
      why: `At ${atKm(side.at)} its battery is empty and the drive has no force.`,
    };
  const to = hill.until - window.start;
  const from = Math.max(hill.from, side.since) - window.start;
  const fresh = without(without(windowed, 'grip'), 'derating');
  const here = extremeDemand(tired(fresh, battery, 'least'), from, to, up, null);
  if (here.share <= 1) return null;
  const there = extremeDemand(fresh, here.at, here.at, up, null);
  if (Math.abs(there.available - here.available) < Math.abs(here.required - here.available) / 2) return null;
  const enough = there.share <= 1 ? ', which is enough' : '';
  const what = up ? 'full throttle' : 'the least throttle';
  return {
    cause: 'derating',
    derating: side.why,
    why: `At ${atKm(window.start + here.at)} the set speed needs ${inNewton(here.required)} and ${what} gives ${inNewton(here.available)}: ${lossWords(side, up)}. Cold and ${up ? 'at nominal voltage' : 'with room in the battery'} it would be ${inNewton(there.available)}${enough}.`,
  };
}

function lossWords({ why, least, charge }: TiredSide, up: boolean): string {
  const left = inPct(least);
  const at = charge === null ? '' : ` at ${inPct(charge)} of its charge`;
  if (why === 'heat') return `heat leaves ${left} of ${up ? 'the force' : 'the regeneration'}`;
  return up
    ? `the voltage of the battery${at} leaves ${left} of the force`
    : `the battery${at} takes ${left} of the regeneration`;
}

/** The plan with what the battery left in the run, for ever. */
function tired(plan: LoopPlan, battery: TiredBattery, which: 'least' | 'mean'): LoopPlan {
  const left = { force: battery.force[which], regeneration: battery.regeneration[which] };
  return { ...plan, vehicle: { ...plan.vehicle, drive: scaledDrive(plan.vehicle.drive, left) } };
}

/**
 * Largest departure from the set speed of the ideal hold over the hill, from where the battery takes anything and with
 * the mean of what it left there [m/s].
 */
export function tiredIdeal(
  windowed: LoopPlan,
  window: HillWindow,
  hill: Stretch & Pick<Hill, 'until'>,
  up: boolean,
  battery: TiredBattery,
): number {
  const { road, vehicle, rider, hold } = tired(without(windowed, 'derating'), battery, 'mean');
  const setSpeed = setSpeedAt(road, nominalCourse(road, hold, vehicle));
  const since = Math.max(hill.from, (up ? battery.force : battery.regeneration).since) - window.start;
  const a = cellOf(road.distance, Math.max(0, since));
  const b = Math.min(cellOf(road.distance, hill.until - window.start) + 1, road.size - 1);
  const plan = { road, vehicle, setSpeed, brakesAbove: rider.brakesAbove, throttle: null };
  const speeds = quasiSteadySpeeds(plan, a, Math.max(a, b), setSpeed[a]);
  let extreme = 0;
  for (let i = 0; i < speeds.length; i++) {
    if (isSettling(window.start + road.distance[a + i], window.course.settling)) continue;
    const change = speeds[i] - setSpeed[a + i];
    if (Math.abs(change) > Math.abs(extreme)) extreme = change;
  }
  return extreme;
}
