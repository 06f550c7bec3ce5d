import type { FullSeries } from '../../loop/result.ts';

/** Times over which a bit of what limits the throttle is set. */
export function spans(
  { size, time, limit }: Pick<FullSeries, 'size' | 'time' | 'limit'>,
  bit: number,
): readonly (readonly [begin: number, end: number])[] {
  const found: [number, number][] = [];
  for (let i = 0; i < size; i++) {
    if ((limit[i]! & bit) === 0) continue;
    const end = time[Math.min(i + 1, size - 1)]!;
    const last = found[found.length - 1];
    if (last !== undefined && last[1] >= time[i]!) last[1] = end;
    else found.push([time[i]!, end]);
  }
  return found;
}
