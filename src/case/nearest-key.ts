/** Steps of inserting, deleting, exchanging one letter that turn one word into the other (Levenshtein 1966). */
function editSteps(a: string, b: string): number {
  let row = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const next = [i];
    for (let j = 1; j <= b.length; j++)
      next.push(Math.min(row[j]! + 1, next[j - 1]! + 1, row[j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1)));
    row = next;
  }
  return row[b.length]!;
}

/** `set_speed_kmh` and `set_speed_mph` have the stem `set_speed` in common. */
const UNIT_TAIL =
  /_(kmh|mph|km|m|mm|s|ms|kg|lb|g|n|kw|hp|w|pct|percent|deg|rad|c|k|f|pa|hpa|bar|m_s|m_s2|m2|kg_m3|pct_per_s|pct_per_kmh|pct_per_kmh_s|per_rad2)$/;
const stem = (key: string): string => key.toLowerCase().replaceAll('-', '_').replace(UNIT_TAIL, '');

/**
 * The known key that was most likely meant: the same without or with another unit, else the nearest in spelling.
 * @returns null when none is near
 */
export function nearestKey(key: string, known: readonly string[]): { key: string; unit: boolean } | null {
  const sameStem = known.find((k) => stem(k) === stem(key) || k.startsWith(`${key.toLowerCase()}_`));
  if (sameStem !== undefined) return { key: sameStem, unit: true };
  let best: string | null = null;
  let least = Math.max(2, Math.floor(key.length / 3)) + 1;
  for (const k of known) {
    const steps = editSteps(key.toLowerCase(), k);
    if (steps < least && steps < k.length - 1) {
      least = steps;
      best = k;
    }
  }
  return best === null ? null : { key: best, unit: false };
}
