import { InputError } from '../problems/input-error.ts';

/** @throws InputError `not-a-case` for the name of a track where a case is asked for */
export function refuseTrack(path: string): void {
  if (!/\.(?:gpx|csv|geojson)$/i.test(path)) return;
  throw new InputError({
    code: 'not-a-case',
    place: { file: path },
    message: `is a track, not a case; a track alone goes to: ridgehold road ${path}`,
    allowed: 'a case in YAML or JSON that names the track',
  });
}
