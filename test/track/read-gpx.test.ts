import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import geodesic from 'geographiclib-geodesic';
import { describe, expect, it } from 'vitest';
import { readTrack } from '../../src/track/read-track.ts';
import type { Track } from '../../src/track/track.ts';
import { expectClose } from '../compare.ts';

const read = (text: string, choice?: string | number): Track =>
  readTrack({ name: 'a.gpx', bytes: new TextEncoder().encode(text) }, choice);

interface Point {
  readonly lat: number;
  readonly lon: number;
  readonly ele: number;
}
const wrap = (body: string, attributes = 'version="1.1" xmlns="http://www.topografix.com/GPX/1/1"'): string =>
  `<?xml version="1.0" encoding="UTF-8"?>\n<gpx ${attributes} creator="test">\n${body}</gpx>\n`;
const write = (points: readonly Point[], extra = ''): string =>
  wrap(
    `<trk><name>A &amp; B</name><trkseg>\n${points
      .map((p) => `<trkpt lat="${p.lat}" lon="${p.lon}">${extra}<ele>${p.ele}</ele></trkpt>\n`)
      .join('')}</trkseg></trk>\n`,
  );
const prefixed = (text: string): string =>
  text.replace(/<(\/?)(?=[a-z])/g, '<$1g:').replace('xmlns=', 'xmlns:g=');

/** Roads of 10 to 60 points with legs of 20 to 160 m, anywhere but near the poles. */
const roads = fc
  .record({
    lat: fc.double({ min: -75, max: 75, noNaN: true }),
    lon: fc.double({ min: -180, max: 180, noNaN: true }),
    legs: fc.array(
      fc.record({ turn: fc.integer({ min: -60, max: 60 }), ele: fc.integer({ min: -90, max: 4000 }) }),
      {
        minLength: 10,
        maxLength: 60,
      },
    ),
  })
  .map(({ lat, lon, legs }): Point[] => {
    let azimuth = 30;
    let at = { lat2: lat, lon2: lon };
    return legs.map(({ turn, ele }, i) => {
      const point = { lat: Number(at.lat2.toFixed(9)), lon: Number(at.lon2.toFixed(9)), ele };
      azimuth += turn;
      const to = geodesic.Geodesic.WGS84.Direct(at.lat2, at.lon2, azimuth, 20 + ((i * 37) % 140));
      at = { lat2: to.lat2!, lon2: to.lon2! };
      return point;
    });
  });
const runs = { seed: 20260, numRuns: 60 };

