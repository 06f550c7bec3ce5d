import { exp } from '../numeric/elementary.ts';
import type { Belt, Gearbox } from '../vehicle/drive.ts';
import type { EnergySource, Heating, PowerMap, ShareOverCharge } from '../vehicle/energy-source.ts';
import type { SpeedSensor } from '../vehicle/vehicle.ts';
import type { LoopPlan } from './plan.ts';
import { NOISE_SIZE, noiseOf } from './sensor-noise.ts';

/**
 * The devices that work once a sample, compiled to flat arrays, because numbers that closures or objects hold are boxed
 * and checked at every sample. An array of length 0: there is no such device. Places below.
 */
export interface Fittings {
  /** A sensor that counts or times pulses, or is noisy: `senseSpeed` measures in the place of the kernel. */
  readonly sensor: Float64Array;
  /** Rows of the history that such a sensor needs (P_HISTORY); 0: none. */
  readonly history: number;
  /** Shift lines of an automatic gearbox: `shiftDue` looks at them. */
  readonly gearbox: Float64Array;
  /** Belt: `moveBelt` moves it. */
  readonly belt: Float64Array;
  /** Tank or battery: `drawPower` draws from it. */
  readonly source: Float64Array;
}

// --- sensor ---
/** What is read: 0 the speed itself, 1 pulses counted in a window, 2 the last period. */
export const F_READING = 0;
export const SPEED_READING = 0;
export const COUNTED_READING = 1;
export const TIMED_READING = 2;
/** Way between two pulses [m], and one over it; ticks of the clock in a sample. */
export const F_SPACING = 1;
export const F_PER_WAY = 2;
export const F_CLOCK_RATE = 3;
/** Speed of one pulse in the window, or of a period of one tick of the clock [m/s]. */
export const F_SPEED_RATE = 4;
/** Transport, computing and dead time in samples; sample [s]; rows of the ring. */
export const F_DELAY = 5;
export const F_SAMPLE = 6;
export const F_ROWS = 7;
export const F_SCALE = 8;
/** Filter: what is kept of its output, weights of the reading before and of this one. */
export const F_KEPT = 9;
export const F_BEFORE = 10;
export const F_NOW = 11;
/** Instants that are read, the delay ago and a window before that: rows back, and the part of a sample after that row. */
export const F_LATE = 12;
export const F_EARLY = 14;
/** Standard deviation of the noise; with one, it follows the rest (see sensor-noise.ts). */
export const F_SD = 16;
export const F_NOISE = 17;

// --- gearbox: gears, corners of the lines, then the lines: throttle, up, down ---
export const F_GEARS = 0;
export const F_CORNERS = 1;
export const F_LINES = 2;

// --- belt: limits of the ratio [1/m], inertia before it [kg m2], shaft speed from which the clutch is locked [rad/s] ---
export const F_LEAST_RATIO = 0;
export const F_GREATEST = 1;
export const F_INERTIA = 2;
export const F_LOCKED = 3;
/** Corners of its line, then their throttles, shaft speeds, and the slopes between them. */
export const F_BELT_CORNERS = 4;
export const F_BELT_LINE = 10;
/** Stretch of the line in which the last sample was, none at first: from a throttle to a throttle, shaft speed and slope at a corner, the corner. */
export const F_STRETCH = 5;

// --- source: a head, then the arrays whose places and lengths it holds ---
export const F_BATTERY = 0;
/** Inner edges of the map's cells over shaft speed and torque, then the cells: power c0 + c1 w + T (c2 + c3 w). */
export const F_SPEEDS = 1;
export const F_SPEED_COUNT = 2;
export const F_TORQUES = 3;
export const F_TORQUE_COUNT = 4;
export const F_POWER = 5;
export const F_LEAST = 6;
export const F_IDLE = 7;
/** [J], 0: not known, the charge stands still; one over it. */
export const F_CAPACITY = 8;
export const F_PER_CAPACITY = 9;
/** Lines over the charge: their place, see LINE_. */
export const F_SAG = 10;
export const F_ACCEPTANCE = 11;
/** One over the continuous power [1/W], 0: no heat; decay of the heat over a sample, its onset, least share. */
export const F_PER_POWER = 12;
export const F_COOLED = 13;
export const F_ONSET = 14;
export const F_LEAST_SHARE = 15;
/** Share of charge of a battery at the start. */
export const F_CHARGE = 16;
/** Cell of the map in which the last sample was, none at first: its edges over shaft speed and torque, its law. */
export const F_CELL = 17;
export const F_LAW = 21;
/** At the start of the sample: shaft speed and torque; what is asked for there: power, and energy over the sample. */
export const F_SHAFT_SPEED = 25;
export const F_TORQUE = 26;
export const F_POWER_ASKED = 27;
export const F_ENERGY_ASKED = 28;
/** Length of a sample [s]. */
export const F_LENGTH = 29;
/** Charge in hand, as a share of the capacity. */
export const F_CHARGE_SHARE = 30;
export const F_SOURCE_HEAD = 31;

