const DATE_TIME = /^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d(\.\d+)?(Z|[-+]\d\d:\d\d)?$/;

/**
 * Reads a date and time strictly (ISO 8601 as XML Schema's dateTime). Without a zone it is UTC, as GPX requires,
 * and never the computer's own.
 *
 * @returns seconds since 1970 [s], to the millisecond; null for anything else and for days that no calendar has
 */
export function parseTime(text: string): number | null {
  const [whole, fraction, zone] = DATE_TIME.exec(text) ?? [];
  if (whole === undefined) return null;
  // Engines agree only on none or three digits of a second.
  const plain = zone !== undefined && (fraction === undefined || fraction.length === 4);
  const digits = fraction === undefined ? '' : fraction.padEnd(4, '0').slice(0, 4);
  const milliseconds = Date.parse(plain ? text : `${text.slice(0, 19)}${digits}${zone ?? 'Z'}`);
  return Number.isNaN(milliseconds) ? null : milliseconds / 1000;
}
