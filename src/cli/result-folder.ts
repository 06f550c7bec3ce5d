import {
  accessSync,
  constants,
  existsSync,
  readdirSync,
  readFileSync,
  renameSync,
  rmdirSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs';
import { dirname, join, resolve } from 'node:path';
import { InputError } from '../problems/input-error.ts';
import { fileProblem } from './file-problem.ts';
import { makeFolder } from './make-folder.ts';

/** A file to be written: its name below the folder, with `/`, and what is in it. */
export type ResultFile =
  | { readonly name: string; readonly text: string }
  | { readonly name: string; readonly bytes: Uint8Array };

const STAGE = /^\.ridgehold-(\d+)$/;
/** Names that a run writes; a summary that lists anything else is not believed. */
const OURS = /^(?:charts\/)?[a-z0-9][a-z0-9._-]*\.(?:html|json|csv|geojson|svg|png)$/i;

/** The marks of whole results of the commands, which may share a folder. */
const MARKS = ['summary.json', 'road.json', 'compare.json', 'identify.json', 'tune.json'];

/**
 * Refuses, before the work begins, a folder that could not be written: nothing is changed.
 *
 * @param names of files that will be written, as far as they are known
 * @throws InputError `not-a-folder`, `not-permitted`, `foreign-file`
 */
export function checkFolder(folder: string, names: readonly string[] = []): void {
  let here = resolve(folder);
  while (!existsSync(here) && dirname(here) !== here) here = dirname(here);
  try {
    if (!statSync(here).isDirectory())
      throw new InputError({
        code: 'not-a-folder',
        place: { file: folder },
        message: notFolder(here, folder),
      });
    accessSync(here, constants.W_OK | constants.X_OK);
  } catch (error) {
    throw fileProblem(error, folder, 'cannot be written');
  }
  refuseForeign(folder, names);
}

/** A file that would be written over must be that of an earlier run: one that a mark lists, or the mark itself. */
function refuseForeign(folder: string, names: readonly string[]): void {
  const there = names.filter((name) => {
    const path = join(folder, name);
    return existsSync(path) && statSync(path).isFile();
  });
  if (there.length === 0) return;
  const listed = MARKS.map((mark) => formerFiles(join(folder, mark)));
  const ours = new Set([
    ...listed.flatMap((files, i) => (files.length === 0 ? [] : [...files, MARKS[i]!])),
    ...abandonedStages(folder).flatMap((path) => MARKS.flatMap((mark) => filesOfKilledRun(path, mark))),
  ]);
  const foreign = there.find((name) => !ours.has(name));
  if (foreign === undefined) return;
  throw new InputError({
    code: 'foreign-file',
    place: { file: join(folder, foreign) },
    message: 'would be written over, and no earlier run wrote it',
    allowed: 'another folder, or the file moved away',
  });
}

const notFolder = (here: string, folder: string): string =>
  `cannot be written: ${here === resolve(folder) ? 'it' : 'a part of the path'} is a file, not a folder`;

/**
 * Writes a whole result, or nothing. All files are written below a temporary name and then renamed, the last of
 * the list (the mark of a whole result) at the end; where a step fails, what was there before is put back.
 * The former mark is moved aside before any file changes: where the program is killed between two renames, the folder
 * has no mark, and the next run clears up by the marks that were left aside.
 * Then the files that a former mark lists, and the new one does not, are removed.
 *
 * @param files the mark last
 * @param cleared names of those that the caller has found to be ours, or that are not there
 * @throws InputError `disk-full`, `not-permitted`, `not-a-folder`, `not-a-file`, `foreign-file`
 */
export function writeResult(
  folder: string,
  files: readonly ResultFile[],
  cleared: readonly string[] = [],
): void {
  let made: string | undefined;
  within(folder, () => {
    made = makeFolder(folder);
  });
  const stage = join(folder, `.ridgehold-${process.pid}`);
  try {
    for (const { name } of files) refuseFolder(folder, name);
    refuseForeign(
      folder,
      files.map(({ name }) => name).filter((name) => !cleared.includes(name)),
    );
    const mark = files.at(-1)?.name ?? '';
    const abandoned = abandonedStages(folder);
    const former = [
      ...formerFiles(join(folder, mark)),
      ...abandoned.flatMap((path) => filesOfKilledRun(path, mark)),
    ];
    for (const file of files) {
      const { name } = file;
      const path = join(stage, 'new', name);
      within(join(folder, name), () => {
        makeFolder(dirname(path));
        writeFileSync(path, 'text' in file ? file.text : file.bytes, { flag: 'wx' });
      });
    }
    swap(folder, stage, files);
    const kept = new Set(files.map(({ name }) => name));
    for (const name of former) if (!kept.has(name)) remove(folder, name);
    for (const path of [...abandoned, stage]) rmSync(path, { recursive: true, force: true });
  } catch (error) {
    rmSync(stage, { recursive: true, force: true });
    if (made !== undefined) rmSync(made, { recursive: true, force: true });
    throw error;
  }
}

/** Does something to a path; what the system refuses is told with that path. */
function within(path: string, act: () => void): void {
  try {
    act();
  } catch (error) {
    throw fileProblem(error, path, 'cannot be written');
  }
}

function refuseFolder(folder: string, name: string): void {
  const path = join(folder, name);
  if (existsSync(path) && statSync(path).isDirectory())
    throw new InputError({
      code: 'not-a-file',
      place: { file: path },
      message: 'cannot be written: a folder stands in place of the file',
    });
}

/** Moves the old files aside, the mark first, and the new ones into place, the mark last; undoes all of it when a step fails. */
function swap(folder: string, stage: string, files: readonly ResultFile[]): void {
  const undo: (() => void)[] = [];
  const folderFor = (path: string): void => {
    const made = makeFolder(dirname(path));
    if (made !== undefined) undo.push(() => rmSync(made, { recursive: true, force: true }));
  };
  const moveAside = (name: string): void => {
    const target = join(folder, name);
    const aside = join(stage, 'old', name);
    within(target, () => {
      if (!existsSync(target)) return;
      folderFor(aside);
      renameSync(target, aside);
      undo.push(() => renameSync(aside, target));
    });
  };
  const moveIn = (name: string): void => {
    const target = join(folder, name);
    within(target, () => {
      folderFor(target);
      renameSync(join(stage, 'new', name), target);
      undo.push(() => rmSync(target, { force: true }));
    });
  };
  try {
    for (const { name } of files.toReversed()) moveAside(name);
    for (const { name } of files) moveIn(name);
  } catch (error) {
    for (const step of undo.reverse()) step();
    throw error;
  }
}

/** Files that the summary of an earlier run lists; none where it is no such summary. */
function formerFiles(path: string): readonly string[] {
  try {
    const summary: unknown = JSON.parse(readFileSync(path, 'utf8'));
    if (typeof summary !== 'object' || summary === null) return [];
    if (!('schema_version' in summary) || !('files' in summary) || !Array.isArray(summary.files)) return [];
    return summary.files.filter((name): name is string => typeof name === 'string' && OURS.test(name));
  } catch {
    return [];
  }
}

function remove(folder: string, name: string): void {
  rmSync(join(folder, name), { force: true });
  const parent = dirname(join(folder, name));
  if (resolve(parent) !== resolve(folder) && existsSync(parent) && readdirSync(parent).length === 0)
    rmdirSync(parent);
}

/** Temporary folders of runs that were killed. */
function abandonedStages(folder: string): readonly string[] {
  return readdirSync(folder)
    .filter((name) => {
      const pid = Number(STAGE.exec(name)?.[1] ?? 0);
      return pid > 0 && !isAlive(pid);
    })
    .map((name) => join(folder, name));
}

/** Files that a killed run found or had put into place already. */
function filesOfKilledRun(stage: string, mark: string): readonly string[] {
  const placed = formerFiles(join(stage, 'new', mark)).filter(
    (name) => !existsSync(join(stage, 'new', name)),
  );
  return [...formerFiles(join(stage, 'old', mark)), ...placed];
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return error instanceof Error && 'code' in error && error.code === 'EPERM';
  }
}