/** A line over the charge: the stretch in which the last sample was, none at first; corners, then charges, shares, slopes behind them. */
export const LINE_COUNT = 0;
export const LINE_LOW = 1;
export const LINE_HIGH = 2;
export const LINE_CORNER = 3;
export const LINE_SHARE = 4;
export const LINE_SLOPE = 5;
export const LINE_CORNERS = 6;

/** Rows before the ring of the history in which a sensor keeps what it remembers. */
export const SENSOR_ROWS = 2;

/** Compiles the sample devices of a plan. */
export function fittingsOf(plan: LoopPlan): Fittings {
  const { vehicle, controller } = plan;
  const { drive, actuator } = vehicle;
  const sample = controller.kind === 'locked' ? plan.lockedSample : controller.sample;
  const computing = controller.kind === 'locked' ? 0 : controller.computingDelay;
  const sensor = sensorOf(vehicle.sensor, vehicle.sensor.delay + computing + actuator.deadTime, sample);
  return {
    sensor,
    history: sensor.length > 0 ? SENSOR_ROWS + sensor[F_ROWS] : 0,
    gearbox: gearboxOf(drive.gearbox, drive.gears.length),
    belt: drive.belt === null ? new Float64Array(0) : beltOf(drive.belt),
    source: drive.source === null ? new Float64Array(0) : sourceOf(drive.source, drive.idleSpeed, sample),
  };
}

function sensorOf(sensor: SpeedSensor, delay: number, sample: number): Float64Array {
  const { pulses, noise, filter } = sensor;
  if (pulses === null && noise === null) return new Float64Array(0);
  const f = new Float64Array(F_NOISE + (noise === null ? 0 : NOISE_SIZE));
  const instant = (place: number, ago: number): void => {
    f[place] = Math.ceil(ago);
    f[place + 1] = Math.ceil(ago) - ago;
  };
  f[F_DELAY] = delay / sample;
  instant(F_LATE, f[F_DELAY]);
  f[F_SAMPLE] = sample;
  f[F_SCALE] = 1 + sensor.scaleError;
  let reach = f[F_DELAY];
  if (pulses !== null) {
    const { reading } = pulses;
    f[F_SPACING] = pulses.spacing;
    f[F_PER_WAY] = 1 / pulses.spacing;
    if (reading.kind === 'counted') {
      f[F_READING] = COUNTED_READING;
      f[F_SPEED_RATE] = pulses.spacing / reading.window;
      reach += reading.window / sample;
      instant(F_EARLY, reach);
    } else {
      f[F_READING] = TIMED_READING;
      f[F_CLOCK_RATE] = sample / reading.clock;
      f[F_SPEED_RATE] = pulses.spacing / reading.clock;
      reach += 1;
    }
  }
  f[F_ROWS] = Math.ceil(reach) + 2;
  // Exact for readings joined by straight lines, so that the filter lags by its time constant, as a continuous one does.
  const kept = filter > 0 ? exp(-sample / filter) : 0;
  const mean = filter > 0 ? ((1 - kept) * filter) / sample : 0;
  f[F_KEPT] = kept;
  f[F_BEFORE] = mean - kept;
  f[F_NOW] = 1 - mean;
  if (noise !== null) {
    f[F_SD] = noise.sd;
    f.set(noiseOf(noise.seed), F_NOISE);
  }
  return f;
}

