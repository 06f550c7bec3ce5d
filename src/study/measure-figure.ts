import type { BinRecord } from '../loop/result.ts';
import type { Road } from '../road/road.ts';
import { throttleRange } from '../vehicle/throttle-range.ts';
import type { FigureRecord, Measure, Recovery } from './figure-measures.ts';
import { FIGURES, type FigureRow } from './figure-table.ts';
import type { Demand, Figure, FigureValues, RecoveredHill, Replayed, Stretch, Where } from './findings.ts';
import { gripBins } from './grip-places.ts';
import { courseOfRun } from './hold-course.ts';
import { holdOff, isByRule } from './hold-off.ts';
import type { HoldMeasure, HoldRecord } from './hold-transient.ts';
import { type FollowedHolds, holdMeasures } from './hold-transients.ts';
import { outOfRange } from './out-of-range.ts';
import { qualityOfRun } from './run-quality.ts';
import { withUnit } from './wording.ts';

/** What figures are taken from, beside the run itself. */
export interface FigureContext {
  readonly road: Road;
  readonly demand: Demand;
  readonly hills: readonly RecoveredHill[];
  /** What followed the events of the hold, of the runs for which that is known already. */
  readonly holds?: FollowedHolds['measures'];
}

/**
 * One figure of one candidate over the part of the road that `where` names.
 *
 * @param row of the table of figures
 * @param replayed the candidate after its run
 * @param where `all`; `holdable`: bins that lie whole where a hold can be asked for (Demand.holdable); or a stretch [m]
 * @param band half-width [m/s] for a row that takes one; must be among the plan's bands
 */
export function measureFigure(
  row: FigureRow,
  replayed: Replayed,
  context: FigureContext,
  where: Where,
  band: number | null,
): Measure {
  const chosen = chooseBins(replayed.result.bins, where, context, courseOfRun(replayed).settling);
  const recoveries = recoveriesOf(replayed.name, context.hills, where);
  return row.measure({
    ...recordOf(replayed, context, chosen, recoveries, where),
    band: row.takesBand ? band : null,
  });
}

/** The value of one figure, as `figureValues` has it of many. */
export function figureValue(
  row: FigureRow,
  replayed: Replayed,
  context: FigureContext,
  where: Where,
  band: number,
): Figure {
  return figureOf(row, measureFigure(row, replayed, context, where, band));
}

/** What a figure is taken over, but for its band: given bins and recoveries of a run. */
export function recordOf(
  replayed: Replayed,
  { road, demand, hills, holds }: FigureContext,
  chosen: Uint8Array,
  recoveries: readonly Recovery[],
  where: Where = 'all',
): Omit<FigureRecord, 'band'> {
  const { plan, result } = replayed;
  const { drive, traction } = plan.vehicle;
  return {
    bins: result.bins,
    chosen,
    end: result.endDistance,
    along: plan.road.along,
    bands: plan.bands,
    recoveries,
    source: drive.source,
    shifts: result.shifts.map(({ distance }) => distance),
    shiftsCancel: drive.gearbox.kind === 'clutch',
    beyondGrip: traction === null ? null : gripBins(replayed),
    brakeNeeded: greatestByBin(result.bins, road, demand.brakePower),
    ledgerResidual: result.ledger.residual,
    road,
    greatestCommand: throttleRange(plan.vehicle).greatest,
    events: eventsOf(replayed, hills),
    quality: once(() => qualityOfRun(road, plan.vehicle, result.bins, chosen)),
    hold: once(() =>
      holdRecordOf(replayed, where, holds?.get(result) ?? holdMeasures(replayed, outOfRange(road, demand))),
    ),
  };
}

/** Where something ends that an error may be left from: hills, changes of set speed, events of hold, shifts of the rider. */
function eventsOf(replayed: Replayed, hills: readonly RecoveredHill[]): number[] {
  const { shifts, holdEvents = [] } = replayed.result;
  return [
    ...hills.map(({ to }) => to),
    ...courseOfRun(replayed).changes.map(({ at }) => at),
    ...holdEvents.map(({ distance }) => distance),
    ...shifts.filter(({ resumedAt }) => resumedAt !== null).map(({ distance }) => distance),
  ].sort((a, b) => a - b);
}

