import { describe, expect, it } from 'vitest';
import { findJsonFault } from '../../src/track/find-json-fault.ts';
import { readTrack } from '../../src/track/read-track.ts';
import type { Track } from '../../src/track/track.ts';
import { expectClose } from '../compare.ts';

const read = (value: unknown, choice?: string | number): Track =>
  readTrack({ name: 'a.json', bytes: new TextEncoder().encode(JSON.stringify(value)) }, choice);
const line = (n: number, from = 0): number[][] =>
  Array.from({ length: n }, (_, i) => [7, 46 + (from + i) * 0.001, 500 + from + i]);
const feature = (name: string, coordinates: number[][]): unknown => ({
  type: 'Feature',
  properties: { name },
  geometry: { type: 'LineString', coordinates },
});

describe('a GeoJSON track', () => {
  it('is a LineString, bare or as a Feature, alone or in a collection', () => {
    const bare = read({ type: 'LineString', coordinates: line(6) });
    expect([bare.format, bare.name, bare.size, bare.time]).toEqual(['geojson', null, 6, null]);
    expectClose(bare.elevation!, [500, 501, 502, 503, 504, 505], 0);
    expectClose(bare.latitudeDeg!, [46, 46.001, 46.002, 46.003, 46.004, 46.005], 1e-12);
    const named = read(feature('Pass', line(6)));
    expect(named).toEqual({ ...bare, name: 'Pass' });
    const point = { type: 'Feature', properties: null, geometry: { type: 'Point', coordinates: [7, 46] } };
    expect(read({ type: 'FeatureCollection', features: [point, feature('Pass', line(6))] })).toEqual(named);
    const collection = {
      type: 'GeometryCollection',
      geometries: [{ type: 'LineString', coordinates: line(6) }],
    };
    expect(read(collection)).toEqual(bare);
  });

  it('is chosen by name or number', () => {
    const features = [feature('Up', line(6)), feature('Down', line(6).reverse())];
    const collection = { type: 'FeatureCollection', features };
    expect(read(collection, 'Down').elevation![0]).toBe(505);
    expect(read(collection, 1).elevation![0]).toBe(500);
  });

  it('joins the parts of a MultiLineString as segments', () => {
    const track = read({ type: 'MultiLineString', coordinates: [line(4), line(4, 4)] });
    expect(track.size).toBe(8);
    expect(track.repairs).toEqual([
      expect.objectContaining({ kind: 'segment_joined', points: 0, line: null }),
    ]);
  });

  it('may have a null for an unknown elevation', () => {
    const coordinates: unknown[] = line(6);
    coordinates[2] = [7, 46.002, null];
    const track = read({ type: 'LineString', coordinates });
    expectClose(track.elevation!, [500, 501, 502, 503, 504, 505], 1e-3);
    expect(track.repairs).toEqual([expect.objectContaining({ kind: 'missing_elevation', points: 1 })]);
  });
});

describe('the search for a fault in JSON', () => {
  // Offsets counted by hand.
  it.each([
    ['', 0],
    ['{"a": [1, 2}', 11],
    ['[1, 2,]', 6],
    ['[1 2]', 3],
    ['{"a" 1}', 5],
    ['{a: 1}', 1],
    ["['a']", 1],
    ['[01]', 1],
    ['[.5]', 1],
    ['[NaN]', 1],
    ['{"a": 1} x', 9],
    ['["open', 1],
    ['[1, {"a": [', 11],
    ['{"a": 1,}', 8],
  ])('finds where %s stops being JSON', (text, offset) => {
    expect(findJsonFault(text)).toBe(offset);
  });

  it.each(['[]', '{}', ' [1, -2.5e+3, "a\\u00e9\\n", {"b": [null, true, {}]}, []] ', '"text"', '0'])(
    'finds none in %s',
    (text) => {
      expect(() => JSON.parse(text)).not.toThrow();
      expect(findJsonFault(text)).toBeNull();
    },
  );
});
