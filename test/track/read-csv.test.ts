import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { readTrack } from '../../src/track/read-track.ts';
import type { Track } from '../../src/track/track.ts';
import { expectClose } from '../compare.ts';

const read = (text: string, name = 'a.csv'): Track =>
  readTrack({ name, bytes: new TextEncoder().encode(text) });
const runs = { seed: 20260, numRuns: 60 };

describe('a CSV track', () => {
  it('brings every column to SI', () => {
    const track = read(
      'distance_km,elevation_m,grade_pct,heading_deg,headwind_m_s,time_s,speed_kmh\n' +
        '2,100,1.5,90,-3,1000,36\n2.1,101,-2,-90,4,1010,72\n2.25,99,0,360,0,1020.5,18\n',
    );
    expect([track.format, track.name, track.size, track.repairs]).toEqual(['csv', null, 3, []]);
    expectClose(track.distance, [0, 100, 250], 1e-9);
    expectClose(track.elevation!, [100, 101, 99], 0);
    expectClose(track.grade!, [0.015, -0.02, 0], 1e-15);
    expectClose(track.heading!, [Math.PI / 2, 1.5 * Math.PI, 0], 1e-12);
    expectClose(track.headwind!, [-3, 4, 0], 0);
    expectClose(track.time!, [0, 10, 20.5], 1e-9);
    expectClose(track.speed!, [10, 20, 5], 1e-12);
    expect([track.latitudeDeg, track.longitudeDeg]).toEqual([null, null]);
  });

  it.each([
    ['semicolons', 'distance_m;elevation_m\n0;1.5\n100;2.5\n200;3\n'],
    ['semicolons and decimal commas', 'distance_m;elevation_m\n0;1,5\n100,0;2,5\n200;3\n'],
    ['tabs', 'distance_m\televation_m\n0\t1.5\n100\t2.5\n200\t3\n'],
    ['tabs and decimal commas', 'distance_m\televation_m\n0\t1,5\n100\t2,5\n200\t3\n'],
    ['line ends of another system', 'distance_m,elevation_m\r\n0,1.5\r\n100,2.5\r\n200,3'],
    ['blank lines and blanks', '\n distance_m , elevation_m \n0, 1.5\n\n100 ,2.5\n200,3\n\n'],
    ['quotation marks', '"distance_m","elevation_m"\n"0","1.5"\n100,2.5\n200,3\n'],
    ['a byte order mark', '\ufeffdistance_m,elevation_m\n0,1.5\n100,2.5\n200,3\n'],
    ['columns the other way round', 'elevation_m,distance_m\n1.5,0\n2.5,100\n3,200\n'],
    ['exponents and signs', 'distance_m,elevation_m\n0,+1.5\n1e2,25e-1\n200.,3\n'],
  ])('is read the same with %s', (_what, text) => {
    const track = read(text);
    expectClose(track.distance, [0, 100, 200], 0);
    expectClose(track.elevation!, [1.5, 2.5, 3], 0);
  });

  it('counts lines from the top of the file, blank ones too', () => {
    expect(() => read('\ndistance_m,elevation_m\n0,1\n\n100,x\n200,1\n')).toThrow('a.csv:5: elevation_m');
  });

  it('comes back as it was written, in any of its dialects', () => {
    const tables = fc.array(
      fc.record({
        step: fc.double({ min: 1, max: 400, noNaN: true }),
        elevation: fc.double({ min: -400, max: 8000, noNaN: true }),
        wind: fc.double({ min: -30, max: 30, noNaN: true }),
      }),
      { minLength: 100, maxLength: 120 },
    );
    fc.assert(
      fc.property(
        tables,
        fc.constantFrom([',', '.'], [';', ','], ['\t', ','], [';', '.']),
        (rows, [mark, point]) => {
          let at = 0;
          const table = rows.map(({ step, elevation, wind }, i) => {
            at += i === 0 ? 0 : step;
            return [at, elevation, wind];
          });
          const body = table
            .map((row) => row.map((x) => String(x).replace('.', point!)).join(mark))
            .join('\n');
          const track = read(`distance_m,elevation_m,headwind_m_s\n`.replaceAll(',', mark!) + body);
          expect(track.repairs.filter(({ kind }) => kind !== 'gap')).toEqual([]);
          expectClose(
            track.distance,
            table.map((row) => row[0]!),
            0,
          );
          expectClose(
            track.elevation!,
            table.map((row) => row[1]!),
            0,
          );
          expectClose(
            track.headwind!,
            table.map((row) => row[2]!),
            0,
          );
        },
      ),
      runs,
    );
  });

  it('of positions agrees with the GPX and the GeoJSON of the same points within 1 mm', () => {
    const points = fc.array(
      fc.record({ lat: fc.integer({ min: 50, max: 900 }), lon: fc.integer({ min: -900, max: 900 }) }),
      { minLength: 5, maxLength: 40 },
    );
    fc.assert(
      fc.property(points, fc.integer({ min: -60, max: 60 }), (steps, base) => {
        let [lat, lon] = [base, 10];
        const places = steps.map((step, i) => {
          lat += step.lat * 1e-6;
          lon += step.lon * 1e-6;
          return [Number(lat.toFixed(6)), Number(lon.toFixed(6)), i] as const;
        });
        const csv = `lat_deg,lon_deg,elevation_m\n${places.map((p) => p.join(',')).join('\n')}`;
        const gpx = `<gpx version="1.1"><trk><trkseg>${places
          .map(([a, b, z]) => `<trkpt lat="${a}" lon="${b}"><ele>${z}</ele></trkpt>`)
          .join('')}</trkseg></trk></gpx>`;
        const json = JSON.stringify({
          type: 'LineString',
          coordinates: places.map(([a, b, z]) => [b, a, z]),
        });
        fc.pre(places.reduce((sum, _, i) => sum + (i === 0 ? 0 : steps[i]!.lat * 0.11), 0) > 60);
        const track = read(csv);
        for (const other of [read(gpx, 'a.gpx'), read(json, 'a.geojson')]) {
          expectClose(other.distance, track.distance, 1e-3);
          expectClose(other.elevation!, track.elevation!, 0);
          expectClose(other.latitudeDeg!, track.latitudeDeg!, 0);
        }
      }),
      runs,
    );
  });
});