/** Events in the stretch; all of them for `holdable`: where hold is off or coming back, nothing is holdable. */
function holdRecordOf(replayed: Replayed, where: Where, measures: readonly HoldMeasure[]): HoldRecord {
  const inside = (place: number): boolean =>
    typeof where === 'string' || (place >= where.from && place < where.to);
  const { plan, result } = replayed;
  return {
    measures: measures.filter(({ event }) => inside(event.distance)),
    off: holdOff(plan, result).filter(({ from }) => inside(from)),
    endedByRule: (result.holdEvents ?? [])
      .filter((event) => event.kind === 'ended' && isByRule(event) && inside(event.distance))
      .map(({ distance }) => distance),
  };
}

function once<T>(make: () => T): () => T {
  let made: { readonly value: T } | null = null;
  return () => {
    made ??= { value: make() };
    return made.value;
  };
}

/** Greatest value of a column over the knots in each bin and those next to it, 0 or more. */
function greatestByBin({ size, edge }: BinRecord, road: Road, column: Float64Array): Float64Array {
  const greatest = new Float64Array(size);
  let knot = 0;
  for (let i = 0; i < size; i++) {
    while (knot + 1 < road.size && road.distance[knot + 1] <= edge[i]) knot++;
    for (let k = knot; k < road.size && road.distance[k] < edge[i + 1]; k++)
      greatest[i] = Math.max(greatest[i], column[k]);
  }
  return greatest;
}

/** Every figure of the table over one `where`, by name, in the units of the table. */
export function figureValues(
  replayed: Replayed,
  context: FigureContext,
  where: Where,
  band: number,
): FigureValues {
  const chosen = chooseBins(replayed.result.bins, where, context, courseOfRun(replayed).settling);
  const recoveries = recoveriesOf(replayed.name, context.hills, where);
  const record = recordOf(replayed, context, chosen, recoveries, where);
  return Object.fromEntries(
    FIGURES.map((row) => [
      row.name,
      figureOf(row, row.measure({ ...record, band: row.takesBand ? band : null })),
    ]),
  );
}

/** The value of a measure, where it is known. */
const figureOf = (row: FigureRow, { value, open }: Measure): Figure =>
  typeof value === 'number' && open !== undefined
    ? { none: `${withUnit(value, row.unit)} or more: ${open}` }
    : value;

/** The run ended before the end of the stretch that is asked about. */
export function endedEarly({ plan, result }: Replayed, where: Where): boolean {
  if (result.status === 'completed') return false;
  const { road } = plan;
  const end = typeof where === 'string' ? road.distance[road.size - 1] : where.to;
  return result.endDistance < end;
}

/** Marks the bins that count: for `holdable` those that lie whole on holdable road and in which the candidate itself was following no change of set speed, for a stretch those whose middle is in it. */
export function chooseBins(
  bins: BinRecord,
  where: Where,
  { road, demand }: Pick<FigureContext, 'road' | 'demand'>,
  settling: readonly Stretch[],
): Uint8Array {
  const chosen = new Uint8Array(bins.size);
  if (where === 'all') return chosen.fill(1);
  if (where !== 'holdable') {
    for (let i = 0; i < bins.size; i++) {
      const middle = (bins.edge[i] + bins.edge[i + 1]) / 2;
      chosen[i] = middle >= where.from && middle < where.to ? 1 : 0;
    }
    return chosen;
  }
  let knot = 0;
  for (let i = 0; i < bins.size; i++) {
    // All knots inside the bin and those next to it on both sides.
    while (knot + 1 < road.size && road.distance[knot + 1] <= bins.edge[i]) knot++;
    let all = demand.holdable[knot];
    for (let k = knot; all === 1 && k < road.size && road.distance[k] < bins.edge[i + 1]; k++)
      all = demand.holdable[k] & demand.holdable[Math.min(k + 1, road.size - 1)];
    chosen[i] = settling.some(({ from, to }) => bins.edge[i] < to && bins.edge[i + 1] > from) ? 0 : all;
  }
  return chosen;
}

/**
 * Recoveries that count: of the hills that touch the stretch; all of them for `holdable`, because a recovery begins
 * where the road can be held again, whatever the hill was.
 */
function recoveriesOf(name: string, hills: readonly RecoveredHill[], where: Where): Recovery[] {
  return hills
    .filter((hill) => typeof where === 'string' || (hill.from < where.to && hill.to > where.from))
    .flatMap((hill) =>
      hill.outcomes
        .filter((outcome) => outcome.candidate === name && outcome.affected)
        .map((outcome) => ({ at: hill.from, time: outcome.recovery })),
    );
}
