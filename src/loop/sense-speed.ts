import { BUS_MEASURED } from '../control/bus.ts';
import * as fit from './fittings.ts';
import { HISTORY, HISTORY_STRIDE, SENSED, SENSED_MORE, SPEED, TICK, TRAVELLED } from './layout.ts';
import type { Machine } from './machine.ts';
import { normalAt } from './sensor-noise.ts';

// Such a sensor has the history to itself: two rows of its own, then a ring of [distance travelled, speed] at the start
// of a sample; between two samples the distance is the cubic through both.

/** Samples sensed; time of the last pulse and its period in ticks of the clock. */
const SAMPLES = HISTORY;
const PULSE_STAMP = HISTORY + 1;
const PULSE_PERIOD = HISTORY + 2;
const RING = HISTORY + fit.SENSOR_ROWS * HISTORY_STRIDE;

/**
 * Measures the speed of the sample that starts now, for a sensor that counts or times pulses or is noisy, and writes it
 * to BUS_MEASURED. It is read at t - delay (transport, computing and dead time), in this order:
 *
 *   counted   (floor(D(t1) / spacing) - floor(D(t0) / spacing)) spacing / window, t0 and t1 the ends of the window
 *   timed     spacing over the time between the last two pulses, both stamped by a clock of the given resolution; never
 *             more than spacing over the time since the last pulse, so that it falls as the vehicle comes to a stop
 *   otherwise dD/dt
 *   then      scale error, white noise, and the filter, exact for readings that are joined by straight lines
 *
 * SPEED and TRAVELLED must stand as they are now; to be called once a sample.
 */
export function senseSpeed({ s, fittings }: Machine): void {
  const f = fittings.sensor;
  const rows = f[fit.F_ROWS];
  const k = s[SAMPLES];
  const row = RING + HISTORY_STRIDE * (k % rows);
  s[row] = s[TRAVELLED];
  s[row + 1] = s[SPEED];
  const kind = f[fit.F_READING];
  const delay = f[fit.F_DELAY];
  let reading = 0;
  if (kind === fit.COUNTED_READING) {
    const spacing = f[fit.F_SPACING];
    const count =
      Math.floor(travelledAgo(s, f, k, delay) / spacing) -
      Math.floor(travelledAgo(s, f, k, delay + f[fit.F_WINDOW]) / spacing);
    reading = (count * spacing) / f[fit.F_WINDOW_TIME];
  } else if (kind === fit.TIMED_READING) reading = timePulses(s, f, k);
  else reading = speedAgo(s, f, k, delay);

  reading *= f[fit.F_SCALE];
  if (f[fit.F_NOISE] > 0) reading += f[fit.F_NOISE] * normalAt(f[fit.F_SEED], f[fit.F_SEED + 1], k);
  s[SENSED] = f[fit.F_KEPT] * s[SENSED] + f[fit.F_BEFORE] * s[SENSED_MORE] + f[fit.F_NOW] * reading;
  s[SENSED_MORE] = reading;
  s[BUS_MEASURED] = s[SENSED];
  s[SAMPLES] = k + 1;
}

/** Puts the sensor at rest at the speed and place at which the vehicle is, as if it had come there at that speed. */
export function settleSensor({ s, fittings }: Machine): void {
  const f = fittings.sensor;
  if (f.length === 0) return;
  const rows = f[fit.F_ROWS];
  const v = s[SPEED];
  const k = s[TICK];
  const sample = f[fit.F_SAMPLE];
  for (let back = 1; back <= rows; back++) {
    const row = RING + HISTORY_STRIDE * ((((k - back) % rows) + rows) % rows);
    s[row] = s[TRAVELLED] - v * sample * back;
    s[row + 1] = v;
  }
  s[SAMPLES] = k;
  if (f[fit.F_READING] === fit.TIMED_READING) {
    const spacing = f[fit.F_SPACING];
    const read = (k - 1 - f[fit.F_DELAY]) * sample;
    const travelled = s[TRAVELLED] - v * (1 + f[fit.F_DELAY]) * sample;
    const last = read - (travelled - spacing * Math.floor(travelled / spacing)) / v;
    s[PULSE_STAMP] = Math.floor(last / f[fit.F_CLOCK]);
    s[PULSE_PERIOD] = spacing / v / f[fit.F_CLOCK];
  }
  s[SENSED] = s[SENSED_MORE] = f[fit.F_SCALE] * v;
}

