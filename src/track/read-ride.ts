import { InputError } from '../problems/input-error.ts';
import { RIDE_VOCABULARY } from './csv-columns.ts';
import { leaveOutJumps } from './leave-out-jumps.ts';
import { leaveOutNonFinite } from './leave-out-non-finite.ts';
import { leaveOutReversals } from './leave-out-reversals.ts';
import { legLength } from './leg-length.ts';
import { pickPoints } from './pick-points.ts';
import type { RawTrack } from './raw-track.ts';
import { readRaw } from './read-raw.ts';
import { countPoints, RepairLog } from './repair-log.ts';

/** Fewer fixes are no ride. */
const FEWEST_FIXES = 10;

/** A ride as its log gives it, after safe repairs: fixes in order of time, columns of equal length `size`. SI. */
export interface RideLog {
  readonly name: string | null;
  readonly format: 'gpx' | 'csv' | 'geojson';
  readonly size: number;
  /** From the first fix [s], strictly increasing. */
  readonly time: Float64Array;
  /** As the file has it [m], not decreasing; null: it has positions only. */
  readonly distance: Float64Array | null;
  readonly latitudeDeg: Float64Array | null;
  readonly longitudeDeg: Float64Array | null;
  /** [m/s]; NaN where the file says none; null: no such column. */
  readonly speed: Float64Array | null;
  /** As a ratio; NaN where the file says none; null: no such column. */
  readonly throttle: Float64Array | null;
  /** Fixes of the file that were left out. */
  readonly leftOut: number;
}

/**
 * Reads a logged ride: GPX with times, or CSV with `time_s` and places, optionally `speed_kmh` and `throttle_pct`. The same
 * repairs as of a track, as far as they concern where and when: places and times that are no finite number, distance or
 * time running backwards for a short way, single positions far off the line, fixes at the time of the one before. Heights
 * are not looked at, gaps and stops are left as they are.
 *
 * @param file name (for the ending and for messages) and whole content
 * @param choice name or number (from 1) where the file has several tracks
 * @throws InputError `no-time`, `ride-too-short`, and those of readRaw and of the repairs
 */
export function readRide(
  file: { readonly name: string; readonly bytes: Uint8Array },
  choice?: string | number,
): RideLog {
  const raw = readRaw(file.name, file.bytes, choice, RIDE_VOCABULARY);
  const { time } = raw;
  if (time === null)
    throw new InputError({
      code: 'no-time',
      place: { file: raw.file },
      message: 'no point of the logged ride has a time',
      allowed: raw.format === 'geojson' ? 'GPX with times, or CSV with time_s' : 'a time at each point',
    });
  const kept = keptFixes(raw, time);
  if (kept.length < FEWEST_FIXES)
    throw new InputError({
      code: 'ride-too-short',
      place: { file: raw.file },
      message: 'the logged ride has too few points',
      found: countPoints(kept.length),
      allowed: `at least ${FEWEST_FIXES} points, one after the other in time`,
    });
  const pick = (values: Float64Array | null): Float64Array | null =>
    values === null ? null : pickPoints(values, kept);
  // A column that is there and empty is none.
  const known = (values: Float64Array | null): Float64Array | null =>
    values?.some(Number.isFinite) === true
      ? values.map((value) => (Number.isFinite(value) ? value : Number.NaN))
      : null;
  const start = time[kept[0]!]!;
  return {
    name: raw.name,
    format: raw.format,
    size: kept.length,
    time: pickPoints(time, kept).map((t) => t - start),
    distance: pick(raw.distance),
    latitudeDeg: pick(raw.latitudeDeg),
    longitudeDeg: pick(raw.longitudeDeg),
    speed: known(pick(raw.speed)),
    throttle: known(pick(raw.throttle)),
    leftOut: raw.size - kept.length,
  };
}

function keptFixes(raw: RawTrack, time: Float64Array): Int32Array {
  const log = new RepairLog(raw);
  let kept = leaveOutNonFinite(raw, log, { name: 'time', values: time });
  kept = leaveOutReversals(raw, kept, log);
  kept = leaveOutJumps(raw, kept, legLength(raw), log);
  let last = Number.NEGATIVE_INFINITY;
  return kept.filter((i) => {
    const later = time[i]! > last;
    if (later) last = time[i]!;
    return later;
  });
}
