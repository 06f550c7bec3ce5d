import type { GpxPath } from 'gpxparser';
import { InputError } from '../problems/input-error.ts';
import { chooseTrack } from './choose-track.ts';
import { parseNumber } from './parse-number.ts';
import { parseTime } from './parse-time.ts';
import type { RawTrack } from './raw-track.ts';
import { SafeGpxParser } from './safe-gpx-parser.ts';
import type { XmlNode } from './xml-node.ts';

/**
 * Reads GPX 1.0 or 1.1 text: one of its tracks or routes, all segments of it, with any namespace prefix.
 *
 * @param text the decoded file
 * @param file name for messages
 * @param choice name or number (from 1; tracks first, then routes) where there are several
 * @returns the points as the file gives them; elevation and time NaN where a point has none
 * @throws InputError with line: see SafeGpxParser, chooseTrack, and `no-track`, `missing-value`, `not-a-number`,
 *   `out-of-range` of a latitude or longitude
 */
export function readGpx(text: string, file: string, choice: string | number | undefined): RawTrack {
  const parser = new SafeGpxParser(file);
  parser.parse(text);
  const root = parser.xmlSource as XmlNode;
  const nodes = [...root.querySelectorAll('trk'), ...root.querySelectorAll('rte')];
  const found = [...parser.tracks, ...parser.routes]
    .map((path, i) => ({ path, node: nodes[i]!, what: i < parser.tracks.length ? 'track' : 'route' }))
    .filter(({ path }) => path.points.length > 0);
  if (found.length === 0)
    throw new InputError({
      code: 'no-track',
      place: { file },
      message: 'the file holds no track and no route',
      found: `waypoints: ${root.querySelectorAll('wpt').length}`,
      allowed: '<trk> with <trkpt>, or <rte> with <rtept>',
    });
  const candidates = found.map(({ path, what }) => ({
    name: nameOf(path),
    what,
    points: path.points.length,
  }));
  const { path, node, what } = found[chooseTrack(candidates, choice, file)]!;
  return columns(path, node.querySelectorAll(what === 'track' ? 'trkpt' : 'rtept'), file);
}

function columns(path: GpxPath, nodes: readonly XmlNode[], file: string): RawTrack {
  const size = path.points.length;
  const line = new Int32Array(size);
  const segment = new Int32Array(size);
  const latitudeDeg = new Float64Array(size);
  const longitudeDeg = new Float64Array(size);
  const elevation = new Float64Array(size);
  const time = new Float64Array(size);
  let elevations = 0;
  let times = 0;
  for (let i = 0; i < size; i++) {
    const point = path.points[i]!;
    const node = nodes[i]!;
    checkAngle(node, 'lat', 90, file);
    checkAngle(node, 'lon', 180, file);
    line[i] = node.line;
    if (i > 0) segment[i] = segment[i - 1]! + (node.parent === nodes[i - 1]!.parent ? 0 : 1);
    latitudeDeg[i] = point.lat;
    longitudeDeg[i] = point.lon;
    elevation[i] = point.ele ?? Number.NaN;
    time[i] = secondsOf(node, file);
    if (point.ele !== null) elevations++;
    if (!Number.isNaN(time[i]!)) times++;
  }
  return {
    file,
    name: nameOf(path),
    format: 'gpx',
    size,
    line,
    segment,
    distance: null,
    latitudeDeg,
    longitudeDeg,
    elevation: elevations > 0 ? elevation : null,
    grade: null,
    heading: null,
    headwind: null,
    time: times > 0 ? time : null,
    speed: null,
    throttle: null,
  };
}

function secondsOf(point: XmlNode, file: string): number {
  const node = point.child('time');
  const text = node?.innerHTML ?? '';
  if (node === null || text === '') return Number.NaN;
  const seconds = parseTime(text);
  if (seconds !== null) return seconds;
  throw new InputError({
    code: 'not-a-time',
    place: { file, line: node.line },
    message: 'time is not a date and time',
    found: `'${text}'`,
    allowed: 'ISO 8601 such as 2024-05-10T07:20:55Z',
  });
}

function nameOf(path: GpxPath): string | null {
  return path.name === null || path.name === '' ? null : path.name;
}

function checkAngle(node: XmlNode, attribute: 'lat' | 'lon', limit: number, file: string): void {
  const text = node.getAttribute(attribute);
  const value = text === null ? null : parseNumber(text.trim());
  if (value !== null && value >= -limit && value <= limit) return;
  const name = attribute === 'lat' ? 'latitude' : 'longitude';
  const problem =
    text === null
      ? { code: 'missing-value', message: `the point has no ${name}` }
      : value === null || value === Number.POSITIVE_INFINITY
        ? { code: 'not-a-number', message: `${name} is not a number` }
        : { code: 'out-of-range', message: `${name} is out of range` };
  throw new InputError({
    ...problem,
    place: { file, line: node.line },
    ...(text === null ? {} : { found: `'${text}'` }),
    allowed: `${attribute}= with a decimal number from -${limit} to ${limit} degrees`,
  });
}
