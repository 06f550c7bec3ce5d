// A full series for tests, written out by hand.
import type { FullSeries } from '../../src/loop/result.ts';

/** A series sampled every 0.1 s at 20 m/s, with error and limit as functions of time. */
export function seriesOf(
  seconds: number,
  error: (t: number) => number,
  limit: (t: number) => number,
): FullSeries {
  const size = Math.round(seconds * 10);
  const time = Float64Array.from({ length: size }, (_, i) => i / 10);
  const zeros = new Float64Array(size);
  return {
    size,
    time,
    distance: time.map((t) => 20 * t),
    setSpeed: new Float64Array(size).fill(20),
    reference: zeros,
    speed: time.map((t) => 20 + error(t)),
    measured: zeros,
    command: time.map((t) => (t * 7) % 1),
    actuator: zeros,
    proportional: zeros,
    integral: zeros,
    feedforward: zeros,
    limit: Uint8Array.from(time, (t) => limit(t)),
    gear: new Uint8Array(size),
    shaftSpeed: zeros,
    driveForce: zeros,
    brakeForce: zeros,
    acceleration: zeros,
  };
}
