import type { SpeedSensor } from '../vehicle/vehicle.ts';

/**
 * Mean age of the speed that a sensor shows [s], its filter apart: the transport delay, and half the window in which
 * pulses are counted, or one period of them where the last one is timed (its middle is half a period before the last
 * pulse, which is half a period ago in the mean). The attenuation of window and period, sin(w T / 2) / (w T / 2), is
 * left out: below a tenth of the sensor's own rate it is less than 2 %.
 *
 * @param speed about which it is driven [m/s], > 0
 */
export function sensorDelay({ pulses, delay }: SpeedSensor, speed: number): number {
  if (pulses === null) return delay;
  const { reading, spacing } = pulses;
  return delay + (reading.kind === 'counted' ? reading.window / 2 : spacing / speed);
}
