import { BUS_MEASURED } from '../control/bus.ts';
import * as fit from './fittings.ts';
import { HISTORY, HISTORY_STRIDE, SENSED, SENSED_MORE, SPEED, TICK, TRAVELLED } from './layout.ts';
import type { Machine } from './machine.ts';
import { normalAt } from './sensor-noise.ts';

// Such a sensor has the history to itself: two rows of its own, then a ring of [distance travelled, speed] at the start
// of a sample; between two samples the distance is the cubic through both.

/** Samples sensed; pulses seen, time of the last and its period in ticks of the clock; place of the latest row. */
const SAMPLES = HISTORY;
const PULSE_STAMP = HISTORY + 1;
const PULSE_PERIOD = HISTORY + 2;
const LATEST = HISTORY + 3;
const PULSES = HISTORY + 4;
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
  const next = (s[LATEST] + HISTORY_STRIDE) | 0;
  const row = next < s.length ? next : RING;
  s[LATEST] = row;
  s[row] = s[TRAVELLED];
  s[row + 1] = s[SPEED];
  const before = s[SENSED_MORE];
  const kind = f[fit.F_READING] | 0;
  if (kind === fit.COUNTED_READING) countPulses(s, f, row);
  else if (kind === fit.TIMED_READING) timePulses(s, f, row);
  else if (f[fit.F_DELAY] > 0) readLate(s, f, row);
  else s[SENSED_MORE] = s[SPEED];
  let reading = s[SENSED_MORE] * f[fit.F_SCALE];
  const sd = f[fit.F_SD];
  if (sd > 0) reading += sd * normalAt(f, fit.F_NOISE, s[SAMPLES]);
  const filtered = f[fit.F_KEPT] * s[SENSED] + f[fit.F_BEFORE] * before + f[fit.F_NOW] * reading;
  s[SENSED] = filtered;
  s[SENSED_MORE] = reading;
  s[BUS_MEASURED] = filtered;
  s[SAMPLES] += 1;
}

// What follows reads and writes the arrays: numbers given to a function and taken from it are boxed at every sample,
// where an engine does not put the function in the place of its call.

/** Speed as it was the delay ago [m/s]. */
function readLate(s: Float64Array, f: Float64Array, row: number): void {
  const old = rowBack(s, row, f[fit.F_LATE] | 0);
  const x = f[fit.F_LATE + 1];
  const before = s[old + 1];
  if (x === 0) {
    s[SENSED_MORE] = before;
    return;
  }
  const next = rowAfter(s, old);
  const h = f[fit.F_SAMPLE];
  s[SENSED_MORE] = before + (x * (2 * bendOf(s, old, next, h) + 3 * x * twistOf(s, old, next, h))) / h;
}

function countPulses(s: Float64Array, f: Float64Array, row: number): void {
  const count = pulsesBy(s, f, row, fit.F_LATE) - pulsesBy(s, f, row, fit.F_EARLY);
  s[SENSED_MORE] = count * f[fit.F_SPEED_RATE];
}

function timePulses(s: Float64Array, f: Float64Array, row: number): void {
  findPulses(s, f, row);
  const since = Math.floor((s[SAMPLES] - f[fit.F_DELAY]) * f[fit.F_CLOCK_RATE]) - s[PULSE_STAMP];
  s[SENSED_MORE] = f[fit.F_SPEED_RATE] / Math.max(s[PULSE_PERIOD], since);
}

/** Puts the sensor at rest at the speed and place at which the vehicle is, as if it had come there at that speed. */
export function settleSensor({ s, fittings }: Machine): void {
  const f = fittings.sensor;
  if (f.length === 0) return;
  const v = s[SPEED];
  const sample = f[fit.F_SAMPLE];
  s[SAMPLES] = s[TICK];
  s[LATEST] = s.length - HISTORY_STRIDE;
  for (let row = RING; row < s.length; row += HISTORY_STRIDE) {
    s[row] = s[TRAVELLED] - (v * sample * (s.length - row)) / HISTORY_STRIDE;
    s[row + 1] = v;
  }
  if (f[fit.F_READING] === fit.TIMED_READING) {
    const spacing = f[fit.F_SPACING];
    const travelled = s[TRAVELLED] - v * (1 + f[fit.F_DELAY]) * sample;
    s[PULSES] = Math.floor(travelled * f[fit.F_PER_WAY]);
    const since = (travelled - spacing * s[PULSES]) / (v * sample);
    s[PULSE_STAMP] = Math.floor((s[TICK] - 1 - f[fit.F_DELAY] - since) * f[fit.F_CLOCK_RATE]);
    s[PULSE_PERIOD] = f[fit.F_SPEED_RATE] / v;
  }
  s[SENSED] = s[SENSED_MORE] = f[fit.F_SCALE] * v;
}

