import type { BinRecord } from '../loop/result.ts';
import { cellOf } from '../numeric/interpolate.ts';
import type { Road } from '../road/road.ts';
import { toKm, toKmh, toKw, toLitre, toPct, toWh } from '../units/convert.ts';
import type { EnergySource } from '../vehicle/energy-source.ts';
import type { DriveQuality } from './drive-quality.ts';
import type { Figure, None } from './findings.ts';
import { heldTime } from './held-time.ts';
import type { HoldRecord } from './hold-transient.ts';
import { isLost } from './recovery.ts';

/** How a hill's recovery went for one candidate: where the hill is, and the time or why there is none. */
export interface Recovery {
  /** Horizontal distance of the hill's start [m]. */
  readonly at: number;
  readonly time: Figure;
}

/** What a figure is taken over. */
export interface FigureRecord {
  readonly bins: BinRecord;
  /** One a bin: 1 where the bin counts. */
  readonly chosen: Uint8Array;
  /** Where the run ended [m]: the last bin counts up to there. */
  readonly end: number;
  /** Of the road: along time its distances are nominal, and lengths are taken from the speed. */
  readonly along: Road['along'];
  /** Bands of the record [m/s], and the one that is asked for (null where the figure takes none). */
  readonly bands: readonly number[];
  readonly band: number | null;
  /** Of the hills that count. */
  readonly recoveries: readonly Recovery[];
  /** What the drive lives on; null: not known. */
  readonly source: EnergySource | null;
  /** Where gears were changed, horizontal distances in order [m]. */
  readonly shifts: readonly number[];
  /** A shift cancels hold: the rider makes it. */
  readonly shiftsCancel: boolean;
  /** One a bin: 1 where the drive reached the grip of the driven wheel; null: grip not known. */
  readonly beyondGrip: Uint8Array | null;
  /** One a bin: greatest power of a brake that holds the set speed beside the least throttle, by the demand [W]. */
  readonly brakeNeeded: Float64Array;
  /** Of the whole run. */
  readonly ledgerResidual: number;
  readonly road: Road;
  /** Upper end of the command. */
  readonly greatestCommand: number;
  /** Where the clock of the time-weighted error begins anew, in order along the way [m]. */
  readonly events: readonly number[];
  /** Ratings over the bins that count; worked out when it is first asked for. */
  readonly quality: () => DriveQuality;
  /** What became of the hold where it counts; worked out when it is first asked for. */
  readonly hold: () => HoldRecord;
}

export interface Measure {
  /** In the unit of the row. */
  readonly value: Figure;
  /** Where it was worst [m]; null: the figure has no place. */
  readonly at: number | null;
  /** Why the true value may be greater; left out where it is known. */
  readonly open?: string;
}

const NOTHING: Measure = { value: { none: 'no such stretch was driven' }, at: null };
export const placeless = (value: Figure): Measure => ({ value, at: null });

/** Sum over the chosen bins. */
export function sum({ bins, chosen }: FigureRecord, of: (i: number) => number): number {
  let total = 0;
  for (let i = 0; i < bins.size; i++) if (chosen[i] === 1) total += of(i);
  return total;
}

const timeOf = (record: FigureRecord): number => sum(record, (i) => record.bins.time[i]);
const binLength = ({ bins, end, along }: FigureRecord, i: number): number =>
  along === 'time'
    ? bins.time[i] * bins.speedMean[i]
    : Math.max(0, Math.min(bins.edge[i + 1], end) - bins.edge[i]);

/** A figure that exists wherever any chosen time was driven. */
export function driven(record: FigureRecord, of: (time: number) => Figure): Measure {
  const time = timeOf(record);
  return time > 0 ? placeless(of(time)) : NOTHING;
}

const OFF: Measure = { value: { none: 'hold was on nowhere there' }, at: null };

/** A figure that exists wherever hold was on in any chosen time; `time` is that with hold on [s]. */
export function held(record: FigureRecord, of: (time: number) => Figure): Measure {
  if (!(timeOf(record) > 0)) return NOTHING;
  const time = sum(record, (i) => heldTime(record.bins, i));
  return time > 0 ? placeless(of(time)) : OFF;
}

/** Distance driven with hold on [m]: of a bin its share of the time. */
export const heldLength = (record: FigureRecord): number =>
  sum(record, (i) => {
    const { time } = record.bins;
    return time[i] > 0 ? (binLength(record, i) * heldTime(record.bins, i)) / time[i] : 0;
  });

/** Greatest |e| in a bin [m/s]; 0 where hold was off in all of it. */
export const worstError = ({ bins }: FigureRecord, i: number): number =>
  bins.time[i] > 0 && !(heldTime(bins, i) > 0) ? 0 : Math.max(bins.errorMax[i], -bins.errorMin[i]);

/** Chosen bin with the greatest score above 0, with its middle. */
export function worstBin(
  record: FigureRecord,
  score: (i: number) => number,
): { value: number; at: number } | null {
  const { bins, chosen } = record;
  let worst: { value: number; at: number } | null = null;
  for (let i = 0; i < bins.size; i++) {
    if (chosen[i] !== 1) continue;
    const value = score(i);
    if (value > (worst?.value ?? 0)) worst = { value, at: (bins.edge[i] + bins.edge[i + 1]) / 2 };
  }
  return worst;
}

