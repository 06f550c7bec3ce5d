import { InputError } from '../problems/input-error.ts';

/** What a chooser needs to know of each track in a file. */
export interface Candidate {
  readonly name: string | null;
  /** `track`, `route`, `line` */
  readonly what: string;
  readonly points: number;
}

const LISTED = 20;

/**
 * Picks one of several tracks of a file.
 *
 * @param candidates in file order; at least one
 * @param choice a name, or a number from 1; undefined where the file has only one
 * @returns index of the chosen one
 * @throws InputError `several-tracks` when there are several and no choice, or several of that name;
 *   `no-such-track` when none fits; both list what there is
 */
export function chooseTrack(
  candidates: readonly Candidate[],
  choice: string | number | undefined,
  file: string,
): number {
  const list = candidates.slice(0, LISTED).map((c, i) => `${i + 1} ${describe(c)}`);
  if (candidates.length > LISTED) list.push(`... ${candidates.length} in all`);
  const allowed = `track: a name or number of ${list.join(', ')}`;
  const refuse = (code: string, message: string, found: string): never => {
    throw new InputError({ code, place: { file }, message, found, allowed });
  };
  if (choice === undefined) {
    if (candidates.length === 1) return 0;
    return refuse('several-tracks', 'the file has several tracks and none is chosen', `${candidates.length}`);
  }
  const named = candidates.flatMap((c, i) => (c.name !== null && c.name === String(choice) ? [i] : []));
  if (typeof choice === 'string' && named.length > 1)
    return refuse('several-tracks', 'several tracks have the chosen name; give a number', `'${choice}'`);
  if (typeof choice === 'string' && named.length === 1) return named[0]!;
  const number = Number(choice);
  if (Number.isInteger(number) && number >= 1 && number <= candidates.length) return number - 1;
  return refuse('no-such-track', 'the file has no such track', `'${choice}'`);
}

function describe(candidate: Candidate): string {
  const name = candidate.name === null ? '' : `'${candidate.name}' `;
  return `${name}(${candidate.what}, ${candidate.points} points)`;
}
