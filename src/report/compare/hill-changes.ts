import { fromKm, toKm, toKmh } from '../../units/convert.ts';
import { type Change, changeOf } from './figure-changes.ts';
import type { Series, SeriesPair } from './read-series.ts';
import type { ResultSummary, SummaryHillRow } from './read-summary.ts';

/** A hill of one run: its place, and what each candidate did on it. */
export interface HillPlace {
  readonly hill: number;
  readonly kind: string;
  readonly fromKm: number;
  readonly toKm: number;
  readonly meanGradePct: number;
}

/** Hills of two runs at one place; empty where that run has none there. */
export interface HillChange {
  readonly before: readonly HillPlace[];
  readonly after: readonly HillPlace[];
  /** Of the candidates that both runs have; empty for a place of one run. */
  readonly outcomes: readonly HillOutcomeChange[];
}

export interface HillOutcomeChange {
  readonly candidate: string;
  readonly before: HillOutcome;
  readonly after: HillOutcome;
  /** Whether the speed strays less far there than before. */
  readonly change: Change;
}

/** What a candidate did over the hills of a place. */
export interface HillOutcome {
  /** Speed error furthest from zero, with its sign, on all that is the place in either run and just behind its hills [km/h]. */
  readonly speedChangeKmh: number;
  /** Longest; null where one has none, or was not back [s]. */
  readonly recovery: number | null;
  /** Sum [s]. */
  readonly timeAtLimit: number;
  /** Where the speed strayed furthest. */
  readonly cause: string | null;
  /** What derates, of the cause `derating`; null: another cause, or a result that does not tell. */
  readonly derating: string | null;
}

/** `unmatched`: why hills of the two runs cannot be matched by place; null where they can. */
export interface HillChanges {
  readonly unmatched: string | null;
  readonly hills: readonly HillChange[];
}

/** Lengths of two roads that differ by more are not the same road [share]. */
const SAME_LENGTH = 0.01;

/** Share of the shorter of two hills that both cover, from which on they are at one place. */
const SAME_PLACE = 0.5;

/**
 * Matches the hills of two runs by their places. A stretch is a hill where demand or a candidate says so: what is one
 * hill in one run may be two in the other. Hills of the two runs are at one place where at least half of the shorter
 * lies on the longer, and so are all that are joined in this way; a place tells the extremes over its hills, and of
 * the speed error over all that the hills of either run cover, by the series. In order along the road, places of one
 * run among them.
 *
 * @param series of the candidates that both have, by name
 */
export function hillChanges(
  before: ResultSummary,
  after: ResultSummary,
  series: ReadonlyMap<string, SeriesPair>,
): HillChanges {
  const [was, is] = [before.route.length_m, after.route.length_m];
  if (Math.abs(was - is) > SAME_LENGTH * Math.max(was, is))
    return {
      unmatched: `the roads are ${toKm(was).toFixed(2)} km and ${toKm(is).toFixed(2)} km long: a place on one is no place on the other`,
      hills: [],
    };
  const old = hillsOf(before.hills);
  const now = hillsOf(after.hills);
  const hills = placesOf(old, now).map((hillsThere): HillChange => {
    const [a, b] = [old, now].map((side) => side.filter((hill) => hillsThere.has(hill))) as [Hill[], Hill[]];
    return {
      before: a.map(({ place }) => place),
      after: b.map(({ place }) => place),
      outcomes: outcomesOf(a, b, series),
    };
  });
  return { unmatched: null, hills: hills.sort((x, y) => startOf(x) - startOf(y)) };
}

const startOf = ({ before, after }: HillChange): number =>
  [...before, ...after].reduce((start, { fromKm }) => Math.min(start, fromKm), Number.POSITIVE_INFINITY);

/** Hills that are joined, directly or through others. */
function placesOf(old: readonly Hill[], now: readonly Hill[]): Set<Hill>[] {
  const placeOf = new Map<Hill, Set<Hill>>([...old, ...now].map((hill) => [hill, new Set([hill])]));
  for (const a of old)
    for (const b of now) {
      if (!isSamePlace(a.place, b.place)) continue;
      const joined = new Set([...placeOf.get(a)!, ...placeOf.get(b)!]);
      for (const hill of joined) placeOf.set(hill, joined);
    }
  return [...new Set(placeOf.values())];
}

interface Hill {
  readonly place: HillPlace;
  readonly rows: readonly SummaryHillRow[];
}

function hillsOf(rows: readonly SummaryHillRow[]): Hill[] {
  const byNumber = new Map<number, SummaryHillRow[]>();
  for (const row of rows) byNumber.set(row.hill, [...(byNumber.get(row.hill) ?? []), row]);
  return [...byNumber].map(([hill, own]) => {
    const { kind, from_km: fromKm, to_km: toKm, mean_grade_pct: meanGradePct } = own[0]!;
    return { place: { hill, kind, fromKm, toKm, meanGradePct }, rows: own };
  });
}

function isSamePlace(a: HillPlace, b: HillPlace): boolean {
  const both = Math.min(a.toKm, b.toKm) - Math.max(a.fromKm, b.fromKm);
  return both > 0 && both >= SAME_PLACE * Math.min(a.toKm - a.fromKm, b.toKm - b.fromKm);
}

function outcomesOf(
  before: readonly Hill[],
  after: readonly Hill[],
  series: ReadonlyMap<string, SeriesPair>,
): HillOutcomeChange[] {
  const places = [...before, ...after].map(({ place }) => place);
  const stretch = {
    from: fromKm(Math.min(...places.map((place) => place.fromKm))),
    to: fromKm(Math.max(...places.map((place) => place.toKm))),
  };
  return [...series].flatMap(([candidate, pair]) => {
    const was = outcomeOf(before, candidate, pair.before, stretch);
    const is = outcomeOf(after, candidate, pair.after, stretch);
    if (was === null || is === null) return [];
    const far = ({ speedChangeKmh }: HillOutcome) => Math.abs(speedChangeKmh);
    return [{ candidate, before: was, after: is, change: changeOf(far(was), far(is), 'km/h', 'lower') }];
  });
}

interface Range {
  /** [m] */
  readonly from: number;
  readonly to: number;
}

function outcomeOf(
  hills: readonly Hill[],
  candidate: string,
  { error }: Series,
  { from, to }: Range,
): HillOutcome | null {
  const rows = hills.flatMap((hill) => hill.rows.filter((row) => row.candidate === candidate));
  const end = error.size === 0 ? 0 : error.at[error.size - 1]!;
  // A run that ended before the place did nothing there.
  if (rows.length === 0 || end < from) return null;
  const far = rows.reduce((a, b) =>
    further(a.speed_change_kmh, b.speed_change_kmh) === a.speed_change_kmh ? a : b,
  );
  let speedChangeKmh = far.speed_change_kmh;
  for (let i = 0; i < error.size; i++)
    if (error.at[i]! >= from && error.at[i]! <= to)
      speedChangeKmh = further(further(speedChangeKmh, toKmh(error.low[i]!)), toKmh(error.high[i]!));
  const recoveries = rows.map(({ recovery_s }) => recovery_s);
  return {
    speedChangeKmh,
    recovery: recoveries.reduce((a, b) => (a === null || b === null ? null : Math.max(a, b))),
    timeAtLimit: rows.reduce((sum, row) => sum + row.time_at_limit_s, 0),
    cause: far.cause,
    derating: far.derating ?? null,
  };
}

/** The number further from zero, the first of equals. */
const further = (a: number, b: number): number => (Math.abs(b) > Math.abs(a) ? b : a);
