import { leastSquares } from '../numeric/least-squares.ts';
import { STANDARD_GRAVITY } from '../units/constants.ts';
import { colourOf } from './coloured-residuals.ts';
import { type Estimate, estimateOf } from './estimate.ts';
import type { ElevationClosure, RideStretch, RideVehicle } from './ride.ts';
import { rideLevels } from './ride-rows.ts';

/** Drag area, rolling coefficient and offset. */
const UNKNOWNS = 3;
/** Samples of a stretch whose mean is one point of the closure [s]. */
const CLOSURE_POINT = 5;

/**
 * Elevation closure: the height that the account of energy gives, z_v = (work - m_e v^2 / 2 - tyres - air) / (m g), held
 * against the height of the road; drag area, rolling coefficient and an offset by least squares of z_v - z (R. Chung,
 * Estimating CdA with a power meter, 2012; J. C. Martin et al., J. Appl. Biomech. 14 (1998) 276-291). Of the longest
 * stretch. A drift of the height is not fitted: at a steady speed it would be the rolling coefficient.
 *
 * @returns null where the stretch is too short, or does not tell the two apart
 */
export function elevationClosure(
  stretches: readonly RideStretch[],
  vehicle: RideVehicle,
): ElevationClosure | null {
  const longest = stretches.reduce((a, b) => (b.time.length > a.time.length ? b : a));
  const levels = rideLevels(longest, vehicle);
  const { time } = longest;
  const every = Math.max(
    1,
    Math.round((CLOSURE_POINT * (time.length - 1)) / (time[time.length - 1]! - time[0]!)),
  );
  const points = Math.floor(time.length / every);
  const thin = (of: (i: number) => number): Float64Array =>
    Float64Array.from({ length: points }, (_, k) => {
      let sum = 0;
      for (let i = k * every; i < (k + 1) * every; i++) sum += of(i);
      return sum / every;
    });
  const weight = vehicle.mass * STANDARD_GRAVITY;
  const { held, work, turning, rolling, rollingGrowth, air } = levels;
  const excess = thin(
    (i) =>
      (work[i]! - vehicle.mass * (held[i]! + rollingGrowth[i]!) - vehicle.rotatingMass * turning[i]!) /
      weight,
  );
  const byRolling = thin((i) => rolling[i]! / STANDARD_GRAVITY);
  const byAir = thin((i) => air[i]! / weight);
  const fixed = [excess.map(() => 1)];
  if (points < 4 * UNKNOWNS) return null;
  const fit = leastSquares([byRolling, byAir, ...fixed], excess);
  if (fit.status === 'dependent') return null;
  const was = leastSquares(
    fixed,
    excess.map((z, i) => z - vehicle.crr * byRolling[i]! - vehicle.cda * byAir[i]!),
  );
  const { factor, independent } = colourOf(fit.residuals, UNKNOWNS);
  const squares = (values: Float64Array): number => values.reduce((sum, z) => sum + z * z, 0);
  const variance = (squares(fit.residuals) / (points - UNKNOWNS)) * factor;
  const of = (i: number): Estimate =>
    estimateOf(
      fit.coefficients[i]!,
      Math.sqrt(variance * fit.inverse[i]![i]!),
      Math.max(1, independent - UNKNOWNS),
    );
  return {
    crr: of(0),
    cda: of(1),
    before: Math.sqrt(squares(was.residuals) / points),
    after: Math.sqrt(squares(fit.residuals) / points),
  };
}
