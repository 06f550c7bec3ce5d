import { InputError } from '../problems/input-error.ts';
import type { Warning } from '../problems/warning.ts';
import type { Profile, ProfilePiece } from '../track/track.ts';
import { airAlong } from './air.ts';
import { integrateSlope } from './along-slope.ts';
import { checkElevation, checkKnots } from './check-road.ts';
import type { ProfileOptions, ShelteredStretch } from './options.ts';
import { wrapTurn } from './plan.ts';
import type { Road } from './road.ts';
import { roadWarnings } from './road-warnings.ts';
import { stretchWarnings } from './stretch-warnings.ts';
import { thereAndBack } from './there-and-back.ts';
import { windMet } from './wind.ts';

/** Knots nearer than this share of the grid are one. */
const SAME = 1e-6;

/** Columns while they grow; `at` is the horizontal distance [m] or the time [s]. */
interface Columns {
  readonly at: number[];
  readonly grade: number[];
  readonly piece: number[];
}

/**
 * A written road: no noise, no smoothing, no uncertainty. Knots stand at the multiples of the grid and where something
 * changes; two knots at one place carry a step of grade, heading or headwind.
 *
 * Over each change of grade lies a parabola `verticalCurve` long, half of it on each side: the grade is linear there
 * (in the station, as everywhere; a parabola over horizontal distance differs by 0.02 mm of height at a change of 6 %). A profile by time
 * keeps its grades over time, and its distance is nominal: time times `nominalSpeed`.
 *
 * @throws InputError `profile-empty`, `vertical-curve-too-long` (curves of neighbouring changes would overlap),
 *   `wind-needs-heading` (a piece has neither heading nor headwind), `road-too-fine`, `elevation-out-of-range` (at its piece)
 */
export function roadOfProfile(given: Profile, options: ProfileOptions): Road {
  if (given.pieces.length === 0)
    throw new InputError({
      code: 'profile-empty',
      place: { key: 'track.profile' },
      message: 'the profile has no pieces',
      allowed: 'at least one',
    });
  const speed = given.by === 'time' ? options.nominalSpeed : 1;
  const extent = given.pieces.reduce((sum, piece) => sum + piece.extent, 0) * speed;
  const drives = options.direction === 'both' ? 2 : 1;
  checkKnots(drives * (extent / options.grid + 2 * given.pieces.length), drives * extent);
  const back = options.direction === 'back';
  const profile = back ? turnedRound(given, speed) : given;
  const shelter = back ? options.shelter.map((part) => turnedStretch(part, extent)) : options.shelter;
  const half = given.verticalCurve / (2 * speed);
  refuseOverlap(profile.pieces, half, speed);

  const columns = knotsOf(profile.pieces, half, options.grid / speed);
  const at = Float64Array.from(columns.at);
  const distance = at.map((x) => x * speed);
  const grade = Float64Array.from(columns.grade);
  const line = integrateSlope(distance, grade, profile.startElevation);
  checkElevation(distance, line.elevation, (i) => {
    const piece = columns.piece[i]!;
    return { key: `track.profile.${back ? given.pieces.length - 1 - piece : piece}` };
  });
  const pieceAt = (i: number): ProfilePiece => profile.pieces[columns.piece[i]!]!;
  const known = profile.pieces.every((piece) => piece.heading !== null);
  const heading = known ? at.map((_, i) => wrapTurn(pieceAt(i).heading ?? 0)) : null;
  const wind = windOfPieces(distance, pieceAt, profile.pieces, options, shelter);
  const air = airAlong(line.elevation, options.air);
  const road: Road = {
    along: profile.by === 'time' ? 'time' : 'distance',
    name: options.name,
    size: at.length,
    points: null,
    station: profile.by === 'time' ? at : line.station,
    distance,
    elevation: line.elevation,
    rawElevation: null,
    grade,
    gradeSd: new Float64Array(at.length),
    heading,
    curvature: known ? new Float64Array(at.length) : null,
    ...wind,
    airDensity: air.density,
    airTemperature: air.temperature,
    latitudeDeg: null,
    longitudeDeg: null,
    grid: options.grid,
    smoothing: null,
    masks: [],
    repairs: [],
    warnings: [],
    turnsAt: null,
  };
  const warned = { ...road, warnings: [...unusedStretches(options, extent), ...roadWarnings(road)] };
  return options.direction === 'both' ? thereAndBack(warned) : warned;
}

function unusedStretches({ masks = [], shelter }: ProfileOptions, length: number): Warning[] {
  const outside = (parts: readonly { readonly from: number }[]): number =>
    parts.filter(({ from }) => from >= length).length;
  const warnings: Warning[] =
    masks.length === 0
      ? []
      : [
          {
            code: 'masks-unused',
            message: 'The road is written in the case: its grade is used as it is, and masks change nothing.',
          },
        ];
  return [
    ...warnings,
    ...stretchWarnings({ kind: 'mask', given: masks, lost: outside(masks), length }),
    ...stretchWarnings({ kind: 'shelter', given: shelter, lost: outside(shelter), length }),
  ];
}

