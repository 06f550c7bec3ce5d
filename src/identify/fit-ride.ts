import { type LeastSquares, leastSquares } from '../numeric/least-squares.ts';
import { clusteredErrors } from './clustered-errors.ts';
import { elevationClosure } from './elevation-closure.ts';
import { estimateOf } from './estimate.ts';
import { firstRowFrom } from './first-row-from.ts';
import type { FittedUnknown, RideFit, RideStretch, RideUnknown, RideVehicle } from './ride.ts';
import { rideLevels } from './ride-rows.ts';
import { rideSegments } from './ride-segments.ts';

/** Length of a piece [s]: enough for the noise of height and speed to be small beside the work of drag. */
const PIECE = 20;
/** Groups of pieces that count as independent: past some two minutes a gust or a drift is another one. */
const GROUPS = 15;
/** Share of a piece that must be driven: else a brake may have been on. */
const MOSTLY = 0.9;
/** Fewest pieces to fit. */
export const FEWEST_PIECES = 12;

/**
 * Numbers of a vehicle from a ride whose power or throttle was logged, by the balance of energy over pieces of 20 s, as
 * a coast-down's (`fitCoastDown`) with the work of the drive in it. Mass, mass times rolling coefficient and drag area
 * are linear in it. Pieces in which the drive gave nothing for more than a tenth of the time are left out: nobody knows
 * whether a brake was on. Standard errors take up to 15 groups of pieces that follow each other as independent.
 *
 * @param stretches of the ride
 * @param vehicle as it was
 * @param unknowns to fit, one or more, each once
 * @param segment length of the segments to tell [m]
 * @returns null where the ride is too short (fewer than 12 such pieces) or does not tell the numbers apart
 */
export function fitRide(
  stretches: readonly RideStretch[],
  vehicle: RideVehicle,
  unknowns: readonly RideUnknown[],
  segment: number,
): RideFit | null {
  const pieces = piecesOf(stretches, vehicle);
  const driven = pieces.filter((piece) => piece.driven);
  if (driven.length < FEWEST_PIECES) return null;
  const { columns, right } = equations(driven, vehicle, unknowns);
  const fit = leastSquares(columns, right);
  if (fit.status === 'dependent') return null;
  const count = Math.min(GROUPS, Math.floor(driven.length / 2));
  const groups = Int32Array.from(driven, (_, i) => Math.floor((i * count) / driven.length));
  const { covariance } = clusteredErrors(columns, fit, groups, new Int32Array(count));
  const found = unknowns.map((name, i) => unknownOf(name, i, unknowns, fit, covariance, count - 1, vehicle));
  const after = withUnknowns(vehicle, found);
  const rms = (residual: ArrayLike<number>): number =>
    Math.sqrt(
      driven.reduce((sum, { way }, i) => sum + (residual[i]! / way) * (residual[i]! / way), 0) /
        driven.length,
    );
  const { inverse } = fit;
  return {
    unknowns: found,
    correlation: unknowns.length < 2 ? null : inverse[0]![1]! / Math.sqrt(inverse[0]![0]! * inverse[1]![1]!),
    degrees: count - 1,
    fitted: driven.reduce((sum, { way }) => sum + way, 0),
    length: stretches.reduce((sum, { place }) => sum + place[place.length - 1]! - place[0]!, 0),
    rmsForce: rms(fit.residuals),
    rmsForceBefore: rms(driven.map((piece) => balanceOf(piece, vehicle))),
    closure: elevationClosure(stretches, vehicle),
    segments: rideSegments(stretches, vehicle, after, segment),
  };
}

/** The account of energy of a piece: differences of the levels. */
interface Piece {
  readonly work: number;
  readonly held: number;
  readonly turning: number;
  readonly rolling: number;
  readonly rollingGrowth: number;
  readonly air: number;
  readonly way: number;
  readonly driven: boolean;
}

