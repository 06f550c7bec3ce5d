import type { BinRecord } from '../loop/result.ts';
import { cellOf } from '../numeric/interpolate.ts';
import { valueAt } from '../road/lookup.ts';
import type { Road } from '../road/road.ts';
import { STANDARD_GRAVITY } from '../units/constants.ts';

import type { Demand, HillKind, Replayed, Stretch } from './findings.ts';
import { courseOfRun } from './hold-course.ts';
import { turningPlaces } from './turning-places.ts';

/** Gaps shorter than this are bridged [s at the set speed]. */
const BRIDGED = 5;
/** What follows a hill for this long still belongs to it [s at the set speed]. */
const AFTERMATH = 15;
/** Time at a limit that counts, in a bin or on a hill [s]. */
export const AT_LIMIT = 0.2;
/** A hill is followed to its foot and its top while the grade goes on at this, for at most this far [m]. */
const STILL_A_HILL = 0.01;
const FARTHEST = 1500;
/** Ground is level within this share of the height that the set speed is worth. */
const LEVEL = 0.25;
/** One stretch out of band, however long, is cut into at most so many hills. */
const MOST_PIECES = 40;

export interface HillStretch extends Stretch {
  readonly kind: HillKind;
  /** See Hill.until. */
  readonly until: number;
}

interface Part extends Stretch {
  /** 1: more force than there is; -1: less than there can be; 0: only a candidate's own doing. */
  readonly nature: -1 | 0 | 1;
}

/** A bin in which a candidate left its band or sat on a limit, outside of what a change of set speed explains. */
export function marksBin(bins: BinRecord, i: number, band: number, settling: readonly Stretch[]): boolean {
  const out = bins.errorMax[i] > band || -bins.errorMin[i] > band;
  const atLimit = bins.timeUpper[i] + bins.timeLower[i] > AT_LIMIT;
  if (!out && !atLimit) return false;
  return !settling.some(({ from, to }) => bins.edge[i] < to && bins.edge[i + 1] > from);
}

/**
 * Stretches shared by all candidates. First those of the road itself: where demand leaves the range, followed to the
 * foot and the top of the road's own slope; they are the same whoever rides. What is left of where a candidate that
 * regulates leaves its band or sits on a limit is cut at the crests and the feet between, so that a hill is one climb
 * or one descent. Locked throttles do not count: they would make hills of the whole road.
 */
export function hillStretches(
  road: Road,
  demand: Demand,
  replayed: readonly Replayed[],
  band: number,
): HillStretch[] {
  const demanded = growToHill(road, demandParts(road, demand), () => true);
  const cores = joinTouching(road, closeGaps(road, demand, demanded));
  const marks = replayed
    .filter(({ plan }) => plan.controller.kind !== 'locked')
    .flatMap((one) => recordRuns(one.result.bins, band, courseOfRun(one).settling));
  const own = outside(cores, joinRuns(road, demand, marks))
    .filter((run) => !isApproach(road, demand, cores, run))
    .flatMap((run) => oneWay(road, demand, run));
  const parts = [...cores, ...own.map((run): Part => ({ ...run, nature: 0 }))].sort(
    (a, b) => a.from - b.from,
  );
  const grown = growToHill(road, parts, ({ nature }) => nature === 0);
  return answerable(road, demand, joinTouching(road, grown));
}

/**
 * Gives each hill the end of what it is answerable for. What a candidate does right behind a hill that the demand made
 * belongs to that hill. So does a short stretch on level ground, out of band by a candidate's own doing and beginning
 * within the aftermath of any hill: an overshoot is no hill of its own.
 */
function answerable(road: Road, demand: Demand, parts: readonly Part[]): HillStretch[] {
  const end = road.distance[road.size - 1];
  const hills: { part: Part; until: number }[] = [];
  for (const part of parts) {
    const last = hills.at(-1);
    const aftermath = AFTERMATH * demand.setSpeed[cellOf(road.distance, part.to)];
    let from = part.from;
    if (last !== undefined && from <= last.until && part.nature === 0) {
      if (slopeOf(road, part) === 0 && part.to - from <= 2 * aftermath) {
        last.until = Math.max(last.until, part.to);
        continue;
      }
      if (last.part.nature !== 0) from = last.until;
    }
    if (from >= part.to) continue;
    if (last !== undefined) last.until = Math.min(last.until, from);
    hills.push({ part: { ...part, from }, until: Math.min(end, part.to + aftermath) });
  }
  return hills.map(({ part, until }) => ({
    from: part.from,
    to: part.to,
    until: Math.max(part.to, until),
    kind: kindOf(road, demand, part),
  }));
}

