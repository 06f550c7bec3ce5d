import type { Road } from '../road/road.ts';
import type { Demand, Stretch } from './findings.ts';

/**
 * Where the set speed asks for more than the drive has, or for less than it can give: cells of the road of which both
 * ends are out of range, neighbours joined. A knot alone, where its two neighbours' cells meet, has no length.
 */
export function outOfRange(road: Road, { share }: Pick<Demand, 'share'>): Stretch[] {
  const stretches: { from: number; to: number }[] = [];
  for (let i = 0; i + 1 < road.size; i++) {
    const from = road.distance[i];
    const to = road.distance[i + 1];
    if (!(to > from) || Math.abs(share[i]) <= 1 || Math.abs(share[i + 1]) <= 1) continue;
    const last = stretches.at(-1);
    if (last !== undefined && from <= last.to) last.to = to;
    else stretches.push({ from, to });
  }
  return stretches;
}
