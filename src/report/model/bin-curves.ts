import type { BinRecord } from '../../loop/result.ts';
import { meanErrorIn } from '../../study/held-time.ts';
import type { Curve } from './columns.ts';

/** The lanes that a record by bin can fill. */
export type Lane = 'error' | 'throttle' | 'gear' | 'power' | 'energy';

/** Middles of the bins that were reached [m]. */
function middles(bins: BinRecord): Float64Array {
  const at = new Float64Array(bins.size);
  for (let i = 0; i < bins.size; i++) at[i] = (bins.edge[i]! + bins.edge[i + 1]!) / 2;
  return at;
}

/** A lane of the record, SI: speed error [m/s], throttle (ratio), gear (from 1), wheel power [W], wheel energy so far [J]. */
export function binCurve(bins: BinRecord, lane: Lane): Curve {
  const { size } = bins;
  const at = middles(bins);
  if (lane === 'error') {
    const mean = new Float64Array(size);
    // Where hold was off there is no error: the curve has a gap.
    for (let i = 0; i < size; i++) mean[i] = meanErrorIn(bins, i) ?? Number.NaN;
    return { size, at, low: bins.errorMin, mean, high: bins.errorMax };
  }
  if (lane === 'throttle')
    return { size, at, low: bins.throttleMin, mean: bins.throttleMean, high: bins.throttleMax };
  if (lane === 'gear') {
    const gear = Float64Array.from(bins.gear.subarray(0, size), (index) => index + 1);
    return { size, at, low: gear, mean: gear, high: gear };
  }
  if (lane === 'power')
    return { size, at, low: bins.wheelPower, mean: bins.wheelPower, high: bins.wheelPower };
  const energy = new Float64Array(size);
  let sum = 0;
  for (let i = 0; i < size; i++) {
    sum += bins.driveWork[i]! + bins.regenerationWork[i]!;
    energy[i] = sum;
  }
  return { size, at, low: energy, mean: energy, high: energy };
}
