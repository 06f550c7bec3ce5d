import { candidateName } from '../case/candidate-schema.ts';
import { type Editable, editCase } from '../case/edit-case.ts';
import { readCaseFile } from '../case/read-case-file.ts';
import { TUNE_DESIGNS } from '../case/tune-schema.ts';
import { valueAt } from '../case/yaml-source.ts';
import { InputError } from '../problems/input-error.ts';
import type { TuneResult } from './tune-result.ts';

/** A proposal that shall become a candidate of the case. */
export interface Addition {
  /** Of a way to gains; or the one to take. */
  readonly design: (typeof TUNE_DESIGNS)[number] | 'best';
  /** null: the name that it has as a proposal. */
  readonly name: string | null;
}

/**
 * Reads `DESIGN` or `DESIGN=NAME`.
 *
 * @throws InputError `unknown-design`, `bad-name`
 */
export function readAddition(text: string): Addition {
  const cut = text.indexOf('=');
  const word = cut < 0 ? text : text.slice(0, cut);
  const name = cut < 0 ? null : text.slice(cut + 1);
  const design = [...TUNE_DESIGNS, 'best' as const].find((one) => one === word);
  if (design === undefined)
    throw new InputError({
      code: 'unknown-design',
      place: {},
      message: `'${word}' is no way to gains`,
      allowed: `best, ${TUNE_DESIGNS.join(', ')}; with =NAME behind it for another name`,
    });
  if (name !== null && !candidateName.safeParse(name).success)
    throw new InputError({
      code: 'bad-name',
      place: {},
      message: `'${name}' cannot be the name of a candidate`,
      allowed: 'lower-case letters, digits and hyphens, up to 41, not a hyphen first',
    });
  return { design, name };
}

/**
 * Refuses, before the work begins, what could not be added: names that the case has already, or that are given twice,
 * and gains that would be those of another case, because changes beside it reach further than `tune`.
 *
 * @throws InputError `doubled-name`, `added-to-another-case`; and what the case itself is refused for
 */
export function checkAdditions(
  text: string,
  file: string,
  additions: readonly Addition[],
  overrides: readonly string[],
): void {
  if (additions.length === 0) return;
  const far = overrides.find((override) => !override.startsWith('tune.'));
  if (far !== undefined)
    throw new InputError({
      code: 'added-to-another-case',
      place: { file },
      message: `the gains would be those of the case with ${far}, which the file does not have`,
      allowed: 'the change made in the file first, or changes under tune. only',
    });
  const document = readCaseFile(text, file, overrides);
  const taken = new Set(document.file.candidates.map(({ name, kind }) => name ?? kind));
  for (const { name } of additions) {
    if (name === null) continue;
    if (taken.has(name)) throw nameTaken(file, name);
    taken.add(name);
  }
}

/**
 * A case with proposals among its candidates; every other byte of its text stays.
 *
 * @param text of the case that was tuned
 * @throws InputError `not-proposed` for a design that found no gains, `doubled-name`; as `editCase`
 */
export function addProposals(
  text: string,
  file: string,
  result: TuneResult,
  additions: readonly Addition[],
): string {
  let edited = text;
  for (const { design, name } of additions) {
    const found = result.tuned.find(
      (one) =>
        one.proposal !== null &&
        (design === 'best' ? one.name === result.chosen : one.proposal.design === design),
    );
    if (found === undefined || found.proposal === null) throw notProposed(file, result, design);
    const { value } = readCaseFile(edited, file).source;
    const candidates = valueAt(value, ['candidates']) as readonly {
      readonly name?: string;
      readonly kind: string;
    }[];
    const called = name ?? found.name;
    if (candidates.some((one) => (one.name ?? one.kind) === called)) throw nameTaken(file, called);
    const candidate: Editable = { ...found.proposal.file, name: called };
    edited = editCase(edited, ['candidates', candidates.length], candidate);
  }
  // What is written must be a case that runs.
  readCaseFile(edited, file);
  return edited;
}

const nameTaken = (file: string, name: string): InputError =>
  new InputError({
    code: 'doubled-name',
    place: { file, key: 'candidates' },
    message: 'the name is taken already',
    found: name,
    allowed: 'another name: --add DESIGN=NAME',
  });

function notProposed(file: string, result: TuneResult, design: string): InputError {
  const made = result.tuned.flatMap(({ proposal }) => (proposal === null ? [] : [proposal.design]));
  const reason = result.notProposed.find((one) => one.design === design)?.reason;
  return new InputError({
    code: 'not-proposed',
    place: { file, key: 'tune.designs' },
    message: `there is no proposal ${design} that could be added${reason === undefined ? '' : `: ${reason}`}`,
    allowed: made.length === 0 ? 'nothing: there is no proposal' : made.join(', '),
  });
}
