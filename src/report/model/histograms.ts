import type { BinDetail, Distribution } from '../../loop/result.ts';
import { classTimes, quantileOf } from '../../study/class-times.ts';
import { gathered, type Histogram, histogramOf } from '../../study/histogram.ts';
import { toKmh, toPct } from '../../units/convert.ts';
import type { SpeedUnit } from '../quantity.ts';
import type { CandidateView, View } from './view.ts';

/** A quantity whose spread over the time is told. */
export interface SpreadQuantity {
  /** With its unit, as files have it. */
  readonly name: string;
  /** Name of its chart. */
  readonly chart: string;
  readonly words: string;
  /** Width of a class in files. */
  readonly width: number;
  /** Widths of a class that a chart may have, in the reader's unit. */
  readonly widths: readonly number[];
  readonly of: (detail: BinDetail) => Distribution;
  /** From SI to the unit of files. */
  readonly toUnit: (value: number) => number;
}

const same = (value: number): number => value;

/** In the order of the page and of histograms.csv. */
export const SPREAD_QUANTITIES: readonly SpreadQuantity[] = [
  {
    name: 'speed_error_kmh',
    chart: 'speed-error',
    words: 'Speed error',
    width: 0.2,
    widths: [0.1, 0.2, 0.5, 1, 2, 5, 10],
    of: ({ error }) => error,
    toUnit: toKmh,
  },
  {
    name: 'throttle_pct',
    chart: 'throttle',
    words: 'Throttle command',
    width: 2,
    widths: [5],
    of: ({ command }) => command,
    toUnit: toPct,
  },
  {
    name: 'acceleration_m_s2',
    chart: 'acceleration',
    words: 'Acceleration',
    width: 0.1,
    widths: [0.02, 0.04, 0.1, 0.2, 0.4, 1],
    of: ({ acceleration }) => acceleration,
    toUnit: same,
  },
  {
    name: 'jerk_m_s3',
    chart: 'jerk',
    words: 'Jerk',
    width: 0.2,
    widths: [0.01, 0.02, 0.04, 0.1, 0.2, 0.4, 1, 2],
    of: ({ jerk }) => jerk,
    toUnit: same,
  },
];

/** A quantity of every candidate in the same classes, in the reader's unit. */
export interface Spread {
  readonly quantity: SpreadQuantity;
  /** `km/h`, and as it stands behind the solidus of an axis. */
  readonly unit: string;
  readonly axis: string;
  /** Classes from..to, both in it. The outermost have what lies beyond them where `cut` says so. */
  readonly width: number;
  readonly from: number;
  readonly to: number;
  readonly cut: { readonly low: boolean; readonly high: boolean };
  readonly rows: readonly SpreadRow[];
}
export interface SpreadRow {
  readonly candidate: CandidateView;
  /** Share of the time in each class; sums to 1, or all 0 where there was no time with hold on. */
  readonly shares: Float64Array;
}

/** Most classes of a chart. */
const CLASSES = 41;
/** What lies beyond for less than this share of the time is gathered in the outermost classes. */
const RARE = 0.0005;
/** Errors beyond so many bands are gathered too: near the set speed is where designs differ. */
const BANDS = 5;

const unitOf = (
  { name }: SpreadQuantity,
  speed: SpeedUnit,
): { unit: string; axis: string; of: (value: number) => number } => {
  if (name === 'speed_error_kmh') return { unit: speed.name, axis: speed.axis, of: speed.of };
  if (name === 'throttle_pct') return { unit: '%', axis: '%', of: toPct };
  return name === 'jerk_m_s3'
    ? { unit: 'm/s³', axis: '(m/s³)', of: same }
    : { unit: 'm/s²', axis: '(m/s²)', of: same };
};

/** The spreads of a run, all candidates on one scale each; empty where the record has no detail. */
export function spreadsOf(view: View): readonly Spread[] {
  const candidates = view.candidates.filter(({ result }) => result.bins.detail !== null);
  if (candidates.length === 0) return [];
  return SPREAD_QUANTITIES.flatMap((quantity) => spreadOf(view, candidates, quantity) ?? []);
}

function spreadOf(view: View, candidates: readonly CandidateView[], quantity: SpreadQuantity): Spread | null {
  const { unit, axis, of } = unitOf(quantity, view.speed);
  const distributions = candidates.map(({ result }) => quantity.of(result.bins.detail as BinDetail));
  const range = rangeOf(distributions);
  if (range === null) return null;
  const bound =
    quantity.name === 'speed_error_kmh' ? BANDS * view.speed.of(view.result.band) : Number.POSITIVE_INFINITY;
  const low = Math.max(-bound, of(range.low));
  const high = Math.min(bound, of(range.high));
  const classOf = (value: number, width: number): number => Math.floor(value / width + 0.5);
  const { widths } = quantity;
  const width =
    widths.find((one) => classOf(high, one) - classOf(low, one) < CLASSES) ??
    (widths[widths.length - 1] as number);
  const [from, to] = [Math.min(0, classOf(low, width)), Math.max(0, classOf(high, width))];
  const histograms = distributions.map((distribution) => histogramOf(distribution, of, width));
  return {
    quantity,
    unit,
    axis,
    width,
    from,
    to,
    cut: {
      low: histograms.some(({ first }) => first < from),
      high: histograms.some(({ first, times }) => first + times.length - 1 > to),
    },
    rows: candidates.map((candidate, i) => ({
      candidate,
      shares: sharesOf(gathered(histograms[i] as Histogram, from, to)),
    })),
  };
}

/** What all but the rarest of the time of every candidate lies in, SI; null where none has any. */
function rangeOf(distributions: readonly Distribution[]): { low: number; high: number } | null {
  const ends = distributions.flatMap((distribution) => {
    const times = classTimes(distribution);
    const [low, high] = [quantileOf(times, RARE), quantileOf(times, 1 - RARE)];
    return low === null || high === null ? [] : [{ low, high }];
  });
  if (ends.length === 0) return null;
  return {
    low: Math.min(...ends.map(({ low }) => low)),
    high: Math.max(...ends.map(({ high }) => high)),
  };
}

function sharesOf({ times }: Histogram): Float64Array {
  const whole = times.reduce((sum, time) => sum + time, 0);
  return times.map((time) => (whole > 0 ? time / whole : 0));
}

/** Half-width of the band to mark in a spread, in its unit; null: it is none of the speed error. */
export const errorBand = ({ result, speed }: View, { quantity }: Spread): number | null =>
  quantity.name === 'speed_error_kmh' ? speed.of(result.band) : null;