function gearboxOf(gearbox: Gearbox, gears: number): Float64Array {
  if (gearbox.kind !== 'automatic') return new Float64Array(0);
  const { throttle, upSpeed, downSpeed } = gearbox;
  return Float64Array.of(gears, throttle.length, ...throttle, ...upSpeed, ...downSpeed);
}

function beltOf({ least, greatest, inertia, locked, throttle, shaftSpeed }: Belt): Float64Array {
  const slopes = shaftSpeed
    .subarray(1)
    .map((speed, i) => (speed - shaftSpeed[i]) / (throttle[i + 1] - throttle[i]));
  return Float64Array.of(
    ...[least, greatest, inertia, locked],
    ...[throttle.length, 0, 0, 0, 0, 0],
    ...[...throttle, ...shaftSpeed, ...slopes],
  );
}

function sourceOf(source: EnergySource, idleSpeed: number, sample: number): Float64Array {
  const { map } = source;
  const battery = source.kind === 'battery' ? source : null;
  const f: number[] = Array.from({ length: F_SOURCE_HEAD }, () => 0);
  const append = (values: Float64Array): number => {
    const place = f.length;
    f.push(...values);
    return place;
  };
  f[F_BATTERY] = battery === null ? 0 : 1;
  f[F_SPEEDS] = append(map.shaftSpeed.subarray(1, -1));
  f[F_SPEED_COUNT] = map.shaftSpeed.length - 2;
  f[F_TORQUES] = append(map.torque.subarray(1, -1));
  f[F_TORQUE_COUNT] = map.torque.length - 2;
  f[F_POWER] = append(powerCells(map));
  f[F_LEAST] = map.least;
  f[F_IDLE] = idleSpeed;
  f[F_LENGTH] = sample;
  f[F_CAPACITY] = battery?.capacity ?? 0;
  f[F_CHARGE] = battery?.charge ?? 0;
  f[F_PER_CAPACITY] = f[F_CAPACITY] > 0 ? 1 / f[F_CAPACITY] : 0;
  f[F_SAG] = append(lineOver(battery?.sag ?? null));
  f[F_ACCEPTANCE] = append(lineOver(battery?.acceptance ?? null));
  writeHeating(f, battery?.heating ?? null, sample);
  return Float64Array.from(f);
}

function lineOver(line: ShareOverCharge | null): Float64Array {
  if (line === null) return Float64Array.of(0, Number.NEGATIVE_INFINITY, Number.POSITIVE_INFINITY, 0, 1, 0);
  const { charge, share } = line;
  const slope = share.map((from, i) =>
    i + 1 < share.length ? (share[i + 1] - from) / (charge[i + 1] - charge[i]) : 0,
  );
  return Float64Array.of(charge.length, 0, 0, 0, 0, 0, ...charge, ...share, ...slope);
}

/** The bilinear law of every cell, row by row: c0 + c1 w + T (c2 + c3 w). */
function powerCells({ shaftSpeed: w, torque, power }: PowerMap): Float64Array {
  const columns = torque.length - 1;
  const cells = new Float64Array(4 * (w.length - 1) * columns);
  for (let i = 0; i + 1 < w.length; i++)
    for (let j = 0; j < columns; j++) {
      const corner = i * torque.length + j;
      const above = corner + torque.length;
      const along = (row: number): number => (power[row + 1] - power[row]) / (torque[j + 1] - torque[j]);
      const width = w[i + 1] - w[i];
      const twist = (along(above) - along(corner)) / width;
      const slope = (power[above] - power[corner]) / width - twist * torque[j];
      const perTorque = along(corner) - twist * w[i];
      const level = power[corner] - slope * w[i] - torque[j] * (perTorque + twist * w[i]);
      cells.set([level, slope, perTorque, twist], 4 * (i * columns + j));
    }
  return cells;
}

function writeHeating(f: number[], heating: Heating | null, sample: number): void {
  if (heating === null) return;
  f[F_PER_POWER] = 1 / heating.continuousPower;
  f[F_COOLED] = exp(-sample / heating.time);
  f[F_ONSET] = heating.onset;
  f[F_LEAST_SHARE] = heating.least;
}
