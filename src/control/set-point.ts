import { BUS_REFERENCE, BUS_REFERENCE_STEP, BUS_TARGET } from './bus.ts';

/**
 * A new set speed, in the units of the sensor.
 *
 * @param target [m/s]
 * @param rate greatest rate of the reference [m/s2]; null: it steps
 * @param sample [s]
 */
export function setTarget(bus: Float64Array, target: number, rate: number | null, sample: number): void {
  bus[BUS_TARGET] = target;
  bus[BUS_REFERENCE_STEP] = rate === null ? Number.POSITIVE_INFINITY : rate * sample;
}

/** One sample's move of the reference towards the set speed. */
export function moveReference(bus: Float64Array): void {
  const gap = bus[BUS_TARGET] - bus[BUS_REFERENCE];
  const step = bus[BUS_REFERENCE_STEP];
  if (gap > step) bus[BUS_REFERENCE] += step;
  else if (gap < -step) bus[BUS_REFERENCE] -= step;
  else bus[BUS_REFERENCE] = bus[BUS_TARGET];
}