/** Row of sample k - back. */
function rowOf(f: Float64Array, k: number, back: number): number {
  const rows = f[fit.F_ROWS];
  return RING + HISTORY_STRIDE * ((k - back + rows * (k < back ? 1 : 0)) % rows);
}

/** Distance travelled so many samples ago [m]. */
function travelledAgo(s: Float64Array, f: Float64Array, k: number, ago: number): number {
  const back = Math.ceil(ago);
  const old = rowOf(f, k, back);
  return back === ago ? s[old] : cubic(s, old, rowOf(f, k, back - 1), back - ago, f[fit.F_SAMPLE]);
}

function cubic(s: Float64Array, old: number, next: number, share: number, sample: number): number {
  const rest = 1 - share;
  const bend = share * rest * sample;
  return (
    s[old] * (1 + 2 * share) * rest * rest +
    s[next] * (3 - 2 * share) * share * share +
    bend * (rest * s[old + 1] - share * s[next + 1])
  );
}

/** Speed so many samples ago: the slope of the cubic. */
function speedAgo(s: Float64Array, f: Float64Array, k: number, ago: number): number {
  const back = Math.ceil(ago);
  const old = rowOf(f, k, back);
  return back === ago ? s[old + 1] : slope(s, old, rowOf(f, k, back - 1), back - ago, f[fit.F_SAMPLE]);
}

function slope(s: Float64Array, old: number, next: number, share: number, sample: number): number {
  const rest = 1 - share;
  return (
    (6 * share * rest * (s[next] - s[old])) / sample +
    rest * (1 - 3 * share) * s[old + 1] +
    share * (3 * share - 2) * s[next + 1]
  );
}

/** Speed by the last period [m/s], from the pulses up to this sample's reading. */
function timePulses(s: Float64Array, f: Float64Array, k: number): number {
  const spacing = f[fit.F_SPACING];
  const clock = f[fit.F_CLOCK];
  const delay = f[fit.F_DELAY];
  const before = Math.floor(travelledAgo(s, f, k, delay + 1) / spacing);
  const now = Math.floor(travelledAgo(s, f, k, delay) / spacing);
  if (now > before) {
    const last = Math.floor(pulseTime(s, f, k, now * spacing) / clock);
    const previous =
      now - before > 1 ? Math.floor(pulseTime(s, f, k, (now - 1) * spacing) / clock) : s[PULSE_STAMP];
    // A pulse faster than the clock is read as one tick of it.
    s[PULSE_PERIOD] = Math.max(1, last - previous);
    s[PULSE_STAMP] = last;
  }
  const since = Math.floor(((k - delay) * f[fit.F_SAMPLE]) / clock) - s[PULSE_STAMP];
  return spacing / (clock * Math.max(s[PULSE_PERIOD], since));
}

/** Time at which a distance was reached, within a sample before this one's reading [s]. */
function pulseTime(s: Float64Array, f: Float64Array, k: number, distance: number): number {
  const sample = f[fit.F_SAMPLE];
  let back = Math.max(1, Math.ceil(f[fit.F_DELAY]));
  let old = rowOf(f, k, back);
  while (s[old] > distance && back < f[fit.F_ROWS] - 1) {
    back++;
    old = rowOf(f, k, back);
  }
  const next = rowOf(f, k, back - 1);
  const way = s[next] - s[old];
  let share = way > 0 ? (distance - s[old]) / way : 1;
  // Newton's rule from the secant: speed changes little within a sample, so that two steps reach the last digits.
  for (let i = 0; i < 3; i++) {
    const speed = slope(s, old, next, share, sample);
    if (!(speed > 0)) break;
    share += (distance - cubic(s, old, next, share, sample)) / (speed * sample);
    share = Math.min(1, Math.max(0, share));
  }
  return (k - back + share) * sample;
}
