import type { BinRecord } from '../loop/result.ts';
import type { Road } from '../road/road.ts';
import { cellOf } from '../numeric/interpolate.ts';
import { valueAt } from '../road/lookup.ts';
import type { Demand, HillKind, Replayed, Stretch } from './findings.ts';

/** Gaps shorter than this are bridged [s at the set speed]. */
const BRIDGED = 5;
/** What follows a hill for this long still belongs to it, if nothing of its own begins [s at the set speed]. */
const AFTERMATH = 15;
/** Time at a limit that makes a bin count [s]. */
const AT_LIMIT = 0.2;
/** A hill is followed to its foot and its top while the grade goes on at this, for at most this far [m]. */
const STILL_A_HILL = 0.01;
const FARTHEST = 600;

export interface HillStretch extends Stretch {
  readonly kind: HillKind;
  /** See Hill.until. */
  readonly until: number;
}

interface Part {
  from: number;
  to: number;
  /** 1: more force than there is; -1: less than there can be; 0: only a candidate's own doing. */
  nature: -1 | 0 | 1;
}

/** A bin in which a candidate left its band or sat on a limit, outside of what a change of set speed explains. */
export function marksBin(bins: BinRecord, i: number, band: number, settling: readonly Stretch[]): boolean {
  const out = bins.errorMax[i] > band || -bins.errorMin[i] > band;
  const atLimit = bins.timeUpper[i] + bins.timeLower[i] > AT_LIMIT;
  if (!out && !atLimit) return false;
  return !settling.some(({ from, to }) => bins.edge[i] < to && bins.edge[i + 1] > from);
}

/**
 * Stretches shared by all candidates: where demand leaves the range, or a candidate that regulates leaves its band or
 * sits on a limit. Close ones are joined; a climb and a descent are parted at the crest or the foot between them; each
 * is followed to the foot and the top of the road's own hill. Locked throttles do not count: they would make one hill
 * of the whole road.
 */
export function hillStretches(
  road: Road,
  demand: Demand,
  replayed: readonly Replayed[],
  band: number,
): HillStretch[] {
  const regulating = replayed.filter(({ plan }) => plan.controller.kind !== 'locked');
  const parts = joinRuns(road, demand, [
    ...demandRuns(road, demand),
    ...regulating.flatMap(({ result }) => recordRuns(result.bins, band, demand.settling)),
  ]).flatMap((run) => splitByNature(road, demand, run));
  return answerable(road, demand, joinTouching(growToHill(road, parts)));
}

/**
 * Gives each hill the end of what it is answerable for. A short stretch on level ground, out of band by a candidate's
 * own doing and beginning within the aftermath of a hill, is that hill's: an overshoot is no hill of its own.
 */
function answerable(road: Road, demand: Demand, parts: readonly Part[]): HillStretch[] {
  const end = road.distance[road.size - 1];
  const hills: { part: Part; until: number }[] = [];
  for (const part of parts) {
    const last = hills.at(-1);
    const aftermath = AFTERMATH * demand.setSpeed[cellOf(road.distance, part.to)];
    const overshoot =
      last !== undefined &&
      part.nature === 0 &&
      signOfGrade(road, part) === 0 &&
      part.from <= last.until &&
      part.to - part.from <= 2 * aftermath;
    if (overshoot) last.until = Math.max(last.until, part.to);
    else {
      if (last !== undefined) last.until = Math.min(last.until, part.from);
      hills.push({ part, until: Math.min(end, part.to + aftermath) });
    }
  }
  return hills.map(({ part, until }) => ({
    from: part.from,
    to: part.to,
    until: Math.max(part.to, until),
    kind: kindOf(road, part),
  }));
}

function demandRuns(road: Road, demand: Demand): Stretch[] {
  const runs: Stretch[] = [];
  for (let i = 0; i + 1 < road.size; i++) {
    if (!(road.distance[i + 1] > road.distance[i])) continue;
    // A cell is out where both of its ends are; a knot alone, where its two neighbours' cells meet, has no length.
    if (Math.abs(demand.share[i]) > 1 && Math.abs(demand.share[i + 1]) > 1)
      runs.push({ from: road.distance[i], to: road.distance[i + 1] });
  }
  return runs;
}

