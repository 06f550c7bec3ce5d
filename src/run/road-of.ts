import { type CaseDocument, readCaseFile } from '../case/read-case-file.ts';
import { profileOf, roadOptionsOf, trackChoiceOf } from '../case/road-of.ts';
import { type Path, placeOf } from '../case/yaml-source.ts';
import { InputError } from '../problems/input-error.ts';
import type { Place } from '../problems/place.ts';
import type { Road } from '../road/road.ts';
import { roadOfProfile } from '../road/road-of-profile.ts';
import { roadOfTrack } from '../road/road-of-track.ts';
import { decodeText } from '../track/decode-text.ts';
import { readTrack } from '../track/read-track.ts';
import { caseNameOf } from './case-name.ts';
import { InputLog, type Reader } from './input-log.ts';
import { stretchesOnTrack } from './places-on-road.ts';
import type { RoadResult } from './road-result.ts';
import { SCHEMA_VERSION, TOOL_VERSION } from './tool-version.ts';

export interface RoadRequest {
  /** Name of the case or track. */
  readonly file: string;
  readonly read: Reader;
  /** Changes given beside the case: `road.grid_m=5`. */
  readonly overrides?: readonly string[];
}

/**
 * The road of a case, or of a bare track with the default road options. The vehicle of a case is not read.
 *
 * @throws InputError for what the reader, the case or the track refuse
 */
export function roadOf({ file, read, overrides = [] }: RoadRequest): RoadResult {
  const log = new InputLog(read);
  const isCase = /\.ya?ml$/i.test(file) || (/\.json$/i.test(file) && !isGeoJson(read(file)));
  const document = isCase
    ? readCaseFile(decodeText(log.read(file), file), file, overrides)
    : readCaseFile(caseAround(file), file, overrides);
  const road = roadOfCase(
    document,
    log,
    file,
    isCase ? placeOf(document.source, ['track', 'file']) : undefined,
  );
  return {
    schemaVersion: SCHEMA_VERSION,
    toolVersion: TOOL_VERSION,
    name: caseNameOf(file),
    inputs: log.files,
    overrides,
    road,
    defaults: document.defaults.filter(({ key }) => /^(?:track|road|wind|air)\b/.test(key)),
    warnings: road.warnings,
  };
}

/**
 * Reads the track that a case names, or lays the profile written in it.
 *
 * @param namedAt where the case names the track
 */
export function roadOfCase(document: CaseDocument, log: InputLog, file: string, namedAt?: Place): Road {
  return roadMaker(document, log, file, namedAt)(document);
}

/**
 * Reads the track of a case once.
 *
 * @param tracks what reads it
 * @returns what makes the road over it: of the case, or of the same case in another wind, direction, or set speed
 */
export function roadMaker(
  document: CaseDocument,
  log: InputLog,
  file: string,
  namedAt?: Place,
  tracks: typeof readTrack = readTrack,
): (document: CaseDocument) => Road {
  const profile = profileOf(document);
  const inCase = ({ key = 'track' }: Place): Place => placeOf(document.source, stepsOf(key));
  if (profile !== null) {
    const { nominalSpeed } = roadOptionsOf(document);
    const scale = profile.by === 'time' ? nominalSpeed : 1;
    stretchesOnTrack(document, scale * profile.pieces.reduce((sum, { extent }) => sum + extent, 0));
    return (here) => placing(inCase, () => roadOfProfile(profile, roadOptionsOf(here, caseNameOf(file))));
  }
  const name = document.trackFile ?? '';
  const bytes = log.read(name, namedAt);
  const track = tracks({ name, bytes }, trackChoiceOf(document) ?? undefined);
  stretchesOnTrack(document, track.distance[track.size - 1] ?? 0);
  // What a key asks of the track has its place in the case or the option, what the track is in its file.
  const place = (found: Place): Place => {
    const inFile = { file: name, ...found };
    if (found.key === undefined || found.key === 'track') return inFile;
    const asked = inCase(found);
    return asked.file === name ? inFile : asked;
  };
  return (here) =>
    placing(place, () => roadOfTrack(track, roadOptionsOf(here, track.name ?? caseNameOf(name))));
}

/** `track.profile.3` as a path. */
const stepsOf = (key: string): Path =>
  key.split('.').map((step) => (/^\d+$/.test(step) ? Number(step) : step));

/** Makes a road; what is refused without a file gets its place by `placed`. */
function placing(placed: (found: Place) => Place, make: () => Road): Road {
  try {
    return make();
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    const [first, ...others] = error.problems.map((problem) =>
      problem.place.file === undefined ? { ...problem, place: placed(problem.place) } : problem,
    );
    throw first === undefined ? error : new InputError(first, ...others);
  }
}

/** A case of which only the road is looked at: so a bare track has the keys, the checks and the defaults of a case. */
function caseAround(track: string): string {
  return JSON.stringify({
    track: { file: track },
    vehicle: { mass: { kerb_kg: 100 }, road_load: { cda_m2: 0.5, crr: 0.01 } },
    hold: { set_speed_kmh: 60 },
    candidates: [{ kind: 'locked', throttle_pct: 0 }],
  });
}

/** Tells a GeoJSON text from a case written in JSON: by its `type` (RFC 7946, section 1.4), which no case has. */
function isGeoJson(bytes: Uint8Array): boolean {
  try {
    const value: unknown = JSON.parse(new TextDecoder().decode(bytes));
    return typeof value === 'object' && value !== null && 'type' in value;
  } catch {
    return false;
  }
}
