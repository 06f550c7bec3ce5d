import type { Road } from '../../road/road.ts';
import type { Demand } from '../../study/findings.ts';
import { toKm, toPct } from '../../units/convert.ts';
import { type Json, numbers } from './json-parts.ts';
import { climbOf } from './route.ts';

/** `route` of summary.json: the driven road, what was repaired, and how much of it the drive can hold. */
export function routeSummary(road: Road, demand: Demand | null): Json {
  const { up, down } = climbOf(road);
  return {
    name: road.name,
    ...numbers({ length_m: road.distance[road.size - 1] ?? 0, climb_m: up, descent_m: down }),
    points: road.points ?? road.size,
    knots: road.size,
    repairs: road.repairs.length,
    ...numbers({ grid_m: road.grid }),
    ...(demand === null ? {} : authority(road, demand)),
    smoothing:
      road.smoothing === null
        ? null
        : {
            source: road.smoothing.source,
            ...numbers({
              wavelength_m: road.smoothing.wavelength,
              residual_sd_m: road.smoothing.residualSd,
              source_grade_sd_pct: toPct(road.smoothing.sourceGradeSd),
              shortest_hill_m: road.smoothing.shortestHill,
            }),
          },
    masks: road.masks.map(({ from, to, reason }) => ({
      ...numbers({ from_km: toKm(from), to_km: toKm(to) }),
      reason,
    })),
    repair_list: road.repairs.map(({ kind, from, to, points, line, message }) => ({
      kind,
      ...numbers({ from_km: toKm(from), to_km: toKm(to) }),
      points,
      line,
      message,
    })),
  };
}

/** Share of the length where a hold can be asked for, and the lengths where the drive has too little either way. */
function authority(road: Road, demand: Demand): Record<string, Json> {
  let above = 0;
  let below = 0;
  for (let i = 0; i + 1 < road.size; i++) {
    const share = (demand.share[i]! + demand.share[i + 1]!) / 2;
    const length = road.distance[i + 1]! - road.distance[i]!;
    if (share > 1) above += length;
    if (share < -1) below += length;
  }
  return numbers({ holdable_pct: toPct(demand.holdableShare), above_range_m: above, below_range_m: below });
}
