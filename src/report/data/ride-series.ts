import type { RideResult } from '../../study/ride-figures.ts';
import { toKmh, toPct } from '../../units/convert.ts';
import { type Column, csvText } from './table.ts';

/** The columns of ride-<name>.csv: one row a fix of the log that lies on the driven road and goes on along it. */
export const RIDE_COLUMNS: readonly Column<RideResult>[] = [
  {
    name: 'time_s',
    decimals: 3,
    about: 'time under way from the first row; pauses are left out',
    value: (ride, i) => ride.time[i]!,
  },
  {
    name: 'distance_m',
    decimals: 2,
    about: 'along the driven road, horizontal',
    value: (ride, i) => ride.distance[i]!,
  },
  {
    name: 'set_speed_kmh',
    decimals: 3,
    about: "set speed there, by the road's own reckoning",
    value: (ride, i) => toKmh(ride.setSpeed[i]!),
  },
  { name: 'speed_kmh', decimals: 3, about: 'speed', value: (ride, i) => toKmh(ride.speed[i]!) },
  {
    name: 'speed_error_kmh',
    decimals: 3,
    about: 'speed minus set speed, negative is too slow',
    value: (ride, i) => toKmh(ride.speed[i]! - ride.setSpeed[i]!),
  },
  {
    name: 'throttle_pct',
    decimals: 2,
    about: 'throttle; empty where the log has none',
    value: ({ throttle }, i) =>
      throttle === null || Number.isNaN(throttle[i]!) ? null : toPct(throttle[i]!),
  },
];

/** ride-<name>.csv. */
export const rideCsv = (ride: RideResult): string => csvText(RIDE_COLUMNS, ride, ride.size);
