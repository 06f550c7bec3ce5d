import type { Warning } from '../problems/warning.ts';
import { toKm, toPct } from '../units/convert.ts';
import type { Road } from './road.ts';

/** Steepest mean grade over 30 m that public roads have, in very rare places. */
const STEEPEST = 0.25;
const STEEPEST_OVER = 30;

/** What the finished road gives cause to say. Nothing is clamped. */
export function roadWarnings(road: Road): Warning[] {
  return [...steepPlaces(road), ...uncertainEnds(road)];
}

function steepPlaces(road: Road): Warning[] {
  const warnings: Warning[] = [];
  const { distance, elevation, size } = road;
  let from = -1;
  let to = -1;
  let worst = 0;
  const close = (): void => {
    if (from < 0) return;
    warnings.push({
      code: 'steep-grade',
      message: `The grade reaches ${toPct(worst).toFixed(1)} % over ${STEEPEST_OVER} m near km ${toKm(from).toFixed(2)}; public roads stay below 25 %. Nothing was cut off: look at the elevation there, or mask it.`,
      from,
      to,
    });
    from = -1;
    worst = 0;
  };
  let j = 0;
  for (let i = 0; i < size; i++) {
    while (j < size - 1 && distance[j]! - distance[i]! < STEEPEST_OVER - 1e-9) j++;
    const run = distance[j]! - distance[i]!;
    if (run < STEEPEST_OVER - 1e-9) break;
    const mean = (elevation[j]! - elevation[i]!) / run;
    if (Math.abs(mean) > STEEPEST) {
      if (from >= 0 && distance[i]! > to) close();
      if (from < 0) from = distance[i]!;
      to = distance[j]!;
      if (Math.abs(mean) > Math.abs(worst)) worst = mean;
    }
  }
  close();
  return warnings;
}

function uncertainEnds(road: Road): Warning[] {
  if (road.smoothing === null) return [];
  const first = road.gradeSd[0]!;
  const last = road.gradeSd[road.size - 1]!;
  return [
    {
      code: 'ends-uncertain',
      message: `A smoothed grade is least certain at the ends of a track: one standard deviation is ${toPct(first).toFixed(1)} % at the start and ${toPct(last).toFixed(1)} % at the end.`,
    },
  ];
}
