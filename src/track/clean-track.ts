import { InputError } from '../problems/input-error.ts';
import { toPct } from '../units/convert.ts';
import { bridgeGaps } from './bridge-gaps.ts';
import { fillColumn } from './fill-column.ts';
import { fillHeading } from './fill-heading.ts';
import { leaveOutJumps } from './leave-out-jumps.ts';
import { leaveOutNonFinite } from './leave-out-non-finite.ts';
import { leaveOutReversals } from './leave-out-reversals.ts';
import { leaveOutStandstill } from './leave-out-standstill.ts';
import { legLength } from './leg-length.ts';
import {
  FEWEST_POINTS,
  FEWEST_ROWS,
  HIGHEST_ELEVATION,
  LARGEST_DISAGREEMENT,
  LOWEST_ELEVATION,
  SHORTEST_TRACK,
} from './limits.ts';
import { pickPoints } from './pick-points.ts';
import type { RawTrack } from './raw-track.ts';
import { countPoints, RepairLog } from './repair-log.ts';
import type { Track } from './track.ts';
import { trimUnknownEnds } from './trim-unknown-ends.ts';

/**
 * Repairs what is safe to repair in a track, and refuses the rest. In this order: places that are no finite number,
 * distance or time running backwards, single positions off the line, points without movement, ends without
 * elevation, gaps and joins, missing values. The limits are in limits.ts. Elevation spikes are left to the road's
 * outlier filter.
 *
 * @param given points as the file gives them
 * @returns the track with every repair, in order of place
 * @throws InputError `no-elevation`, `track-too-short`, `distance-disagrees`, and what the steps throw
 */
export function cleanTrack(given: RawTrack): Track {
  requireElevation(given);
  const log = new RepairLog(given);
  const leg = legLength(given);
  let kept = leaveOutNonFinite(given, log);
  const raw = withoutHalfClock(given, kept, log);
  kept = leaveOutReversals(raw, kept, log);
  kept = leaveOutJumps(raw, kept, leg, log);
  kept = leaveOutStandstill(raw, kept, leg, log);
  requireLength(raw, kept.length, null);
  kept = trimUnknownEnds(raw, kept, leg, isElevation, log);
  requireLength(raw, kept.length, null);
  const distance = bridgeGaps(raw, kept, leg, log);
  requireLength(raw, kept.length, distance.at(-1)!);
  requireAgreement(raw, kept, distance.at(-1)!);

  const pick = (values: Float64Array | null): Float64Array | null =>
    values === null ? null : pickPoints(values, kept);
  const fill = (name: string, values: Float64Array | null, usable = Number.isFinite): Float64Array | null =>
    values === null ? null : fillColumn(raw, { name, values, usable }, kept, distance, log);
  const time = pick(raw.time);
  const start = time?.[0] ?? 0;
  return {
    name: raw.name,
    format: raw.format,
    size: kept.length,
    distance,
    latitudeDeg: pick(raw.latitudeDeg),
    longitudeDeg: pick(raw.longitudeDeg),
    elevation: fill('elevation', raw.elevation, isElevation),
    grade: fill('grade', raw.grade),
    heading: raw.heading === null ? null : fillHeading(raw, raw.heading, kept, distance, log),
    headwind: fill('headwind', raw.headwind),
    time: time === null ? null : time.map((t) => t - start),
    speed: fill('speed', raw.speed),
    repairs: log.place(kept, distance),
  };
}

function isElevation(value: number): boolean {
  return value >= LOWEST_ELEVATION && value <= HIGHEST_ELEVATION;
}

/** The track without its times, where some of them are missing: half a clock is none. */
function withoutHalfClock(raw: RawTrack, kept: Int32Array, log: RepairLog): RawTrack {
  const { time } = raw;
  if (time === null) return raw;
  const without = kept.filter((i) => !Number.isFinite(time[i]!));
  if (without.length === 0) return raw;
  const message = `${countPoints(without.length)} without a time; the times of the file are not used`;
  log.add('non_finite', without[0]!, without.at(-1)!, without.length, message);
  return { ...raw, time: null };
}

function requireElevation(raw: RawTrack): void {
  if (raw.elevation !== null || raw.grade !== null) return;
  throw new InputError({
    code: 'no-elevation',
    place: { file: raw.file },
    message: 'no point of the track has an elevation',
    allowed: 'an elevation in metres at each point',
  });
}

function requireLength(raw: RawTrack, points: number, length: number | null): void {
  const fewest = raw.distance === null ? FEWEST_POINTS : FEWEST_ROWS;
  if (points >= fewest && (length === null || length >= SHORTEST_TRACK)) return;
  throw new InputError({
    code: 'track-too-short',
    place: { file: raw.file },
    message: 'the track is too short for a road',
    found: length === null ? countPoints(points) : `${length.toFixed(1)} m`,
    allowed: `at least ${fewest} points and ${SHORTEST_TRACK} m`,
  });
}

/** A distance column in another unit than it says shows against the positions beside it. */
function requireAgreement(raw: RawTrack, kept: Int32Array, length: number): void {
  if (raw.distance === null || raw.latitudeDeg === null) return;
  const leg = legLength({ ...raw, distance: null });
  let alongPositions = 0;
  for (let k = 1; k < kept.length; k++) alongPositions += leg(kept[k - 1]!, kept[k]!);
  if (Math.abs(alongPositions - length) <= LARGEST_DISAGREEMENT * length) return;
  throw new InputError({
    code: 'distance-disagrees',
    place: { file: raw.file },
    message: 'the distances do not agree with the positions beside them',
    found: `${length.toFixed(0)} m against ${alongPositions.toFixed(0)} m`,
    allowed: `a difference up to ${toPct(LARGEST_DISAGREEMENT)} %`,
  });
}