/** Row so many samples before another. */
function rowBack(s: Float64Array, row: number, back: number): number {
  const old = (row - HISTORY_STRIDE * back) | 0;
  return old >= RING ? old : old + s.length - RING;
}

function rowAfter(s: Float64Array, row: number): number {
  return row + HISTORY_STRIDE < s.length ? row + HISTORY_STRIDE : RING;
}

// Between two rows, at a share x of the sample h: D = D0 + h v0 x + bend x^2 + twist x^3, through the speeds at both ends.
function bendOf(s: Float64Array, old: number, next: number, h: number): number {
  return 3 * (s[next] - s[old]) - h * (2 * s[old + 1] + s[next + 1]);
}
function twistOf(s: Float64Array, old: number, next: number, h: number): number {
  return h * (s[old + 1] + s[next + 1]) - 2 * (s[next] - s[old]);
}

/** Pulses up to an instant that is read: whole spacings of the distance travelled by then. */
function pulsesBy(s: Float64Array, f: Float64Array, row: number, instant: number): number {
  return Math.floor(travelledBy(s, f, row, instant) * f[fit.F_PER_WAY]);
}

/** Distance travelled by an instant that is read [m]. */
function travelledBy(s: Float64Array, f: Float64Array, row: number, instant: number): number {
  const old = rowBack(s, row, f[instant] | 0);
  const x = f[instant + 1];
  if (x === 0) return s[old];
  const next = rowAfter(s, old);
  const h = f[fit.F_SAMPLE];
  return s[old] + x * (h * s[old + 1] + x * (bendOf(s, old, next, h) + x * twistOf(s, old, next, h)));
}

/** Finds the pulses since the reading before, and keeps the last one and its period. */
function findPulses(s: Float64Array, f: Float64Array, row: number): void {
  const before = s[PULSES];
  const now = pulsesBy(s, f, row, fit.F_LATE);
  if (!(now > before)) return;
  s[PULSES] = now;
  const h = f[fit.F_SAMPLE];
  const spacing = f[fit.F_SPACING];
  const rate = f[fit.F_CLOCK_RATE];
  const furthest = (f[fit.F_ROWS] | 0) - 1;
  let back = Math.max(1, f[fit.F_LATE] | 0) | 0;
  let old = rowBack(s, row, back);
  let next = rowAfter(s, old);
  let distance = now * spacing;
  const last = s[PULSE_STAMP];
  // The rows around the pulse: at first those before the instant. From there the distance is cubic, see bendOf.
  let start = Number.POSITIVE_INFINITY;
  let tick = 0;
  let speed = 0;
  let bend = 0;
  let twist = 0;
  let perWay = 0;
  // The last pulse, then the one before it, where that is new too: mostly between the same two rows.
  for (let pulse = 0; pulse < 2; pulse++) {
    if (start > distance) {
      start = s[old];
      while (start > distance && back < furthest) {
        back++;
        next = old;
        old = rowBack(s, old, 1);
        start = s[old];
      }
      tick = s[SAMPLES] - back;
      const way = s[next] - start;
      const speed0 = s[old + 1];
      const speed1 = s[next + 1];
      speed = h * speed0;
      bend = 3 * way - h * (2 * speed0 + speed1);
      twist = h * (speed0 + speed1) - 2 * way;
      perWay = way > 0 ? 1 / way : 0;
    }
    const reach = distance - start;
    let x = perWay > 0 ? reach * perWay : 1;
    // Newton's rule from the secant, 1 / slope to second order by that of the secant: speed changes so little within a
    // sample that one step reaches the last digits. Where it does not, steps with the slope itself follow.
    let slope = speed + x * (2 * bend + 3 * x * twist);
    let miss = (reach - x * (speed + x * (bend + x * twist))) * perWay * (2 - slope * perWay);
    for (let step = 0; step < 3 && (miss > 1e-3 || miss < -1e-3); step++) {
      if (step > 0) x += miss;
      slope = speed + x * (2 * bend + 3 * x * twist);
      miss = slope > 0 ? (reach - x * (speed + x * (bend + x * twist))) / slope : 0;
    }
    x += miss;
    if (!(x > 0)) x = 0;
    else if (x > 1) x = 1;
    const stamp = Math.floor((tick + x) * rate);
    if (pulse === 1) s[PULSE_PERIOD] = s[PULSE_STAMP] - stamp;
    else {
      s[PULSE_STAMP] = stamp;
      if (now - before === 1) {
        s[PULSE_PERIOD] = stamp - last;
        break;
      }
      distance -= spacing;
    }
  }
  // A pulse faster than the clock is read as one tick of it.
  if (s[PULSE_PERIOD] < 1) s[PULSE_PERIOD] = 1;
}
