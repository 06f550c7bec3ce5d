import type { CaseDocument } from './read-case-file.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';
import { isMapping } from './schema-walk.ts';
import { type Path, pathWords, valueAt } from './yaml-source.ts';

/** A value that a case or a vehicle gave, changes beside the case put in. */
export interface GivenValue {
  /** Dotted path as in DefaultUsed: list items by name or id where they have one, else by number from 0. */
  readonly key: string;
  /** Scalars as text; lists that are one thing, such as a curve, as JSON. */
  readonly value: string;
  readonly of: 'vehicle' | 'case';
}

/** A longer list of mappings without names is told as one value. */
const LONGEST_LIST = 24;

/**
 * Every value that the case and the vehicle of a run gave, in the order of their texts: with the defaults used it is
 * all that went into the run but for the track.
 *
 * A vehicle written in the case stands under `vehicle`, as one in a file of its own does. Of names of files that are
 * absolute paths only the last part is told.
 */
export function givenValues(document: CaseDocument, vehicle: VehicleDocument): readonly GivenValue[] {
  const { value } = document.source;
  const inline = document.vehicle !== null;
  const ofCase =
    inline && isMapping(value)
      ? Object.fromEntries(Object.entries(value).filter(([key]) => key !== 'vehicle'))
      : value;
  return [...leavesOf(ofCase, 'case'), ...leavesOf(valueAt(vehicle.source.value, vehicle.at), 'vehicle')];
}

function leavesOf(root: unknown, of: GivenValue['of']): GivenValue[] {
  const leaves: GivenValue[] = [];
  const visit = (here: unknown, path: Path): void => {
    if (isMapping(here) && Object.keys(here).length > 0)
      for (const [key, inner] of Object.entries(here)) visit(inner, [...path, key]);
    else if (isList(here)) for (const [i, item] of here.entries()) visit(item, [...path, i]);
    else leaves.push({ key: pathWords(root, path), value: textOf(here), of });
  };
  visit(root, []);
  return leaves;
}

/** A list whose items are told one by one. */
function isList(value: unknown): value is readonly unknown[] {
  if (!Array.isArray(value) || value.length === 0 || !value.every(isMapping)) return false;
  return value.length <= LONGEST_LIST || value.every((item) => 'name' in item || 'id' in item);
}

function textOf(value: unknown): string {
  if (typeof value === 'string') return withoutFolders(value);
  return typeof value === 'number' || typeof value === 'boolean' ? String(value) : JSON.stringify(value);
}

/** An absolute path says where somebody's files are. */
const withoutFolders = (text: string): string =>
  /^(?:[\\/]|[A-Za-z]:[\\/])/.test(text) ? (text.split(/[\\/]/).at(-1) ?? text) : text;
