import { interpolateLinear } from '../numeric/interpolate.ts';
import type { Track } from '../track/track.ts';
import { airAlong } from './air.ts';
import { integrateSlope } from './along-slope.ts';
import { checkElevation, checkKnots } from './check-road.ts';
import { dataWarnings } from './data-warnings.ts';
import { type DrivenTrack, driveTrack } from './driven-track.ts';
import { EXACT_PLAN_WAVELENGTH, SOURCE_CLASSES } from './elevation-source.ts';
import { gradeOfTrack } from './grade-of-track.ts';
import type { RoadOptions } from './options.ts';
import { type Plan, planOfHeading, planOfPositions, unwind, wrapTurn } from './plan.ts';
import type { Road } from './road.ts';
import { roadWarnings } from './road-warnings.ts';
import { thereAndBack } from './there-and-back.ts';
import { windMet } from './wind.ts';

/**
 * The disturbances along a track: grade with its standard deviation, heading, wind and air, at knots on a uniform grid of
 * horizontal distance from the driven start, with one more at the end of the track.
 *
 * Elevations are smoothed unless the source is `exact`; a grade column beats them (`gradeOfTrack`). The elevation of
 * the road is the integral of its grade from the smoothed start (`integrateSlope`), so that both agree to rounding.
 * Heading is the file's column, or comes from the positions; a headwind column beats the steady wind.
 * `direction: 'both'` is one drive out and back, with a step of the grade where it turns.
 *
 * @param track points after the reader's repairs: finite values, distance strictly increasing from 0
 * @param options values in range: grid > 0, from < to in masks and shelter
 * @throws InputError `road-too-short`, `no-elevation`, `too-few-elevations`, `wind-needs-heading`, `road-too-fine`,
 *   `elevation-out-of-range`
 */
export function roadOfTrack(track: Track, options: RoadOptions): Road {
  const driven = driveTrack(track, options);
  const { grid } = options;
  const length = driven.distance[driven.size - 1]!;
  const cells = Math.max(1, Math.ceil(length / grid - 1e-6));
  const drives = options.direction === 'both' ? 2 : 1;
  checkKnots(drives * (cells + 1), drives * length);
  const uniform = Float64Array.from({ length: Math.max(cells + 1, 4) }, (_, i) => i * grid);
  const distance = Float64Array.from({ length: cells + 1 }, (_, i) => (i === cells ? length : i * grid));

  const along = gradeOfTrack(driven, options, uniform);
  const grade = interpolateLinear(uniform, along.grade, distance);
  const { station, elevation } = integrateSlope(distance, grade, along.startElevation);
  checkElevation(distance, elevation, () => ({ key: 'track' }));
  const plan = planOf(driven, options, uniform.length);
  const heading =
    plan === null ? null : interpolateLinear(uniform, unwind(plan.heading), distance).map(wrapTurn);
  const column = (values: Float64Array | null): Float64Array | null =>
    values === null ? null : interpolateLinear(driven.distance, values, distance);
  const longitude = driven.longitudeDeg === null ? null : unwind(driven.longitudeDeg, 360);
  const air = airAlong(elevation, options.air);
  const road: Road = {
    along: 'distance',
    name: options.name,
    size: distance.length,
    points: driven.size,
    station,
    distance,
    elevation,
    rawElevation: column(driven.elevation),
    grade,
    gradeSd: interpolateLinear(uniform, along.gradeSd, distance),
    heading,
    curvature: plan === null ? null : interpolateLinear(uniform, plan.curvature, distance),
    ...windMet(distance, heading, column(driven.headwind), options.wind, driven.shelter),
    airDensity: air.density,
    airTemperature: air.temperature,
    latitudeDeg: column(driven.latitudeDeg),
    longitudeDeg: column(longitude)?.map((deg) => deg - 360 * Math.floor((deg + 180) / 360)) ?? null,
    grid,
    smoothing: along.smoothing,
    masks: driven.masks,
    repairs: [...driven.repairs, ...along.repairs].sort((a, b) => a.from - b.from),
    warnings: [],
    turnsAt: null,
  };
  const warned = {
    ...road,
    warnings: [
      ...dataWarnings(driven, road, options, track.distance[track.size - 1] ?? 0),
      ...along.warnings,
      ...roadWarnings(road),
    ],
  };
  return options.direction === 'both' ? thereAndBack(warned) : warned;
}

function planOf(driven: DrivenTrack, options: RoadOptions, knots: number): Plan | null {
  if (driven.heading !== null) return planOfHeading(driven.distance, driven.heading, options.grid, knots);
  if (driven.latitudeDeg === null || driven.longitudeDeg === null) return null;
  const wavelength =
    options.elevationSource === 'exact'
      ? EXACT_PLAN_WAVELENGTH
      : SOURCE_CLASSES[options.elevationSource].planWavelength;
  return planOfPositions(
    driven.distance,
    driven.latitudeDeg,
    driven.longitudeDeg,
    wavelength,
    options.grid,
    knots,
  );
}
