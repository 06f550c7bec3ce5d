import geodesic from 'geographiclib-geodesic';
import { describe, expect, it } from 'vitest';
import { distanceBetween, legBetween } from '../../src/track/geodesic.ts';
import { expectClose } from '../compare.ts';

// Karney's algorithm, the reference implementation's own port (npm geographiclib-geodesic 2.2.0, MIT).
const WGS84 = geodesic.Geodesic.WGS84;

/** Park and Miller's generator, so that the legs are the same in every run. */
function uniform(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 16807) % 2147483647;
    return state / 2147483647;
  };
}

function worstError(latitudeFrom: number, latitudeTo: number, shortest: number, longest: number): number {
  const random = uniform(20260);
  let worst = 0;
  for (let i = 0; i < 3000; i++) {
    const lat = latitudeFrom + (latitudeTo - latitudeFrom) * random();
    const lon = -180 + 360 * random();
    const length = shortest + (longest - shortest) * random();
    const end = WGS84.Direct(lat, lon, 360 * random(), length);
    worst = Math.max(worst, Math.abs(distanceBetween(lat, lon, end.lat2!, end.lon2!) / length - 1));
  }
  return worst;
}

/** Sums legs of about a kilometre along the geodesic between two far places. */
function summed(lat1: number, lon1: number, lat2: number, lon2: number): number {
  const line = WGS84.InverseLine(lat1, lon1, lat2, lon2);
  const legs = Math.ceil(line.s13 / 1000);
  let total = 0;
  let [lat, lon] = [lat1, lon1];
  for (let i = 1; i <= legs; i++) {
    const to = line.Position((line.s13 * i) / legs);
    total += distanceBetween(lat, lon, to.lat2!, to.lon2!);
    [lat, lon] = [to.lat2!, to.lon2!];
  }
  return total;
}

const dms = (deg: number, min: number, sec: number): number =>
  Math.sign(deg) * (Math.abs(deg) + min / 60 + sec / 3600);

describe('distance on the ellipsoid', () => {
  it.each([
    [-60, 60],
    [60, 85],
    [-85, -60],
    [85, 90],
    [-90, -85],
  ])('agrees with an independent solver within 1e-8 for legs of 10 m to 10 km, latitude %d to %d', (a, b) => {
    expect(worstError(a, b, 10, 10_000)).toBeLessThan(1e-8);
  });

  it('keeps a tenth of a millimetre on legs of 1 to 10 m', () => {
    expect(worstError(-70, 70, 1, 10) * 10).toBeLessThan(1e-4);
  });

  // Published lines: GeographicLib test cases and tutorial (geographiclib-js, MIT), Geoscience Australia's worked
  // example (GRS 80, whose shape differs from WGS 84 by 0.1 mm), T. Vincenty's example line.
  it.each([
    ['GeographicLib table 1', -19.79938, -174.47484, -11.99349, -154.35109, 2319004.860116939, 1e-3],
    ['GeographicLib table 2', -41.22777, 122.32875, -7.57291, 130.37946, 3812686.035106021, 1e-3],
    ['GeographicLib table 3', -68.82867, -74.28391, -50.63005, -8.36685, 3956936.926063544, 1e-3],
    ['GeodSolve0', 40.6, -73.8, 49.01666667, 2.55, 5853226, 0.5],
    ['GeodSolve4', 36.493349428792, 0, 36.49334942879201, 8e-7, 0.072, 0.0005],
    ['tutorial, nearly antipodal', -41.32, 174.81, 40.96, -5.5, 19959679.267, 2e-3],
    ['Vincenty', 50.06632, -5.71475, 58.64402, -3.07009, 969954.166, 1e-3],
    [
      'Flinders Peak to Buninyong',
      dms(-37, 57, 3.7203),
      dms(144, 25, 29.5244),
      dms(-37, 39, 10.1561),
      dms(143, 55, 35.3839),
      54972.271,
      1e-3,
    ],
  ])('adds up to the published length: %s', (_name, lat1, lon1, lat2, lon2, length, tolerance) => {
    expectClose(summed(lat1, lon1, lat2, lon2), length, tolerance);
  });

  it('takes the short way over the antimeridian and over the pole', () => {
    // One ten-thousandth of a degree of longitude on the equator: 6378137 m * 2 pi / 360 * 2e-4.
    expectClose(distanceBetween(0, 179.9999, 0, -179.9999), 22.2638981586, 1e-9);
    // Meridian arc near the pole: 111693.951 m per degree (from memory of the usual series), 2 * 0.01 degree.
    expectClose(distanceBetween(89.99, 0, 89.99, 180), 0.02 * 111693.951, 0.01);
    expectClose(distanceBetween(90, 0, 90, 123), 0, 1e-8);
  });

  it('gives zero for equal places and is the same both ways', () => {
    expect(legBetween(51, -14, 51, -14)).toEqual({ east: 0, north: 0 });
    expectClose(distanceBetween(51, -14, 51.03, -14.02), distanceBetween(51.03, -14.02, 51, -14), 1e-9);
  });
});

describe('the angle of the components of a leg', () => {
  /** Clockwise from true north, in [0, 2 pi). */
  const azimuthOf = (...places: Parameters<typeof legBetween>): number => {
    const { east, north } = legBetween(...places);
    return (Math.atan2(east, north) + 2 * Math.PI) % (2 * Math.PI);
  };

  it('is the azimuth of the geodesic at the middle of the leg, within a microradian to latitude 70', () => {
    const random = uniform(7);
    for (let i = 0; i < 2000; i++) {
      const lat = -70 + 140 * random();
      const lon = -180 + 360 * random();
      const azimuth = 360 * random();
      const length = 10 + 5000 * random();
      const end = WGS84.Direct(lat, lon, azimuth, length);
      const middle = WGS84.Direct(lat, lon, azimuth, length / 2);
      const expected = (((middle.azi2! + 360) % 360) * Math.PI) / 180;
      const got = azimuthOf(lat, lon, end.lat2!, end.lon2!);
      const off = Math.abs(got - expected);
      expect(Math.min(off, 2 * Math.PI - off)).toBeLessThan(1e-6);
    }
  });

  it('points north, east, south and west', () => {
    expectClose(azimuthOf(10, 20, 10.01, 20), 0, 1e-12);
    expectClose(azimuthOf(10, 20, 10, 20.01), Math.PI / 2, 1e-12);
    expectClose(azimuthOf(10, 20, 9.99, 20), Math.PI, 1e-12);
    expectClose(azimuthOf(10, 20, 10, 19.99), 1.5 * Math.PI, 1e-12);
  });
});
