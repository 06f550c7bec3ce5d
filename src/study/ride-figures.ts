import { intervalOf } from '../numeric/interpolate.ts';
import { toKmh, toPct } from '../units/convert.ts';
import { figureRow } from './figure-table.ts';
import type { FigureValues, RecoveredHill, Replayed } from './findings.ts';
import { type HoldCourse, setSpeedAt } from './hold-course.ts';
import type { LoggedRide } from './logged-ride.ts';
import { type FigureContext, recordOf } from './measure-figure.ts';

/** Rows of the table of figures that a log can tell, with the definitions of the table. */
export const RIDE_FIGURES = [
  'time_s',
  'within_band_pct',
  'rms_error_kmh',
  'p95_abs_error_kmh',
  'mean_error_kmh',
  'worst_low_kmh',
  'worst_high_kmh',
  'time_lost_s',
  'throttle_mean_pct',
] as const;

/** A logged ride with what it did, and what the candidates did over the same stretches. */
export interface RideResult extends LoggedRide {
  /** In force at each row by the road's own reckoning, as true speed [m/s]. */
  readonly setSpeed: Float64Array;
  /** Over the stretches that it covers, in the units of the table of figures. */
  readonly figures: FigureValues;
  /** Time mean over the same [m/s]; 0 for a ride of no time. */
  readonly meanSpeed: number;
  /** Where it was furthest below and above the set speed [m]; null: it never was. */
  readonly worstLowAt: number | null;
  readonly worstHighAt: number | null;
  /** The candidates over the same stretches: bins of distance whose middle it covers. */
  readonly beside: readonly CandidateBeside[];
}

export interface CandidateBeside {
  readonly candidate: string;
  readonly figures: FigureValues;
  /** [m/s]; 0: it did not come so far. */
  readonly meanSpeed: number;
}

/** Pieces of the way between two rows whose errors stand for it in the quantile. */
const PIECES = 4;

/**
 * The figures of a logged ride, over the stretches between its rows that are no gap: speed is taken to change linearly from
 * row to row, the set speed to hold from row to row. No hill is explained by it and no requirement applies to it.
 *
 * @param course set speeds along the road: nominalCourse
 * @param band half-width of the band of `within_band_pct` [m/s]; among the plans' bands
 */
export function rideResult(
  ride: LoggedRide,
  course: HoldCourse,
  band: number,
  replayed: readonly Replayed[],
  context: FigureContext & { readonly hills: readonly RecoveredHill[] },
): RideResult {
  const setSpeed = setSpeedAt(ride, course);
  const sums = sumsOf(ride, setSpeed, band);
  const { time } = sums;
  const none = { none: 'the ride covers no stretch' };
  const driven = (value: number) => (time > 0 ? value : none);
  return {
    ...ride,
    setSpeed,
    figures: {
      time_s: driven(time),
      within_band_pct: driven(toPct(sums.inBand / time)),
      rms_error_kmh: driven(toKmh(Math.sqrt(sums.square / time))),
      p95_abs_error_kmh: driven(toKmh(quantile(sums.errors, 0.95))),
      mean_error_kmh: driven(toKmh(sums.error / time)),
      worst_low_kmh: driven(toKmh(sums.low)),
      worst_high_kmh: driven(toKmh(sums.high)),
      time_lost_s: driven(sums.lost),
      throttle_mean_pct:
        sums.throttleTime > 0
          ? toPct(sums.throttle / sums.throttleTime)
          : { none: 'the log has no throttle' },
    },
    meanSpeed: time > 0 ? sums.speed / time : 0,
    worstLowAt: sums.lowAt,
    worstHighAt: sums.highAt,
    beside: replayed.map((one) => besideOf(ride, one, band, context)),
  };
}

/** Time integrals over the rows, and extremes. SI. */
interface Sums {
  time: number;
  speed: number;
  error: number;
  square: number;
  lost: number;
  inBand: number;
  low: number;
  high: number;
  lowAt: number | null;
  highAt: number | null;
  throttle: number;
  throttleTime: number;
  /** |error| and how long. */
  readonly errors: { readonly error: number; readonly time: number }[];
}

