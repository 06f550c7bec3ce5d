import type { BinRecord } from '../loop/result.ts';
import type { EnergySource } from '../vehicle/energy-source.ts';

/** Charge below which no force means an empty battery, not heat or a voltage that sags to nothing. */
export const NEARLY_EMPTY = 0.01;

/** Where a battery comes down to its reserve, and where it runs empty: ends of bins, horizontal distance [m]; null: nowhere. */
export interface BatteryPlaces {
  readonly reserve: number | null;
  readonly empty: number | null;
}

/** From the record of a run. A reserve counts where the route began above it. An empty battery gives no force, with what is left of a last sample in it. */
export function batteryPlaces(source: EnergySource | null, bins: BinRecord): BatteryPlaces {
  if (source?.kind !== 'battery' || source.capacity === null) return { reserve: null, empty: null };
  const { capacity, charge, reserve } = source;
  const reserved = reserve > 0 && charge > reserve;
  let left = charge * capacity;
  let reserveAt: number | null = null;
  for (let i = 0; i < bins.size; i++) {
    left -= bins.drawn[i];
    const at = bins.edge[i + 1];
    if (reserved && reserveAt === null && left <= reserve * capacity) reserveAt = at;
    if (bins.driveLost[i] === 1 && left <= NEARLY_EMPTY * capacity) return { reserve: reserveAt, empty: at };
  }
  return { reserve: reserveAt, empty: null };
}
