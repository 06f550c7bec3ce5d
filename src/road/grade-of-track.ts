import { interpolateLinear } from '../numeric/interpolate.ts';
import { medianOf } from '../numeric/running-median.ts';
import { gradientAtKnots } from '../numeric/uniform-gradient.ts';
import { InputError } from '../problems/input-error.ts';
import type { Warning } from '../problems/warning.ts';
import type { Repair } from '../track/track.ts';
import { toKm } from '../units/convert.ts';
import { SUSPICION_WAVELENGTH, suspectBridges } from './bridge-suspicion.ts';
import type { DrivenTrack } from './driven-track.ts';
import { smoothElevation } from './elevation-smoothing.ts';
import { isWholeMetres, SOURCE_CLASSES } from './elevation-source.ts';
import { spikesOf } from './elevation-spikes.ts';
import type { RoadOptions } from './options.ts';
import type { Smoothing } from './road.ts';

/** An isolated hill (a raised cosine) this many wavelengths from foot to foot keeps 90 % of its height. */
const SHORTEST_HILL = 1.3;

/** Elevations in whole metres flicker by one: that is no outlier. Scale of the noise [m]. */
const WHOLE_METRE_FLOOR = 0.5;

/** Grade at the uniform knots and where it comes from. */
export interface GradeAlong {
  readonly grade: Float64Array;
  readonly gradeSd: Float64Array;
  /** Of the first knot [m]. */
  readonly startElevation: number;
  readonly smoothing: Smoothing | null;
  /** Elevation spikes, at driven distances. */
  readonly repairs: readonly Repair[];
  readonly warnings: readonly Warning[];
}

/**
 * Grade of a driven track at uniform knots: from its grade column as it is, else from survey elevations by central
 * differences, else from smoothed elevations with their uncertainty.
 *
 * The s.d. of a smoothed grade joins two independent parts far from ends: the smoother's posterior for the noise that the
 * residuals show, and the source's own, which they do not show. Towards ends and over masks and gaps the first grows by the
 * ratio that the smoother's factor gives, and the second, whose errors are alike over a hundred metres, by its root: at
 * an end about 3.9 and 2 times, against 1.7 to 2.3 measured on synthetic roads.
 *
 * @param uniform knots [m] from 0, at least 4, reaching the last point or past it
 * @throws InputError `no-elevation`, `too-few-elevations`, `points-too-sparse`
 */
export function gradeOfTrack(driven: DrivenTrack, options: RoadOptions, uniform: Float64Array): GradeAlong {
  if (driven.grade !== null)
    return {
      grade: gradeByCell(driven.distance, driven.grade, uniform, options.grid),
      gradeSd: new Float64Array(uniform.length),
      startElevation: driven.elevation?.[0] ?? 0,
      smoothing: null,
      repairs: [],
      warnings: [],
    };
  if (driven.elevation === null)
    throw new InputError({
      code: 'no-elevation',
      place: { key: 'track' },
      message: 'the track has neither elevation nor grade',
      allowed: 'an elevation for its points, or a grade_pct column',
    });
  const open = Array.from(driven.measured.keys()).filter((i) => driven.measured[i] === 1);
  // Two elevations say no more than a straight road: nothing to smooth. Masks must leave what the smoothing needs.
  const straight = driven.size === 2;
  const least = options.elevationSource === 'exact' || straight ? 2 : 3;
  if (open.length < least)
    throw new InputError({
      code: 'too-few-elevations',
      place: { key: driven.masks.length > 0 ? 'road.masks' : 'track' },
      message: 'too few points have an elevation of their own outside of the masks',
      found: `${open.length}`,
      allowed: `at least ${least}`,
    });
  const distance = Float64Array.from(open, (i) => driven.distance[i]!);
  const elevation = Float64Array.from(open, (i) => driven.elevation![i]!);
  if (straight && options.elevationSource !== 'exact')
    return { ...bySurvey(distance, elevation, options.grid, uniform), warnings: [straightWarning(distance)] };
  return options.elevationSource === 'exact'
    ? bySurvey(distance, elevation, options.grid, uniform)
    : bySmoothing(distance, elevation, options, options.elevationSource, uniform);
}

function straightWarning(distance: Float64Array): Warning {
  return {
    code: 'two-elevations',
    message: `The track has two elevations, ${distance[1]!.toFixed(0)} m apart: the road between them is taken as straight, without uncertainty.`,
  };
}

