import type { LoopPlan, RunStatus } from '../loop/plan.ts';
import type { BinRecord } from '../loop/result.ts';
import { runLoop } from '../loop/run-loop.ts';
import { cellOf } from '../numeric/interpolate.ts';
import type { Road } from '../road/road.ts';
import type { EnergySource } from '../vehicle/energy-source.ts';
import type { Demand, Hill, Replayed } from './findings.ts';
import { inGear } from './gear-course.ts';
import type { HoldCourse } from './hold-course.ts';
import { windowPlan } from './road-window.ts';

/** A settled start lies this far before the hill, where the road has it [m]. */
const NEAREST_START = 1000;
const FARTHEST_START = 1500;

/**
 * A hill cut out of the road, for replays that start settled before it. Horizontal distances of the whole road [m].
 *
 * The window is a road of its own that begins 1 to 1.5 km before the hill, and a plan over it starts settled at the
 * set speed there. That equals a replay of the window on the whole road: the loop meets nothing but grade, wind and air
 * at its station, and all of these are the same function of the way from the window's start. It costs the window's
 * length only. It begins in the gear and with the charge that the run had there. What it leaves out is the state in which the run came to the window, which a settled loop has forgotten
 * in a kilometre; where it has not, the window is lengthened (windowThatShows).
 */
export interface HillWindow {
  readonly start: number;
  readonly from: number;
  readonly until: number;
  /** The candidate's: where a change of set speed is being followed, nothing is judged. */
  readonly course: HoldCourse;
  /** What the candidate came there with: gear of a gearbox that shifts by itself, charge of a battery; null: as the plan has it. */
  readonly entry: WindowEntry;
}

export interface WindowEntry {
  readonly gear: number | null;
  readonly charge: number | null;
}
const AS_PLANNED: WindowEntry = { gear: null, charge: null };

/** What a run did between a hill's beginning and the end of what it is answerable for. */
export interface HillPassage {
  readonly status: RunStatus;
  /** Least and greatest error, 0 where it never was on that side [m/s]. */
  readonly low: number;
  readonly high: number;
}

/** Window of a hill: its start is where the demand is least between 1 and 1.5 km before the hill, or the road's start. */
export function hillWindow(
  hill: Pick<Hill, 'from' | 'until'>,
  road: Road,
  demand: Demand,
  course: HoldCourse,
): HillWindow {
  const least = Math.max(0, hill.from - FARTHEST_START);
  const most = Math.max(0, hill.from - NEAREST_START);
  let start = least;
  let share = Number.POSITIVE_INFINITY;
  for (let i = cellOf(road.distance, least); i < road.size && road.distance[i] <= most; i++) {
    if (road.distance[i] < least || !(Math.abs(demand.share[i]) < share)) continue;
    share = Math.abs(demand.share[i]);
    start = road.distance[i];
  }
  return { start, from: hill.from, until: hill.until, course, entry: AS_PLANNED };
}

/** The window begun at another place, with what a run came there with. Heat of a battery is not in it: it begins cold. */
export function windowFrom(window: HillWindow, start: number, { plan, result }: Replayed): HillWindow {
  const { drive } = plan.vehicle;
  const { bins } = result;
  const bin = bins.size === 0 ? 0 : Math.min(cellOf(bins.edge, start), bins.size - 1);
  return {
    ...window,
    start,
    entry: {
      gear: drive.gearbox.kind === 'automatic' && bins.size > 0 ? bins.gear[bin] : null,
      charge: chargeAt(drive.source, bins, bin),
    },
  };
}

/** Charge at the beginning of a bin; null: no battery, or its capacity is not known. */
export function chargeAt(source: EnergySource | null, { drawn }: BinRecord, bin: number): number | null {
  if (source?.kind !== 'battery' || source.capacity === null) return null;
  let left = source.charge * source.capacity;
  for (let i = 0; i < bin; i++) left -= drawn[i];
  return Math.min(1, Math.max(0, left / source.capacity));
}

/** The candidate's plan over the window, started settled. Limitations and levers are applied to this. */
export function planOverWindow(plan: LoopPlan, window: HillWindow): LoopPlan {
  const windowed = windowPlan(plan, window.start, window.until, window.course);
  const { gear, charge } = window.entry;
  const vehicle = gear === null ? windowed.vehicle : inGear(windowed.vehicle, gear);
  const { source } = vehicle.drive;
  if (charge === null || source?.kind !== 'battery') return { ...windowed, vehicle };
  return { ...windowed, vehicle: { ...vehicle, drive: { ...vehicle.drive, source: { ...source, charge } } } };
}

/** Replays a window's plan and looks at the hill in it, bins of which any part lies on the hill counted whole. */
export function passHill(windowed: LoopPlan, window: HillWindow): HillPassage {
  const { status, bins } = runLoop(windowed);
  let low = 0;
  let high = 0;
  for (let i = 0; i < bins.size; i++) {
    const from = window.start + bins.edge[i];
    const to = window.start + bins.edge[i + 1];
    if (to <= window.from || window.course.settling.some((s) => from < s.to && to > s.from)) continue;
    low = Math.min(low, bins.errorMin[i]);
    high = Math.max(high, bins.errorMax[i]);
  }
  return { status, low, high };
}

/** How far outside of the band a passage was [m/s]; infinite for a run that ended on the way. */
export function excessOf(passage: HillPassage, band: number): number {
  if (passage.status !== 'completed') return Number.POSITIVE_INFINITY;
  return Math.max(0, passage.high - band, -passage.low - band);
}

/** The run got over the hill and stayed inside the band. */
export const holds = (passage: HillPassage, band: number): boolean => excessOf(passage, band) === 0;
