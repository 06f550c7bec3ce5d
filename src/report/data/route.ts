import type { Road } from '../../road/road.ts';
import type { UnfitPlace } from '../../study/bend-plan.ts';
import type { Hill, Stretch } from '../../study/findings.ts';
import { boundingBox, simplifyLine } from '../../track/plan-geometry.ts';
import { toKm, toKmh, toPct } from '../../units/convert.ts';
import { rounded } from './fixed.ts';
import { jsonText } from './json-text.ts';

/** No point of the road is further than this from the simplified line, in plan and in height [m]. */
const TOLERANCE = 1;

type Position = readonly [longitudeDeg: number, latitudeDeg: number, elevation: number];

interface Line {
  readonly longitudeDeg: Float64Array;
  readonly latitudeDeg: Float64Array;
  readonly elevation: Float64Array;
  /** Horizontal, along the road [m]. */
  readonly distance: Float64Array;
}

/**
 * route.geojson by RFC 7946: the driven (trimmed) road as a line with its figures, then a line for each hill, then
 * one for each place where speed hold does not belong.
 * Simplified to 1 m; positions to 1e-6 degree (about 0.1 m). A line over the antimeridian is cut there
 * (section 3.1.9), and the bounding box of such a road has its west east of its east (section 5.2). A road without
 * positions is one feature without a geometry (section 3.2), and no bounding box.
 */
export function routeGeoJson(road: Road, hills: readonly Hill[], unfit: readonly UnfitPlace[] = []): string {
  const { longitudeDeg, latitudeDeg, elevation, distance, size } = road;
  const line =
    longitudeDeg === null || latitudeDeg === null
      ? null
      : { longitudeDeg: longitudeDeg.map(wrapped), latitudeDeg, elevation, distance };
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
  const located =
    line === null
      ? []
      : [
          ...hills.map((hill) => hillFeature(road, line, hill)),
          ...unfit.map((place) => unfitFeature(road, line, place)),
        ];
  return jsonText({
    type: 'FeatureCollection',
    ...(line === null ? {} : { bbox: boxAround(line) }),
    features: [route, ...located],
  });
}

/** RFC 7946, section 5: west, south, lowest, east, north, highest. */
function boxAround({ latitudeDeg, longitudeDeg, elevation }: Line): number[] {
  const [west, south, east, north] = boundingBox(latitudeDeg, longitudeDeg);
  let [lowest, highest] = [elevation[0]!, elevation[0]!];
  for (const z of elevation) {
    if (z < lowest) lowest = z;
    if (z > highest) highest = z;
  }
  return [...written([west, south, lowest]), ...written([east, north, highest])];
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

/** The line of a stretch, from the knot before it to the knot behind it. */
function stretchGeometry(road: Road, line: Line, stretch: Stretch): object {
  let from = 0;
  while (from < road.size - 2 && road.distance[from + 1]! <= stretch.from) from++;
  let to = from + 1;
  while (to < road.size - 1 && road.distance[to]! < stretch.to) to++;
  return geometryOf(line, from, to);
}

function hillFeature(road: Road, line: Line, hill: Hill): object {
  return {
    type: 'Feature',
    geometry: stretchGeometry(road, line, hill),
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

function unfitFeature(road: Road, line: Line, place: UnfitPlace): object {
  return {
    type: 'Feature',
    geometry: stretchGeometry(road, line, place),
    properties: {
      kind: 'no_hold',
      reason: place.reason,
      from_km: rounded(toKm(place.from), 4),
      to_km: rounded(toKm(place.to), 4),
      bends: place.bends,
      lowest_kmh: rounded(toKmh(place.lowestSpeed), 3),
    },
  };
}

/** The line between two knots, both included, simplified. */
function geometryOf(line: Line, from: number, to: number): object {
  const part: Line = {
    longitudeDeg: line.longitudeDeg.subarray(from, to + 1),
    latitudeDeg: line.latitudeDeg.subarray(from, to + 1),
    elevation: line.elevation.subarray(from, to + 1),
    distance: line.distance.subarray(from, to + 1),
  };
  const kept = Array.from(
    simplifyLine(part, TOLERANCE),
    (i): Position => [part.longitudeDeg[i]!, part.latitudeDeg[i]!, part.elevation[i]!],
  );
  const parts = cutAtAntimeridian(kept).map((piece) => piece.map(written));
  return parts.length === 1
    ? { type: 'LineString', coordinates: parts[0] }
    : { type: 'MultiLineString', coordinates: parts };
}

const written = ([longitudeDeg, latitudeDeg, elevation]: Position): number[] => [
  rounded(longitudeDeg, 6),
  rounded(latitudeDeg, 6),
  rounded(elevation, 2),
];

/** Parts that do not cross 180 degrees of longitude; each ends on it. A point on it belongs to both sides. */
function cutAtAntimeridian(line: readonly Position[]): Position[][] {
  const parts: Position[][] = [[]];
  line.forEach((point, i) => {
    const before = line[i - 1];
    if (before !== undefined && Math.abs(point[0] - before[0]) > 180) {
      const side = before[0] > 0 ? 180 : -180;
      const run = point[0] + 2 * side - before[0];
      const t = run === 0 ? 0 : (side - before[0]) / run;
      const at = (k: 1 | 2): number => before[k] + t * (point[k] - before[k]);
      if (before[0] !== side) parts.at(-1)?.push([side, at(1), at(2)]);
      parts.push(point[0] === -side ? [] : [[-side, at(1), at(2)]]);
    }
    parts.at(-1)?.push(point);
  });
  // A line that only touches the antimeridian has a lone point on its other side.
  return parts.length === 1 ? parts : parts.filter((part) => part.length > 1);
}