function sumsOf(ride: LoggedRide, setSpeed: Float64Array, band: number): Sums {
  const { distance, time, speed, throttle, size, gaps } = ride;
  const sums: Sums = {
    time: 0,
    speed: 0,
    error: 0,
    square: 0,
    lost: 0,
    inBand: 0,
    low: 0,
    high: 0,
    lowAt: null,
    highAt: null,
    throttle: 0,
    throttleTime: 0,
    errors: [],
  };
  const gapStarts = new Set(gaps.map(({ from }) => from));
  const extreme = (error: number, at: number): void => {
    if (error < sums.low) [sums.low, sums.lowAt] = [error, at];
    if (error > sums.high) [sums.high, sums.highAt] = [error, at];
  };
  for (let i = 0; i + 1 < size; i++) {
    if (gapStarts.has(distance[i]!)) continue;
    const set = setSpeed[i]!;
    const step = time[i + 1]! - time[i]!;
    const [a, b] = [speed[i]! - set, speed[i + 1]! - set];
    sums.time += step;
    sums.speed += (step * (speed[i]! + speed[i + 1]!)) / 2;
    sums.error += (step * (a + b)) / 2;
    sums.square += (step * (a * a + a * b + b * b)) / 3;
    sums.lost -= (step * (a + b)) / (2 * set);
    sums.inBand += step * shareWithin(a, b, band);
    extreme(a, distance[i]!);
    if (setSpeed[i + 1] === set) extreme(b, distance[i + 1]!);
    for (let k = 0; k < PIECES; k++)
      sums.errors.push({ error: Math.abs(a + ((b - a) * (k + 0.5)) / PIECES), time: step / PIECES });
    const open = throttle === null ? Number.NaN : (throttle[i]! + throttle[i + 1]!) / 2;
    if (!Number.isNaN(open)) {
      sums.throttle += step * open;
      sums.throttleTime += step;
    }
  }
  return sums;
}

/** Share of a straight way from a to b that lies within -band to band. */
function shareWithin(a: number, b: number, band: number): number {
  if (a === b) return Math.abs(a) <= band ? 1 : 0;
  const [low, high] = a < b ? [a, b] : [b, a];
  return Math.max(0, Math.min(high, band) - Math.max(low, -band)) / (high - low);
}

function quantile(errors: Sums['errors'], share: number): number {
  const rows = errors.toSorted((a, b) => a.error - b.error);
  const target = share * rows.reduce((sum, row) => sum + row.time, 0);
  let passed = 0;
  for (const row of rows) {
    passed += row.time;
    if (passed >= target) return row.error;
  }
  return rows.at(-1)?.error ?? 0;
}

function besideOf(
  ride: LoggedRide,
  replayed: Replayed,
  band: number,
  context: FigureContext,
): CandidateBeside {
  const chosen = binsCovered(ride, replayed);
  const record = recordOf(replayed, context, chosen, []);
  const figures = RIDE_FIGURES.flatMap((name) => {
    const row = figureRow(name);
    return row === undefined
      ? []
      : [[name, row.measure({ ...record, band: row.takesBand ? band : null }).value]];
  });
  const { bins } = replayed.result;
  let [way, time] = [0, 0];
  for (let i = 0; i < bins.size; i++)
    if (chosen[i] === 1) {
      way += bins.speedMean[i]! * bins.time[i]!;
      time += bins.time[i]!;
    }
  return {
    candidate: replayed.name,
    figures: Object.fromEntries(figures),
    meanSpeed: time > 0 ? way / time : 0,
  };
}

/** Marks the bins whose middle lies between two rows without a gap. */
function binsCovered({ distance, size, gaps }: LoggedRide, { result: { bins } }: Replayed): Uint8Array {
  const starts = Float64Array.from(gaps, ({ from }) => from);
  const chosen = new Uint8Array(bins.size);
  for (let i = 0; i < bins.size; i++) {
    const middle = (bins.edge[i]! + bins.edge[i + 1]!) / 2;
    if (size < 2 || middle < distance[0]! || middle > distance[size - 1]!) continue;
    const gap = starts.length === 0 ? undefined : gaps[intervalOf(starts, middle)];
    chosen[i] = gap !== undefined && middle > gap.from && middle < gap.to ? 0 : 1;
  }
  return chosen;
}
