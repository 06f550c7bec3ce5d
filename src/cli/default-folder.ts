import { basename, dirname, join, resolve } from 'node:path';
import { caseNameOf } from '../run/case-name.ts';

/** What `ridgehold new` calls every case: it tells no study from another. */
const COMMON = 'case';

/** Where the output goes that nobody named: out/<name of the case>, and for case.yaml out/<name of its folder>. */
export function defaultFolder(path: string): string {
  const name = caseNameOf(path);
  const around = basename(dirname(resolve(path)));
  return join('out', name.toLowerCase() === COMMON && around !== '' ? around : name);
}