function bySurvey(x: Float64Array, z: Float64Array, grid: number, uniform: Float64Array): GradeAlong {
  const atKnots = interpolateLinear(x, z, uniform);
  // Knots outside of the points go on along the first and the last slope.
  const last = x.length - 1;
  const first = (z[1]! - z[0]!) / (x[1]! - x[0]!);
  const slope = (z[last]! - z[last - 1]!) / (x[last]! - x[last - 1]!);
  for (let i = 0; i < uniform.length; i++) {
    if (uniform[i]! < x[0]!) atKnots[i] = z[0]! + first * (uniform[i]! - x[0]!);
    if (uniform[i]! > x[last]!) atKnots[i] = z[last]! + slope * (uniform[i]! - x[last]!);
  }
  return {
    grade: gradientAtKnots(atKnots, grid),
    gradeSd: new Float64Array(uniform.length),
    startElevation: atKnots[0]!,
    smoothing: null,
    repairs: [],
    warnings: [],
  };
}

function bySmoothing(
  distance: Float64Array,
  elevation: Float64Array,
  options: RoadOptions,
  name: keyof typeof SOURCE_CLASSES,
  uniform: Float64Array,
): GradeAlong {
  const source = SOURCE_CLASSES[name];
  const whole = isWholeMetres(elevation);
  const usual = whole ? source.wavelengthWholeMetres : source.wavelength;
  const wavelength = options.smoothingWavelength ?? usual;
  const input = {
    distance,
    elevation,
    grid: options.grid,
    knots: uniform.length,
    wavelength,
    noiseFloor: whole ? Math.max(source.noiseFloor, WHOLE_METRE_FLOOR) : source.noiseFloor,
  };
  const smooth = smoothElevation(input);
  const fine =
    wavelength <= SUSPICION_WAVELENGTH
      ? smooth
      : smoothElevation({ ...input, wavelength: SUSPICION_WAVELENGTH });
  const sourceGradeSd = source.gradeSd * Math.max(1, wavelength / usual);
  const shown = smooth.noiseSd * smooth.leastGradeSdPerNoise;
  const gradeSd = smooth.gradeSdPerNoise.map((sd) => {
    const growth = sd / smooth.leastGradeSdPerNoise;
    return Math.sqrt(shown * shown * growth * growth + sourceGradeSd * sourceGradeSd * growth);
  });
  if (!gradeSd.every(Number.isFinite) || !smooth.grade.every(Number.isFinite))
    throw new InputError({
      code: 'points-too-sparse',
      place: { key: 'track' },
      message: `the points are too sparse for a smoothing over ${wavelength.toFixed(0)} m`,
      found: `${distance.length} points over ${toKm(distance.at(-1)! - distance[0]!).toFixed(1)} km`,
      allowed:
        'points evenly along the way, a longer road.smoothing_wavelength_m, or road.elevation_source: exact',
    });
  return {
    grade: smooth.grade,
    gradeSd,
    startElevation: smooth.elevation[0]!,
    smoothing: {
      source: name,
      wavelength,
      lambda: smooth.lambda,
      residualSd: smooth.noiseSd,
      sourceGradeSd,
      shortestHill: SHORTEST_HILL * wavelength,
    },
    repairs: spikesOf(smooth, distance, elevation, uniform),
    warnings: suspectBridges(fine.grade, smooth.grade, gradeSd, options.grid),
  };
}

/** Linear at the knots; the mean over the cell around a knot where the column is denser than the grid, so that the climb stays. */
function gradeByCell(
  distance: Float64Array,
  grade: Float64Array,
  uniform: Float64Array,
  grid: number,
): Float64Array {
  const steps = distance.slice(1).map((x, i) => x - distance[i]!);
  if (medianOf(steps) > 0.6 * grid) return interpolateLinear(distance, grade, uniform);
  const climb = new Float64Array(grade.length);
  for (let i = 1; i < climb.length; i++)
    climb[i] = climb[i - 1]! + ((grade[i]! + grade[i - 1]!) / 2) * steps[i - 1]!;
  const length = distance[distance.length - 1]!;
  const edges = Float64Array.from({ length: uniform.length + 1 }, (_, i) =>
    Math.min(Math.max((i - 0.5) * grid, 0), length),
  );
  const heights = interpolateLinear(distance, climb, edges);
  return uniform.map((_, i) => {
    const width = edges[i + 1]! - edges[i]!;
    return width > 0 ? (heights[i + 1]! - heights[i]!) / width : grade[grade.length - 1]!;
  });
}
