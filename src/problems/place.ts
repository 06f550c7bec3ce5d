/** Where in an input a thing stands. Lines and columns count from 1; `key` is a dotted path such as `road.grid_m`. */
export interface Place {
  readonly file?: string;
  readonly line?: number;
  readonly column?: number;
  readonly key?: string;
}

/** `file:line:column: key`, with what is known of it; empty when nothing is. */
export function formatPlace(place: Place): string {
  const at = [place.file, place.line, place.line === undefined ? undefined : place.column];
  const where = at.filter((part) => part !== undefined).join(':');
  if (place.key === undefined) return where;
  return where === '' ? place.key : `${where}: ${place.key}`;
}