describe('a GPX track', () => {
  it('that others recorded is read whole', () => {
    // npm gpx-parse 0.10.4 (MIT), tests/integration/data/route-1.1.gpx: 7,745 <trkpt, counted by grep; its first and
    // last points and its lowest and highest <ele> read off the file.
    const file = new URL(
      '../../node_modules/gpx-parse/tests/integration/data/route-1.1.gpx',
      import.meta.url,
    );
    const track = readTrack({ name: 'route-1.1.gpx', bytes: readFileSync(file) });
    expect(track.name).toBe('RUNNING');
    expect(track.size + track.repairs.reduce((sum, r) => sum + r.points, 0)).toBe(7745);
    expect([track.latitudeDeg![0], track.longitudeDeg![0]]).toEqual([51.37673, 0.73133]);
    expect([track.latitudeDeg!.at(-1), track.longitudeDeg!.at(-1)]).toEqual([51.376767, 0.73105]);
    expect(track.elevation!.reduce((a, b) => Math.min(a, b))).toBe(0);
    expect(track.elevation!.reduce((a, b) => Math.max(a, b))).toBe(38);
    // 07:20:55 to 09:32:31.
    expect(track.time!.at(-1)).toBe(2 * 3600 + 11 * 60 + 36);
    // The length by an independent solver over the same places.
    let length = 0;
    for (let i = 1; i < track.size; i++)
      length += geodesic.Geodesic.WGS84.Inverse(
        track.latitudeDeg![i - 1]!,
        track.longitudeDeg![i - 1]!,
        track.latitudeDeg![i]!,
        track.longitudeDeg![i]!,
      ).s12!;
    expectClose(track.distance.at(-1)!, length, 1e-3);
  });

  it('comes back as it was written, with the distances of an independent solver', () => {
    fc.assert(
      fc.property(roads, (points) => {
        const track = read(write(points));
        expect(track.repairs).toEqual([]);
        expectClose(
          track.latitudeDeg!,
          points.map((p) => p.lat),
          0,
        );
        expectClose(
          track.longitudeDeg!,
          points.map((p) => p.lon),
          0,
        );
        expectClose(
          track.elevation!,
          points.map((p) => p.ele),
          0,
        );
        let length = 0;
        const distances = points.map((p, i) => {
          if (i > 0)
            length += geodesic.Geodesic.WGS84.Inverse(points[i - 1]!.lat, points[i - 1]!.lon, p.lat, p.lon)
              .s12!;
          return length;
        });
        expectClose(track.distance, distances, 1e-5);
      }),
      runs,
    );
  });

  it('is the same with and without a namespace prefix, and as a route', () => {
    fc.assert(
      fc.property(roads, (points) => {
        const text = write(points);
        const track = read(text);
        expect(read(prefixed(text))).toEqual(track);
        expect(
          read(
            text
              .replace(/trkpt/g, 'rtept')
              .replace(/<\/?trkseg>/g, '')
              .replace(/trk>/g, 'rte>'),
          ),
        ).toEqual(track);
        expect(read(text.replace(/1\/1"/, '1/0"').replace('version="1.1"', 'version="1.0"'))).toEqual(track);
      }),
      runs,
    );
  });

  const line = (n: number): Point[] =>
    Array.from({ length: n }, (_, i) => ({ lat: 51 + i * 1e-3, lon: 0, ele: i }));

  it('keeps names unescaped, and takes none from inside its points', () => {
    expect(read(write(line(5), '<name>inside</name>')).name).toBe('A & B');
    expect(read(write(line(5), '<name>inside</name>').replace('<name>A &amp; B</name>', '')).name).toBeNull();
    expect(read(write(line(5)).replace('A &amp; B', '<![CDATA[A & B]]>')).name).toBe('A & B');
  });

  it('takes no elevation from extensions or from another namespace', () => {
    const foreign = 'xmlns:x="urn:x" version="1.1" xmlns="http://www.topografix.com/GPX/1/1"';
    for (const extra of ['<extensions><ele>900</ele></extensions>', '<x:ele>900</x:ele>']) {
      const text = write(line(5), extra).replace(
        'version="1.1" xmlns="http://www.topografix.com/GPX/1/1"',
        foreign,
      );
      expect(Array.from(read(text).elevation!)).toEqual([0, 1, 2, 3, 4]);
    }
  });

  it('reads an elevation in CDATA and a time without zone as UTC', () => {
    const points = line(5).map(
      (p, i) =>
        `<trkpt lat="${p.lat}" lon="${p.lon}"><ele><![CDATA[${p.ele}]]></ele><time>2024-03-31T0${i}:59:00.25</time></trkpt>`,
    );
    const track = read(wrap(`<trk><trkseg>${points.join('')}</trkseg></trk>`));
    expect(Array.from(track.elevation!)).toEqual([0, 1, 2, 3, 4]);
    expect(Array.from(track.time!)).toEqual([0, 3600, 7200, 10800, 14400]);
  });

  it('is chosen by name or number, tracks before routes, empty ones not counted', () => {
    const points = (tag: string, lon: number): string =>
      line(5)
        .map((p) => `<${tag} lat="${p.lat}" lon="${lon}"><ele>1</ele></${tag}>`)
        .join('');
    const body = `<rte><name>Plan</name>${points('rtept', 1)}</rte><trk><name>None</name></trk><trk><name>7</name><trkseg>${points('trkpt', 2)}</trkseg></trk>`;
    const longitude = (choice: string | number): number => read(wrap(body), choice).longitudeDeg![0]!;
    expect([longitude(1), longitude('7'), longitude(2), longitude('Plan')]).toEqual([2, 2, 1, 1]);
  });

  it('leaves no trace on the global object', () => {
    const before = Object.getOwnPropertyNames(globalThis).sort();
    read(write(line(5)));
    expect(() => read('<gpx>')).toThrow('unclosed tag');
    expect(Object.getOwnPropertyNames(globalThis).sort()).toEqual(before);
  });

  it('of 130,000 points does not overflow', () => {
    const track = read(
      write(Array.from({ length: 130_000 }, (_, i) => ({ lat: 51 + i * 1e-5, lon: 0, ele: 0 }))),
    );
    expect([track.size, track.repairs]).toEqual([130_000, []]);
  });
});