function recordRuns(bins: BinRecord, band: number, settling: readonly Stretch[]): Stretch[] {
  const runs: Stretch[] = [];
  for (let i = 0; i < bins.size; i++)
    if (marksBin(bins, i, band, settling)) runs.push({ from: bins.edge[i], to: bins.edge[i + 1] });
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

/** Parts a run between demands of opposite sign, and parts off what lies more than the aftermath away from any. */
function splitByNature(road: Road, demand: Demand, run: Stretch): Part[] {
  const cores: Part[] = [];
  for (let i = cellOf(road.distance, run.from); i + 1 < road.size && road.distance[i] < run.to; i++) {
    const nature = demand.share[i] > 1 ? 1 : demand.share[i] < -1 ? -1 : 0;
    if (nature === 0 || road.distance[i] < run.from) continue;
    const last = cores.at(-1);
    if (last?.nature === nature) last.to = road.distance[i];
    else cores.push({ from: road.distance[i], to: road.distance[i], nature });
  }
  if (cores.length === 0) return [{ ...run, nature: 0 }];
  const reach = AFTERMATH * demand.setSpeed[cellOf(road.distance, run.from)];
  const parts: Part[] = [];
  const first = cores[0];
  const lead = Math.max(run.from, first.from - reach);
  if (lead > run.from) parts.push({ from: run.from, to: lead, nature: 0 });
  let from = lead;
  cores.forEach((core, k) => {
    const next = cores[k + 1];
    const to =
      next === undefined
        ? Math.min(run.to, core.to + reach)
        : turningPlace(road, core.to, next.from, core.nature);
    parts.push({ from, to, nature: core.nature });
    from = to;
  });
  if (from < run.to) parts.push({ from, to: run.to, nature: 0 });
  return parts;
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

/** Lets each climb or descent grow along the road's own slope, never into its neighbour. */
function growToHill(road: Road, parts: Part[]): Part[] {
  const end = road.distance[road.size - 1];
  return parts.map((part, k) => {
    const sign = part.nature !== 0 ? part.nature : signOfGrade(road, part);
    if (sign === 0) return part;
    const least = Math.max(k > 0 ? parts[k - 1].to : 0, part.from - FARTHEST);
    const most = Math.min(k + 1 < parts.length ? parts[k + 1].from : end, part.to + FARTHEST);
    let i = cellOf(road.distance, part.from);
    while (i >= 0 && road.distance[i] > least && sign * road.grade[i] > STILL_A_HILL) i--;
    let j = cellOf(road.distance, part.to) + 1;
    while (j < road.size && road.distance[j] < most && sign * road.grade[j] > STILL_A_HILL) j++;
    return {
      nature: part.nature,
      from: Math.min(part.from, Math.max(least, road.distance[Math.max(i, 0)])),
      to: Math.max(part.to, Math.min(most, road.distance[Math.min(j, road.size - 1)])),
    };
  });
}

/** Joins neighbours of one direction that grew together: one climb is one hill. */
function joinTouching(parts: Part[]): Part[] {
  const joined: Part[] = [];
  for (const part of parts) {
    const last = joined.at(-1);
    if (last !== undefined && part.from <= last.to && part.nature !== 0 && part.nature === last.nature)
      last.to = Math.max(last.to, part.to);
    else joined.push({ ...part, from: Math.max(part.from, last?.to ?? 0) });
  }
  return joined.filter((part) => part.to > part.from);
}

function signOfGrade(road: Road, { from, to }: Stretch): -1 | 0 | 1 {
  const rise = valueAt(road, 'elevation', to) - valueAt(road, 'elevation', from);
  const mean = rise / (to - from);
  return mean > STILL_A_HILL ? 1 : mean < -STILL_A_HILL ? -1 : 0;
}

function kindOf(road: Road, part: Part): HillKind {
  // By the ground: wind may ask for more than there is on a level road.
  const sign = signOfGrade(road, part);
  return sign > 0 ? 'climb' : sign < 0 ? 'descent' : 'rolling';
}