/** Where demand leaves the range, a part for each direction; short gaps bridged. */
function demandParts(road: Road, demand: Demand): Part[] {
  const natureAt = (i: number) => (demand.share[i] > 1 ? 1 : demand.share[i] < -1 ? -1 : 0);
  const parts: { from: number; to: number; nature: -1 | 1 }[] = [];
  for (let i = 0; i + 1 < road.size; i++) {
    if (!(road.distance[i + 1] > road.distance[i])) continue;
    // A cell is out where both of its ends are; a knot alone, where its two neighbours' cells meet, has no length.
    const nature = natureAt(i);
    if (nature === 0 || natureAt(i + 1) === 0) continue;
    const last = parts.at(-1);
    const gap = BRIDGED * demand.setSpeed[i];
    if (last?.nature === nature && road.distance[i] <= last.to + gap) last.to = road.distance[i + 1];
    else parts.push({ from: road.distance[i], to: road.distance[i + 1], nature });
  }
  return parts;
}

/** Bins that make hills. What is left of a settling that took longer than is granted, without a break, is its aftermath and makes none. */
function recordRuns(bins: BinRecord, band: number, settling: readonly Stretch[]): Stretch[] {
  const runs: Stretch[] = [];
  let aftermath = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < bins.size; i++) {
    const [from, to] = [bins.edge[i], bins.edge[i + 1]];
    if (settling.some((one) => from < one.to && to > one.from)) aftermath = to + AFTERMATH * bins.setSpeed[i];
    else if (!marksBin(bins, i, band, [])) aftermath = Number.NEGATIVE_INFINITY;
    else if (from >= aftermath) runs.push({ from, to });
  }
  return runs;
}

/** Union of the stretches, gaps of up to 5 s bridged. */
function joinRuns(road: Road, demand: Demand, runs: Stretch[]): Stretch[] {
  const end = road.distance[road.size - 1];
  const joined: { from: number; to: number }[] = [];
  for (const run of runs.sort((a, b) => a.from - b.from)) {
    const last = joined.at(-1);
    const gap = BRIDGED * demand.setSpeed[cellOf(road.distance, run.from)];
    if (last !== undefined && run.from <= last.to + gap) last.to = Math.max(last.to, Math.min(run.to, end));
    else joined.push({ from: run.from, to: Math.min(run.to, end) });
  }
  return joined;
}

/** What of the runs lies outside of the parts; both in order. */
function outside(parts: readonly Part[], runs: readonly Stretch[]): Stretch[] {
  return runs.flatMap((run) => {
    const left: Stretch[] = [];
    let from = run.from;
    for (const part of parts) {
      if (part.to <= from || part.from >= run.to) continue;
      if (part.from > from) left.push({ from, to: part.from });
      from = part.to;
    }
    if (from < run.to) left.push({ from, to: run.to });
    return left;
  });
}

/** Less than a gap before a hill that the demand made: too little to be told apart from it. */
function isApproach(road: Road, demand: Demand, cores: readonly Part[], { from, to }: Stretch): boolean {
  const gap = BRIDGED * demand.setSpeed[cellOf(road.distance, from)];
  return to - from < gap && cores.some((core) => core.from === to);
}

/**
 * Cuts a run at the crests and valleys that stand out by the height that the set speed is worth, v^2 / (2 g): what is
 * lower a vehicle could roll over.
 */
function oneWay(road: Road, demand: Demand, run: Stretch): Stretch[] {
  let height = speedHeight(road, demand, run);
  let turns = turningPlaces(road, run, height);
  while (turns.length >= MOST_PIECES) {
    height *= 2;
    turns = turningPlaces(road, run, height);
  }
  const edges = [run.from, ...turns, run.to];
  return turns
    .map((_, k) => k)
    .concat(turns.length)
    .map((k) => ({ from: edges[k], to: edges[k + 1] }));
}

const speedHeight = (road: Road, demand: Demand, { from }: Stretch): number => {
  const speed = demand.setSpeed[cellOf(road.distance, from)];
  return (speed * speed) / (2 * STANDARD_GRAVITY);
};

