import type { Road } from '../../road/road.ts';

/** Horizontal length of a road [m]. */
export const lengthOf = (road: Road): number => road.distance[road.size - 1] ?? 0;

/** What the distance of a road is called: it is nominal for a road along time. */
export const distanceNameOf = (road: Road): string =>
  road.along === 'time' ? 'nominal distance' : 'distance';
