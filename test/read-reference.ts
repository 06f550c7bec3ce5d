import { readFileSync } from 'node:fs';

/** Data of test/reference/, parsed; `T` names the part of it that a test reads. */
export function readReference<T>(path: string): T {
  return JSON.parse(readFileSync(new URL(`reference/${path}`, import.meta.url), 'utf8')) as T;
}