/** Lets each climb or descent grow along the road's own slope, never into its neighbour. */
function growToHill(road: Road, parts: readonly Part[], grows: (part: Part) => boolean): Part[] {
  const end = road.distance[road.size - 1];
  return parts.map((part, k) => {
    const sign = part.nature !== 0 ? part.nature : slopeOf(road, part);
    if (sign === 0 || !grows(part)) return part;
    const least = Math.max(k > 0 ? parts[k - 1].to : 0, part.from - FARTHEST);
    const most = Math.min(k + 1 < parts.length ? parts[k + 1].from : end, part.to + FARTHEST);
    const steep = (i: number) => sign * road.grade[i] > STILL_A_HILL;
    let i = cellOf(road.distance, part.from);
    while (i > 0 && road.distance[i] > least && steep(i) && steep(i - 1)) i--;
    let j = cellOf(road.distance, part.to);
    while (j + 1 < road.size && road.distance[j] < most && steep(j) && steep(j + 1)) j++;
    return {
      nature: part.nature,
      from: Math.min(part.from, Math.max(least, road.distance[i])),
      to: Math.max(part.to, Math.min(most, road.distance[j])),
    };
  });
}

/** Parts less than a gap from each other meet: at the crest behind a climb, at the foot behind a descent. */
function closeGaps(road: Road, demand: Demand, parts: readonly Part[]): Part[] {
  const closed: Part[] = [];
  for (const part of parts) {
    const last = closed.at(-1);
    const gap = BRIDGED * demand.setSpeed[cellOf(road.distance, part.from)];
    if (last === undefined || part.from > last.to + gap) {
      closed.push(part);
      continue;
    }
    const place =
      last.nature === part.nature ? part.from : turningPlace(road, last.to, part.from, last.nature);
    closed[closed.length - 1] = { ...last, to: place };
    closed.push({ ...part, from: place });
  }
  return closed;
}

/** Crest (behind a climb) or foot (behind a descent) between two places. */
function turningPlace(road: Road, from: number, to: number, nature: number): number {
  let best = from;
  let height = nature * valueAt(road, 'elevation', from);
  for (let i = cellOf(road.distance, from) + 1; i < road.size && road.distance[i] <= to; i++) {
    if (nature * road.elevation[i] <= height) continue;
    height = nature * road.elevation[i];
    best = road.distance[i];
  }
  return best;
}

/** Joins neighbours of one direction that touch: one climb is one hill. */
function joinTouching(road: Road, parts: readonly Part[]): Part[] {
  const joined: Part[] = [];
  for (const part of parts) {
    const last = joined.at(-1);
    const touches = last !== undefined && part.from <= last.to && part.nature === last.nature;
    const slope = slopeOf(road, part);
    if (touches && (part.nature !== 0 || (slope !== 0 && slope === slopeOf(road, last))))
      joined[joined.length - 1] = { ...last, to: Math.max(last.to, part.to) };
    else joined.push({ ...part, from: Math.max(part.from, last?.to ?? 0) });
  }
  return joined.filter((part) => part.to > part.from);
}

const riseOf = (road: Road, { from, to }: Stretch): number =>
  valueAt(road, 'elevation', to) - valueAt(road, 'elevation', from);

function slopeOf(road: Road, stretch: Stretch): -1 | 0 | 1 {
  const mean = riseOf(road, stretch) / (stretch.to - stretch.from);
  return mean > STILL_A_HILL ? 1 : mean < -STILL_A_HILL ? -1 : 0;
}

/** By the ground: wind may ask for more than there is on a level road. */
function kindOf(road: Road, demand: Demand, part: Part): HillKind {
  const worth = speedHeight(road, demand, part);
  const rise = riseOf(road, part);
  const slope = Math.abs(rise) >= worth ? Math.sign(rise) : slopeOf(road, part);
  if (slope !== 0) return slope > 0 ? 'climb' : 'descent';
  return heightRange(road, part) < LEVEL * worth ? 'level' : 'rolling';
}

/** Highest less lowest place [m]. */
function heightRange(road: Road, { from, to }: Stretch): number {
  const ends = [valueAt(road, 'elevation', from), valueAt(road, 'elevation', to)];
  let high = Math.max(ends[0], ends[1]);
  let low = Math.min(ends[0], ends[1]);
  for (let i = cellOf(road.distance, from) + 1; i < road.size && road.distance[i] < to; i++) {
    high = Math.max(high, road.elevation[i]);
    low = Math.min(low, road.elevation[i]);
  }
  return high - low;
}