function knotsOf(pieces: readonly ProfilePiece[], half: number, grid: number): Columns {
  const columns: Columns = { at: [], grade: [], piece: [] };
  const add = (at: number, grade: number, piece: number): void => {
    columns.at.push(at);
    columns.grade.push(grade);
    columns.piece.push(piece);
  };
  let start = 0;
  pieces.forEach((piece, p) => {
    const end = start + piece.extent;
    const before = pieces[p - 1] ?? piece;
    const after = pieces[p + 1] ?? piece;
    const gradeAt = (x: number): number => {
      if (half > 0 && x < start + half)
        return piece.grade + ((before.grade - piece.grade) / 2) * (1 - (x - start) / half);
      if (half > 0 && x > end - half)
        return piece.grade + ((after.grade - piece.grade) / 2) * (1 - (end - x) / half);
      return piece.grade;
    };
    const stepped =
      p === 0 ||
      (half === 0 && before.grade !== piece.grade) ||
      before.heading !== piece.heading ||
      before.headwind !== piece.headwind;
    if (stepped) add(start, gradeAt(start), p);
    const curves = [
      ...(before.grade === piece.grade ? [] : [start + half]),
      ...(after.grade === piece.grade ? [] : [end - half]),
    ];
    for (const x of inside(start, end, half > 0 ? curves : [], grid)) add(x, gradeAt(x), p);
    add(end, gradeAt(end), p);
    start = end;
  });
  return columns;
}

/** Grid multiples and ends of vertical curves strictly between two places, ascending. */
function inside(start: number, end: number, curves: readonly number[], grid: number): number[] {
  const near = SAME * grid;
  const places = curves.slice();
  for (let k = Math.floor(start / grid) + 1; k * grid < end; k++) places.push(k * grid);
  const kept: number[] = [];
  for (const x of places.sort((a, b) => a - b))
    if (x > (kept.at(-1) ?? start) + near && x < end - near) kept.push(x);
  return kept;
}

function windOfPieces(
  distance: Float64Array,
  pieceAt: (i: number) => ProfilePiece,
  pieces: readonly ProfilePiece[],
  options: ProfileOptions,
  shelter: readonly ShelteredStretch[],
): { headwind: Float64Array; crosswind: Float64Array } {
  const written = distance.map((_, i) => pieceAt(i).headwind ?? 0);
  const blows = pieces.some((piece) => piece.headwind === null);
  const directed = pieces.every((piece) => piece.heading !== null || piece.headwind !== null);
  const heading = directed ? distance.map((_, i) => pieceAt(i).heading ?? 0) : null;
  const steady = windMet(distance, heading, null, blows ? options.wind : null, shelter);
  const own = windMet(distance, null, written, null, shelter);
  const given = (i: number): boolean => pieceAt(i).headwind !== null;
  return {
    headwind: steady.headwind.map((w, i) => (given(i) ? own.headwind[i]! : w)),
    crosswind: steady.crosswind.map((c, i) => (given(i) ? 0 : c)),
  };
}

/** Curves reach `half` into the pieces on both sides of a change of grade. */
function refuseOverlap(pieces: readonly ProfilePiece[], half: number, speed: number): void {
  pieces.forEach((piece, p) => {
    const curves = [pieces[p - 1], pieces[p + 1]].filter((next) => next && next.grade !== piece.grade).length;
    if (curves * half <= piece.extent * (1 + 1e-12)) return;
    throw new InputError({
      code: 'vertical-curve-too-long',
      place: { key: 'track.vertical_curve_m' },
      message: `vertical curves would overlap in piece ${p + 1} of the profile`,
      found: `${(2 * half * speed).toFixed(1)} m`,
      allowed: `at most ${((2 * piece.extent * speed) / curves).toFixed(1)} m`,
    });
  });
}

function turnedRound(profile: Profile, speed: number): Profile {
  const climb = profile.pieces.reduce((sum, piece) => sum + piece.grade * piece.extent * speed, 0);
  return {
    ...profile,
    startElevation: profile.startElevation + climb,
    pieces: profile.pieces.toReversed().map((piece) => ({
      extent: piece.extent,
      grade: -piece.grade,
      heading: piece.heading === null ? null : piece.heading + Math.PI,
      headwind: piece.headwind === null ? null : -piece.headwind,
    })),
  };
}

function turnedStretch(part: ShelteredStretch, extent: number): ShelteredStretch {
  return { ...part, from: extent - part.to, to: extent - part.from };
}
