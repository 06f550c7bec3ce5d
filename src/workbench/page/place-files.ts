import { editCase } from '../../case/edit-case.ts';
import { type CaseDocument, readCaseFile } from '../../case/read-case-file.ts';
import { isMapping } from '../../case/schema-walk.ts';
import { starterCase } from '../../case/starter-case.ts';
import { readYaml, valueAt } from '../../case/yaml-source.ts';
import { InputError } from '../../problems/input-error.ts';
import { filesNamed } from '../../run/carried-case.ts';
import { decodeText } from '../../track/decode-text.ts';
import { fileOf, type Study, studyFile, textOf, withFile, withText } from './study.ts';

/** A file as it was dropped or chosen: its own name, without folders. */
export interface BroughtFile {
  readonly name: string;
  readonly bytes: Uint8Array;
}

/**
 * Puts files where they belong: a case becomes the study, with the files that it names among what is brought or is here
 * already; a vehicle and a track take the place of those that are here. Without a study, one is begun from the starter.
 *
 * @throws InputError for a file that is neither case, vehicle nor track
 */
export function placeFiles(study: Study | null, brought: readonly BroughtFile[]): Study {
  const kinds = brought.map((file) => ({ ...file, kind: kindOf(file) }));
  const newCase = kinds.findLast(({ kind }) => kind === 'case');
  const others = kinds.filter((file) => file !== newCase && file.kind !== 'case');
  let placed = newCase === undefined ? (study ?? starter()) : studyOf(newCase, others, study);
  const named = namedBy(placed);
  for (const file of others) {
    const known = named.find((name) => lastPart(name) === file.name);
    if (known !== undefined) placed = withFile(placed, known, file.bytes);
    else if (newCase === undefined) placed = replaced(placed, file);
  }
  return placed;
}

/** Files that the case of a study names and that are not here; none where the case cannot be read. */
export const missingFiles = (study: Study): readonly string[] =>
  namedBy(study).filter((name) => fileOf(study, name) === undefined);

type Kind = 'case' | 'vehicle' | 'track';

function kindOf({ name, bytes }: BroughtFile): Kind {
  if (/\.(?:gpx|csv|geojson)$/i.test(name)) return 'track';
  if (/\.(?:ya?ml|json)$/i.test(name)) {
    const { value } = readYaml(decodeText(bytes, name), name);
    if (isMapping(value)) {
      if ('candidates' in value || 'hold' in value) return 'case';
      if ('mass' in value || 'road_load' in value || 'drive' in value) return 'vehicle';
      if ('type' in value) return 'track';
    }
  }
  throw new InputError({
    code: 'unknown-file',
    place: { file: name },
    message: 'is neither a case, nor a vehicle, nor a track',
    allowed: 'a case or a vehicle (.yaml, .json), a track (.gpx, .csv, .geojson)',
  });
}

function starter(): Study {
  const [first, ...files] = starterCase().map(({ name, text }) =>
    studyFile(name, new TextEncoder().encode(text)),
  );
  if (first === undefined) throw new RangeError('the starter has no case');
  return { file: first.name, files: [first, ...files] };
}

/** A case with those of its files that are at hand. */
function studyOf(newCase: BroughtFile, others: readonly BroughtFile[], study: Study | null): Study {
  const alone = { file: newCase.name, files: [studyFile(newCase.name, newCase.bytes)] };
  const here = study?.files ?? [];
  const files = namedBy(alone).flatMap((name) => {
    const file = [...others, ...here].find((one) => lastPart(one.name) === lastPart(name));
    return file === undefined ? [] : [studyFile(name, file.bytes)];
  });
  return { ...alone, files: [...alone.files, ...files] };
}

function replaced(study: Study, { name, bytes, kind }: BroughtFile & { readonly kind: Kind }): Study {
  const text = textOf(study, study.file);
  const { value } = readYaml(text, study.file);
  const isProfile = valueAt(value, ['track', 'file']) === undefined;
  const edited =
    kind === 'vehicle'
      ? editCase(text, ['vehicle'], name)
      : isProfile
        ? editCase(text, ['track'], { file: name })
        : editCase(text, ['track', 'file'], name);
  return withFile(withText(study, study.file, edited), name, bytes);
}

function namedBy(study: Study): readonly string[] {
  const document = readable(study);
  return document === null ? [] : filesNamed(document);
}

function readable(study: Study): CaseDocument | null {
  try {
    return readCaseFile(textOf(study, study.file), study.file);
  } catch (error) {
    if (error instanceof InputError) return null;
    throw error;
  }
}

const lastPart = (name: string): string => name.split(/[\\/]/).at(-1) ?? name;
