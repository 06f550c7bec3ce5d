import { formatPlace, type Place } from '../problems/place.ts';
import type { Warning } from '../problems/warning.ts';

const MOST = 12;

/** Says a line to people. */
export function say(line: string): void {
  process.stderr.write(`${line}\n`);
}

/** Says the warnings, the first dozen in full. */
export function tellWarnings(warnings: readonly Warning[], seen: (place: Place) => Place): void {
  for (const { message, place } of warnings.slice(0, MOST)) {
    const where = place === undefined ? '' : formatPlace(seen(place));
    say(`warning: ${where === '' ? '' : `${where}: `}${message}`);
  }
  if (warnings.length > MOST) say(`warning: and ${warnings.length - MOST} more, which the summary lists`);
}
