import type { ResultSummary } from './read-summary.ts';

/** A file that went into one run or both. */
export interface FileChange {
  readonly change: 'same' | 'changed' | 'renamed' | 'only before' | 'only after';
  /** The case itself, or a file that it names. */
  readonly role: 'case' | 'file';
  readonly before: InputFile | null;
  readonly after: InputFile | null;
}
interface InputFile {
  readonly name: string;
  readonly sha256: string;
}

/** A value that the two runs do not have in common. */
export interface ValueChange {
  readonly of: 'case' | 'vehicle';
  /** Dotted path. */
  readonly key: string;
  /** null: that run has no such value. */
  readonly before: UsedValue | null;
  readonly after: UsedValue | null;
}
export interface UsedValue {
  readonly value: string;
  /** A default, not given. */
  readonly isDefault: boolean;
}

/** What is different in what went into two runs. */
export interface InputChanges {
  readonly files: readonly FileChange[];
  /** Changes given beside the case, as typed. */
  readonly overrides: { readonly before: readonly string[]; readonly after: readonly string[] };
  /** null: a summary of schema 1.0 does not tell values. */
  readonly values: readonly ValueChange[] | null;
}

export function inputChanges(before: ResultSummary, after: ResultSummary): InputChanges {
  return {
    files: fileChanges(before.inputs, after.inputs),
    overrides: { before: before.overrides, after: after.overrides },
    values: valueChanges(before, after),
  };
}

/** The case stands first in both; the others are matched by name, then by what is in them. */
function fileChanges(before: readonly InputFile[], after: readonly InputFile[]): FileChange[] {
  const left = before.slice(1);
  const matchOf = new Map<InputFile, InputFile>();
  for (const same of [
    (a: InputFile, b: InputFile) => a.name === b.name,
    (a: InputFile, b: InputFile) => a.sha256 === b.sha256,
  ])
    for (const file of after.slice(1)) {
      const at = matchOf.has(file) ? -1 : left.findIndex((one) => same(one, file));
      if (at >= 0) matchOf.set(file, left.splice(at, 1)[0]!);
    }
  return [
    fileChange('case', before[0] ?? null, after[0] ?? null),
    ...after.slice(1).map((file) => fileChange('file', matchOf.get(file) ?? null, file)),
    ...left.map((file) => fileChange('file', file, null)),
  ];
}

function fileChange(role: FileChange['role'], before: InputFile | null, after: InputFile | null): FileChange {
  const plain = (file: InputFile | null): InputFile | null =>
    file === null ? null : { name: file.name, sha256: file.sha256 };
  const both = { role, before: plain(before), after: plain(after) };
  if (before === null) return { change: 'only after', ...both };
  if (after === null) return { change: 'only before', ...both };
  if (before.sha256 !== after.sha256) return { change: 'changed', ...both };
  return { change: before.name === after.name ? 'same' : 'renamed', ...both };
}

function valueChanges(before: ResultSummary, after: ResultSummary): ValueChange[] | null {
  const [was, is] = [valuesOf(before), valuesOf(after)];
  if (was === null || is === null) return null;
  return [...new Set([...is.keys(), ...was.keys()])]
    .filter((id) => was.get(id)?.value !== is.get(id)?.value)
    .map((id) => {
      const [of, key] = id.split('\n') as [ValueChange['of'], string];
      return { of, key, before: was.get(id) ?? null, after: is.get(id) ?? null };
    });
}

/** Every value that a run used, given or default, in that order. */
function valuesOf({ given, defaults }: ResultSummary): Map<string, UsedValue> | null {
  if (given === undefined) return null;
  const idOf = ({ of, key }: { of: string; key: string }) => `${of}\n${key}`;
  const used = (isDefault: boolean) => (one: { of: string; key: string; value: string }) =>
    [idOf(one), { value: one.value, isDefault }] as const;
  return new Map([...given.map(used(false)), ...defaults.map(used(true))]);
}