function piecesOf(stretches: readonly RideStretch[], vehicle: RideVehicle): readonly Piece[] {
  return stretches.flatMap((stretch) => {
    const levels = rideLevels(stretch, vehicle);
    const { time, driven } = stretch;
    const last = time.length - 1;
    const count = Math.floor((time[last]! - time[0]!) / PIECE);
    const edges = Array.from({ length: count + 1 }, (_, k) =>
      k === count ? last : firstRowFrom(time, time[0]! + (k * (time[last]! - time[0]!)) / count),
    );
    return edges.slice(1).flatMap((to, k): Piece[] => {
      const from = edges[k]!;
      if (to <= from) return [];
      let on = 0;
      for (let i = from; i <= to; i++) on += driven[i]!;
      const of = (level: Float64Array): number => level[to]! - level[from]!;
      return [
        {
          work: of(levels.work),
          held: of(levels.held),
          turning: of(levels.turning),
          rolling: of(levels.rolling),
          rollingGrowth: of(levels.rollingGrowth),
          air: of(levels.air),
          way: of(levels.way),
          driven: on >= MOSTLY * (to - from + 1),
        },
      ];
    });
  });
}

/** Work of the drive less what a vehicle needs [J]. */
const balanceOf = (piece: Piece, { mass, rotatingMass, crr, cda }: RideVehicle): number =>
  piece.work -
  mass * (piece.held + crr * piece.rolling + piece.rollingGrowth) -
  rotatingMass * piece.turning -
  cda * piece.air;

function equations(
  pieces: readonly Piece[],
  vehicle: RideVehicle,
  unknowns: readonly RideUnknown[],
): { readonly columns: readonly Float64Array[]; readonly right: Float64Array } {
  const fits = (name: RideUnknown): boolean => unknowns.includes(name);
  const { mass, rotatingMass, crr, cda } = vehicle;
  const column = (of: (piece: Piece) => number): Float64Array => Float64Array.from(pieces, of);
  const byName: Readonly<Record<RideUnknown, (piece: Piece) => number>> = {
    cda_m2: ({ air }) => air,
    // With the mass unknown as well the unknown is their product.
    crr: ({ rolling }) => (fits('mass_kg') ? rolling : mass * rolling),
    mass_kg: ({ held, rolling, rollingGrowth }) => held + rollingGrowth + (fits('crr') ? 0 : crr * rolling),
  };
  const right = column((piece) => {
    let left = piece.work - rotatingMass * piece.turning;
    if (!fits('cda_m2')) left -= cda * piece.air;
    if (!fits('mass_kg')) left -= mass * (piece.held + piece.rollingGrowth);
    if (!fits('crr') && !fits('mass_kg')) left -= mass * crr * piece.rolling;
    return left;
  });
  return { columns: unknowns.map((name) => column(byName[name])), right };
}

function unknownOf(
  name: RideUnknown,
  i: number,
  unknowns: readonly RideUnknown[],
  { coefficients }: LeastSquares,
  covariance: readonly Float64Array[],
  degrees: number,
  vehicle: RideVehicle,
): FittedUnknown {
  const value = coefficients[i]!;
  const variance = covariance[i]![i]!;
  const was = { cda_m2: vehicle.cda, crr: vehicle.crr, mass_kg: vehicle.mass }[name];
  const m = unknowns.indexOf('mass_kg');
  if (name !== 'crr' || m < 0)
    return { name, was, estimate: estimateOf(value, Math.sqrt(variance), degrees) };
  // A quotient: its relative variance by the rule of propagation.
  const mass = coefficients[m]!;
  const ratio = value / mass;
  const spread = variance - 2 * ratio * covariance[i]![m]! + ratio * ratio * covariance[m]![m]!;
  return { name, was, estimate: estimateOf(ratio, Math.sqrt(Math.max(0, spread)) / mass, degrees) };
}

/** The vehicle with what was found in it. */
export function withUnknowns(vehicle: RideVehicle, found: readonly FittedUnknown[]): RideVehicle {
  const value = (name: RideUnknown, was: number): number =>
    found.find((one) => one.name === name)?.estimate.value ?? was;
  return {
    ...vehicle,
    cda: value('cda_m2', vehicle.cda),
    crr: value('crr', vehicle.crr),
    mass: value('mass_kg', vehicle.mass),
  };
}
