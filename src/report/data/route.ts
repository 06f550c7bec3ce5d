import { cos } from '../../numeric/elementary.ts';
import type { Road } from '../../road/road.ts';
import type { Hill } from '../../study/findings.ts';
import { WGS84_EQUATORIAL_RADIUS } from '../../units/constants.ts';
import { fromDeg, toKm, toPct } from '../../units/convert.ts';
import { rounded } from './fixed.ts';
import { jsonText } from './json-text.ts';
import { simplifyLine } from './simplify-line.ts';

/** No point of the road is further than this from the simplified line, height included [m]. */
const TOLERANCE = 1;

type Position = readonly [longitudeDeg: number, latitudeDeg: number, elevation: number];

interface Line {
  readonly longitudeDeg: Float64Array;
  readonly latitudeDeg: Float64Array;
  readonly elevation: Float64Array;
}

/**
 * route.geojson by RFC 7946: the driven (trimmed) road as a line with its figures, then a line for each hill.
 * Simplified to 1 m; positions to 1e-6 degree (about 0.1 m). A line over the antimeridian is cut there
 * (section 3.1.9). A road without positions is one feature without a geometry (section 3.2).
 */
export function routeGeoJson(road: Road, hills: readonly Hill[]): string {
  const { longitudeDeg, latitudeDeg, elevation, size } = road;
  const line =
    longitudeDeg === null || latitudeDeg === null
      ? null
      : { longitudeDeg: longitudeDeg.map(wrapped), latitudeDeg, elevation };
  const climb = climbOf(road);
  const route = {
    type: 'Feature',
    geometry: line === null ? null : geometryOf(line, 0, size - 1),
    properties: {
      kind: 'route',
      name: road.name,
      length_m: rounded(road.distance[size - 1] ?? 0, 2),
      climb_m: rounded(climb.up, 2),
      descent_m: rounded(climb.down, 2),
      simplified_to_m: TOLERANCE,
    },
  };
  const located = line === null ? [] : hills.map((hill) => hillFeature(road, line, hill));
  return jsonText({ type: 'FeatureCollection', features: [route, ...located] });
}

/** A longitude in [-180, 180]: a road over the antimeridian may count on. */
const wrapped = (degrees: number): number =>
  degrees >= -180 && degrees <= 180 ? degrees : degrees - 360 * Math.floor((degrees + 180) / 360);

/** Metres climbed and descended along the smoothed elevation. */
export function climbOf(road: Road): { readonly up: number; readonly down: number } {
  let up = 0;
  let down = 0;
  for (let i = 1; i < road.size; i++) {
    const rise = road.elevation[i]! - road.elevation[i - 1]!;
    if (rise > 0) up += rise;
    else down -= rise;
  }
  return { up, down };
}

function hillFeature(road: Road, line: Line, hill: Hill): object {
  let from = 0;
  while (from < road.size - 2 && road.distance[from + 1]! <= hill.from) from++;
  let to = from + 1;
  while (to < road.size - 1 && road.distance[to]! < hill.to) to++;
  return {
    type: 'Feature',
    geometry: geometryOf(line, from, to),
    properties: {
      kind: 'hill',
      hill: hill.number,
      hill_kind: hill.kind,
      from_km: rounded(toKm(hill.from), 4),
      to_km: rounded(toKm(hill.to), 4),
      mean_grade_pct: rounded(toPct(hill.meanGrade), 3),
      demand_pct: rounded(toPct(hill.share), 2),
    },
  };
}

/** The line between two knots, both included, simplified. */
function geometryOf(line: Line, from: number, to: number): object {
  const count = to - from + 1;
  const x = new Float64Array(count);
  const y = new Float64Array(count);
  const z = line.elevation.subarray(from, to + 1);
  const metresPerDegree = fromDeg(1) * WGS84_EQUATORIAL_RADIUS;
  const scale = cos(fromDeg(line.latitudeDeg[from] ?? 0));
  let turns = 0;
  for (let i = 0; i < count; i++) {
    const step = i === 0 ? 0 : line.longitudeDeg[from + i]! - line.longitudeDeg[from + i - 1]!;
    if (step > 180) turns -= 360;
    if (step < -180) turns += 360;
    x[i] = (line.longitudeDeg[from + i]! + turns) * scale * metresPerDegree;
    y[i] = line.latitudeDeg[from + i]! * metresPerDegree;
  }
  const kept = simplifyLine(x, y, z, TOLERANCE).map(
    (i): Position => [line.longitudeDeg[from + i]!, line.latitudeDeg[from + i]!, z[i]!],
  );
  const parts = cutAtAntimeridian(kept).map((part) => part.map(written));
  return parts.length === 1
    ? { type: 'LineString', coordinates: parts[0] }
    : { type: 'MultiLineString', coordinates: parts };
}

const written = ([longitudeDeg, latitudeDeg, elevation]: Position): number[] => [
  rounded(longitudeDeg, 6),
  rounded(latitudeDeg, 6),
  rounded(elevation, 2),
];

/** Parts that do not cross 180 degrees of longitude; each ends on it. */
function cutAtAntimeridian(line: readonly Position[]): Position[][] {
  const parts: Position[][] = [[]];
  line.forEach((point, i) => {
    const before = line[i - 1];
    if (before !== undefined && Math.abs(point[0] - before[0]) > 180) {
      const side = before[0] > 0 ? 180 : -180;
      const run = point[0] + 2 * side - before[0];
      const t = (side - before[0]) / run;
      const at = (k: 1 | 2): number => before[k] + t * (point[k] - before[k]);
      parts.at(-1)?.push([side, at(1), at(2)]);
      parts.push([[-side, at(1), at(2)]]);
    }
    parts.at(-1)?.push(point);
  });
  return parts;
}
