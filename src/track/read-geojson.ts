import { InputError } from '../problems/input-error.ts';
import { chooseTrack } from './choose-track.ts';
import { findJsonFault } from './find-json-fault.ts';
import { lineOf } from './line-of.ts';
import type { RawTrack } from './raw-track.ts';

interface Line {
  readonly key: string;
  readonly name: string | null;
  /** One array of positions a segment. */
  readonly segments: readonly (readonly unknown[])[];
}
type Json = Readonly<Record<string, unknown>>;

/**
 * Reads a GeoJSON track (RFC 7946): a LineString or a MultiLineString (its parts are segments), alone, as a
 * Feature, or as one of a FeatureCollection or GeometryCollection. Positions are [longitude, latitude, elevation].
 *
 * @param text the decoded file
 * @param file name for messages
 * @param choice name (property `name`) or number from 1 where there are several lines
 * @returns the points as the file gives them; elevation NaN where a position has two numbers, or null as third
 * @throws InputError `json-syntax`, `not-geojson`, `no-track`, `bad-position`, `out-of-range`; see chooseTrack
 */
export function readGeoJson(text: string, file: string, choice: string | number | undefined): RawTrack {
  const lines = linesOf(parseJson(text, file), '', null, file).filter((line) => sizeOf(line) > 0);
  if (lines.length === 0)
    throw new InputError({
      code: 'no-track',
      place: { file },
      message: 'the file holds no line',
      allowed: 'a LineString or MultiLineString with coordinates',
    });
  const candidates = lines.map((line) => ({ name: line.name, what: 'line', points: sizeOf(line) }));
  return columns(lines[chooseTrack(candidates, choice, file)]!, file);
}

function sizeOf(line: Line): number {
  return line.segments.reduce((sum, segment) => sum + segment.length, 0);
}

function parseJson(text: string, file: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    const offset = findJsonFault(text) ?? 0;
    throw new InputError({
      code: 'json-syntax',
      place: { file, ...lineOf(text, offset) },
      message: offset >= text.length ? 'the JSON text ends too early' : 'the text is not JSON from here on',
      allowed: 'GeoJSON (RFC 7946)',
    });
  }
}

function isObject(value: unknown): value is Json {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

function linesOf(value: unknown, key: string, name: string | null, file: string): Line[] {
  const refuse = (at: string, message: string, found: unknown, allowed: string): never => {
    const place = at === '' ? { file } : { file, key: at };
    throw new InputError({ code: 'not-geojson', place, message, found: show(found), allowed });
  };
  const inside = (part: string): string => (key === '' ? part : `${key}.${part}`);
  if (!isObject(value)) return refuse(key, 'this is no GeoJSON object', value, 'an object with a type');
  const list = (part: string): readonly unknown[] => {
    const found = value[part];
    return Array.isArray(found)
      ? found
      : refuse(inside(part), 'a list is missing', found, `an array of ${part}`);
  };
  switch (value.type) {
    case 'FeatureCollection':
      return list('features').flatMap((f, i) => linesOf(f, inside(`features[${i}]`), null, file));
    case 'GeometryCollection':
      return list('geometries').flatMap((g, i) => linesOf(g, inside(`geometries[${i}]`), name, file));
    case 'Feature': {
      const properties = value.properties;
      const own = isObject(properties) && typeof properties.name === 'string' ? properties.name : null;
      return value.geometry === null ? [] : linesOf(value.geometry, inside('geometry'), own, file);
    }
    case 'LineString':
      return [{ key: inside('coordinates'), name, segments: [list('coordinates')] }];
    case 'MultiLineString': {
      const segments = list('coordinates').map((part, i) =>
        Array.isArray(part)
          ? (part as readonly unknown[])
          : refuse(inside(`coordinates[${i}]`), 'a list is missing', part, 'an array of positions'),
      );
      return [{ key: inside('coordinates'), name, segments }];
    }
    case 'Point':
    case 'MultiPoint':
    case 'Polygon':
    case 'MultiPolygon':
      return [];
    default:
      return refuse(
        inside('type'),
        'this type is not of GeoJSON',
        value.type,
        'LineString, MultiLineString, Feature, FeatureCollection',
      );
  }
}

function columns(line: Line, file: string): RawTrack {
  const size = sizeOf(line);
  const segment = new Int32Array(size);
  const latitudeDeg = new Float64Array(size);
  const longitudeDeg = new Float64Array(size);
  const elevation = new Float64Array(size);
  let elevations = 0;
  let n = 0;
  line.segments.forEach((positions, s) => {
    positions.forEach((position, i) => {
      const part = line.segments.length > 1 ? `[${s}][${i}]` : `[${i}]`;
      const [lon, lat, ele] = checkPosition(position, `${line.key}${part}`, file);
      segment[n] = s;
      longitudeDeg[n] = lon;
      latitudeDeg[n] = lat;
      elevation[n] = ele;
      if (!Number.isNaN(ele)) elevations++;
      n++;
    });
  });
  return {
    file,
    name: line.name,
    format: 'geojson',
    size,
    line: null,
    segment,
    distance: null,
    latitudeDeg,
    longitudeDeg,
    elevation: elevations > 0 ? elevation : null,
    grade: null,
    heading: null,
    headwind: null,
    time: null,
    speed: null,
    throttle: null,
  };
}

function checkPosition(position: unknown, key: string, file: string): readonly [number, number, number] {
  const parts: readonly unknown[] = Array.isArray(position) ? position : [];
  const [lon, lat, third] = parts;
  const ele = third ?? Number.NaN;
  if (typeof lon !== 'number' || typeof lat !== 'number' || typeof ele !== 'number')
    throw new InputError({
      code: 'bad-position',
      place: { file, key },
      message: 'the position is not one of numbers',
      found: show(position),
      allowed: '[longitude, latitude, elevation]',
    });
  if (!(lat >= -90 && lat <= 90 && lon >= -180 && lon <= 180))
    throw new InputError({
      code: 'out-of-range',
      place: { file, key },
      message: 'the position is out of range',
      found: show(position),
      allowed: 'longitude -180 to 180, then latitude -90 to 90 degrees',
    });
  return [lon, lat, ele];
}

function show(value: unknown): string {
  const text =
    value === undefined
      ? 'nothing'
      : JSON.stringify(value, (_, part) => (part === Infinity || part === -Infinity ? String(part) : part));
  return text.length > 60 ? `${text.slice(0, 57)}...` : text;
}
