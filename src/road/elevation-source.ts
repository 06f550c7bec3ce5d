import type { ElevationSource } from './options.ts';

/** How elevations of one kind are smoothed, and how far the grade made from them is to be trusted. */
export interface SourceClass {
  /** Wavelength at which the smoother's gain is one half [m]. */
  readonly wavelength: number;
  /** The same for elevations written in whole metres [m]. */
  readonly wavelengthWholeMetres: number;
  /** One s.d. of the grade error that this source leaves at that wavelength and that the residuals do not show. */
  readonly gradeSd: number;
  /** One s.d. of the height error that the smoothing leaves, slow drift left out [m]. */
  readonly heightSd: number;
  /** Smallest scale of the noise that the outlier filter believes [m]. */
  readonly noiseFloor: number;
  /** Wavelength at which positions are smoothed for the heading [m]. */
  readonly planWavelength: number;
}

/**
 * Wavelengths are the best of Whittaker smoothing on a synthetic road (tangents 100-900 m, vertical curves K 10-60 m/%)
 * under the noise of each source; `gradeSd` is what brings the 95 % band to cover 95 % of the true grade there, noise
 * that follows the hill and the smoother's own bias together: see test/road/grade-accuracy.test.ts. `dem90` takes noise
 * of 5 m over 150 m (an assumption: published errors are heights at points, not their correlation along a road).
 */
export const SOURCE_CLASSES: Readonly<Record<Exclude<ElevationSource, 'exact'>, SourceClass>> = {
  lidar: {
    wavelength: 200,
    wavelengthWholeMetres: 300,
    gradeSd: 0.0018,
    heightSd: 0.15,
    noiseFloor: 0.15,
    planWavelength: 60,
  },
  barometric: {
    wavelength: 200,
    wavelengthWholeMetres: 300,
    gradeSd: 0.0025,
    heightSd: 0.5,
    noiseFloor: 0.2,
    planWavelength: 100,
  },
  gnss: {
    wavelength: 800,
    wavelengthWholeMetres: 800,
    gradeSd: 0.0095,
    heightSd: 2.7,
    noiseFloor: 0.5,
    planWavelength: 100,
  },
  dem30: {
    wavelength: 800,
    wavelengthWholeMetres: 800,
    gradeSd: 0.009,
    heightSd: 1.6,
    noiseFloor: 2,
    planWavelength: 60,
  },
  dem90: {
    wavelength: 1100,
    wavelengthWholeMetres: 1100,
    gradeSd: 0.013,
    heightSd: 3.5,
    noiseFloor: 3,
    planWavelength: 60,
  },
};

/** Survey data: positions are trusted too. */
export const EXACT_PLAN_WAVELENGTH = 60;

/** Whether all elevations are whole metres, as some recorders write them. A level or nearly constant list says nothing. */
export function isWholeMetres(elevation: Float64Array): boolean {
  let changes = 0;
  for (let i = 0; i < elevation.length; i++) {
    if (elevation[i] !== Math.round(elevation[i]!)) return false;
    if (i > 0 && elevation[i] !== elevation[i - 1]) changes++;
  }
  return changes >= 5;
}