export function withinBand(record: FigureRecord): Measure {
  const { bins, bands, band } = record;
  // Bands pass through files in km/h: equal to a nanometre a second is equal.
  const k = band === null ? -1 : bands.findIndex((b) => Math.abs(b - band) < 1e-9);
  if (k < 0) return placeless({ none: 'the run did not count the time within this band' });
  const inside = (i: number): number => bins.timeInBand[i * bands.length + k];
  const outside = worstBin(record, (i) =>
    heldTime(bins, i) - inside(i) > 1e-9 ? Math.max(bins.errorMax[i], -bins.errorMin[i]) : 0,
  );
  const { value } = held(record, (time) => toPct(Math.min(1, sum(record, inside) / time)));
  return { value, at: typeof value === 'number' ? (outside?.at ?? null) : null };
}

export function worstSide(record: FigureRecord, side: 1 | -1): Measure {
  const { errorMin, errorMax } = record.bins;
  const { value } = held(record, () => 0);
  if (typeof value !== 'number') return placeless(value);
  const worst = worstBin(record, (i) =>
    worstError(record, i) > 0 ? (side > 0 ? errorMax[i] : -errorMin[i]) : 0,
  );
  return worst === null ? placeless(0) : { value: toKmh(side * worst.value), at: worst.at };
}

/**
 * The longest recovery that is known. One that never came although there was road for it is before any other; one
 * that is not known leaves the figure open, or without a value where no other hill needed a recovery.
 */
export function worstRecovery({ recoveries }: FigureRecord): Measure {
  let worst: { value: number; at: number } | null = null;
  let unknown: { value: None; at: number } | null = null;
  for (const { at, time } of recoveries) {
    if (typeof time === 'number') {
      if (time > (worst?.value ?? -1)) worst = { value: time, at };
    } else if (isLost(time)) return { value: time, at };
    else unknown ??= { value: time, at };
  }
  if (unknown === null) return worst ?? placeless(0);
  return worst === null || worst.value === 0 ? unknown : { ...worst, open: unknown.value.none };
}

const NO_SOURCE: None = { none: 'the vehicle says nothing of fuel or battery' };

const drawnOver = (record: FigureRecord): number => sum(record, (i) => record.bins.drawn[i]);

export function batteryEnergy(record: FigureRecord): Measure {
  if (record.source?.kind !== 'battery') return placeless({ none: 'the drive has no battery with losses' });
  return driven(record, () => toWh(drawnOver(record)));
}

export function drawnPerKm(record: FigureRecord): Measure {
  return placeless(record.source === null ? NO_SOURCE : perKm(record, toWh(drawnOver(record))));
}

export function fuelPer100Km(record: FigureRecord): Measure {
  const { source } = record;
  if (source?.kind !== 'fuel') return placeless({ none: 'the vehicle says nothing of fuel' });
  const litres = perKm(record, toLitre(drawnOver(record) / source.heat));
  return placeless(typeof litres === 'number' ? 100 * litres : litres);
}

/** Way on what is there at the start, at the consumption of the bins that count. */
export function range(record: FigureRecord): Measure {
  const { source } = record;
  if (source === null) return placeless(NO_SOURCE);
  const full = source.kind === 'fuel';
  if (source.capacity === null)
    return placeless({ none: `the ${full ? 'tank' : 'battery'} has no known size` });
  const share = full ? 1 : Math.max(0, source.charge - source.reserve);
  const drawn = perKm(record, drawnOver(record));
  if (typeof drawn !== 'number') return placeless(drawn);
  if (drawn <= 0) return placeless({ none: 'nothing was drawn on the whole' });
  return placeless((source.capacity * share) / drawn);
}

/** Shifts in the bins that count. */
export function shiftCount(record: FigureRecord): Measure {
  const { bins, chosen, shifts } = record;
  const counted = shifts.filter((place) => chosen[cellOf(bins.edge, place)] === 1);
  return driven(record, () => counted.length);
}

export function timeBeyondGrip(record: FigureRecord): Measure {
  const { bins, beyondGrip } = record;
  if (beyondGrip === null) return placeless({ none: 'the grip of the driven wheel is not known' });
  const first = worstBin(record, (i) => (beyondGrip[i] === 1 ? bins.time[i] : 0));
  return { ...driven(record, () => sum(record, (i) => beyondGrip[i] * bins.time[i])), at: first?.at ?? null };
}

export function brakePowerNeeded(record: FigureRecord): Measure {
  const worst = worstBin(record, (i) => record.brakeNeeded[i]);
  const { value } = driven(record, () => toKw(worst?.value ?? 0));
  return { value, at: worst?.at ?? null };
}

/** Distance of a bin driven with the brake on: its length by share of time. */
export const brakeDistance = (record: FigureRecord): number => {
  const { bins } = record;
  return sum(record, (i) =>
    bins.time[i] > 0 ? (binLength(record, i) * bins.timeBrake[i]) / bins.time[i] : 0,
  );
};

export const perKm = (record: FigureRecord, amount: number): Figure => {
  const length = sum(record, (i) => binLength(record, i));
  return length > 0 ? amount / toKm(length) : { none: 'no such stretch was driven' };
};
