import type { ControllerSetup } from '../../src/control/setup.ts';
import type { BinRecord, FullSeries, Ledger } from '../../src/loop/result.ts';
import type { Road } from '../../src/road/road.ts';

/** What the made-up vehicle has [SI]; a plain plant, only near enough to give plausible pictures. */
export const PLANT = {
  mass: 215,
  cda: 0.58,
  crr: 0.014,
  peak: 320,
  power: 8500,
  drag: 40,
  brakeAbove: 8 / 3.6,
};

export interface FixtureRun {
  readonly bins: BinRecord;
  readonly ledger: Ledger;
  readonly series: FullSeries;
  readonly endTime: number;
  readonly endDistance: number;
}

/** Available and required wheel force at a knot [N]. */
export function forcesAt(
  road: Road,
  i: number,
  v: number,
): { required: number; upper: number; lower: number } {
  const air = v + road.headwind[i]!;
  const slope = Math.atan(road.grade[i]!);
  const required =
    0.5 * road.airDensity[i]! * PLANT.cda * air * Math.abs(air) +
    PLANT.mass * 9.81 * (PLANT.crr * Math.cos(slope) + Math.sin(slope));
  const upper = (Math.min(PLANT.peak, PLANT.power / Math.max(v, 1)) * road.airDensity[i]!) / 1.225;
  return { required, upper, lower: -PLANT.drag };
}

/** Euler steps of 0.1 s under a locked throttle or a PI law; ends early where `stopAt` [m] says so. */
export function fixtureRun(
  road: Road,
  set: number,
  controller: ControllerSetup,
  band: number,
  stopAt = Number.POSITIVE_INFINITY,
): FixtureRun {
  const dt = 0.1;
  const width = 10;
  const length = Math.min(stopAt, road.distance[road.size - 1]!);
  const size = Math.floor(length / width);
  const column = () => new Float64Array(size);
  const bins = {
    size,
    edge: Float64Array.from({ length: size + 1 }, (_, i) => i * width),
    timeAt: column(),
    time: column(),
    setSpeed: new Float64Array(size).fill(set),
    speedMean: column(),
    speedMin: column().fill(1e9),
    speedMax: column().fill(-1e9),
    errorMean: column(),
    errorSquare: column(),
    errorMin: column(),
    errorMax: column(),
    throttleMean: column(),
    throttleMin: column().fill(9),
    throttleMax: column().fill(-9),
    throttleTravel: column(),
    timeUpper: column(),
    timeLower: column(),
    timeRate: column(),
    timeBrake: column(),
    timeInBand: column(),
    gear: new Uint8Array(size),
    driveForce: column(),
    wheelPower: column(),
    driveWork: column(),
    regenerationWork: column(),
    brakeWork: column(),
    driveForceMax: column(),
    driveForceMin: column(),
    timeShift: column(),
    drawn: column(),
    driveLost: column(),
    regenerationLost: column(),
    timeOff: column(),
    detail: null,
  };
  const ledger = { drive: 0, regeneration: 0, aero: 0, rolling: 0, climb: 0, brake: 0, kinetic: 0 };
  const rows: number[][] = [];
  const level = forcesAt(
    { ...road, grade: new Float64Array(1), headwind: new Float64Array(1) } as Road,
    0,
    set,
  );
  const opening = (level.required + PLANT.drag) / (level.upper + PLANT.drag);
  let [v, x, t, integral, u] = [set, 0, 0, opening, opening];
  while (x < size * width - 1 && t < 60_000 && v > 0.5) {
    const knot = Math.min(road.size - 1, Math.floor(x / road.grid));
    const bin = Math.min(size - 1, Math.floor(x / width));
    const { required, upper } = forcesAt(road, knot, v);
    const before = u;
    let command = opening;
    if (controller.kind === 'pi') {
      const e = set - v;
      command = controller.kp * e + integral;
      if ((command < 1 || e < 0) && (command > 0 || e > 0)) integral += controller.ki * dt * e;
    }
    u = Math.min(1, Math.max(0, command));
    const force = -PLANT.drag + u * (upper + PLANT.drag);
    const over = v - set - PLANT.brakeAbove;
    const brake = over > 0 ? Math.max(0, force - required + 400 * over) : 0;
    const a = (force - required - brake) / (PLANT.mass + 9);
    const way = v * dt;
    const slope = Math.atan(road.grade[knot]!);
    ledger.drive += Math.max(0, force) * way;
    ledger.regeneration += Math.min(0, force) * way;
    const climb = PLANT.mass * 9.81 * Math.sin(slope) * way;
    const rolling = PLANT.mass * 9.81 * PLANT.crr * Math.cos(slope) * way;
    ledger.climb += climb;
    ledger.rolling += rolling;
    ledger.aero += required * way - climb - rolling;
    ledger.brake += brake * way;
    ledger.kinetic += (PLANT.mass + 9) * a * way;
    if (bins.time[bin] === 0) bins.timeAt[bin] = t;
    bins.time[bin]! += dt;
    bins.speedMean[bin]! += v * dt;
    bins.speedMin[bin] = Math.min(bins.speedMin[bin]!, v);
    bins.speedMax[bin] = Math.max(bins.speedMax[bin]!, v);
    bins.errorMean[bin]! += (v - set) * dt;
    bins.errorSquare[bin]! += (v - set) ** 2 * dt;
    bins.throttleMean[bin]! += u * dt;
    bins.throttleMin[bin] = Math.min(bins.throttleMin[bin]!, u);
    bins.throttleMax[bin] = Math.max(bins.throttleMax[bin]!, u);
    bins.throttleTravel[bin]! += Math.abs(u - before);
    bins.timeUpper[bin]! += u >= 1 ? dt : 0;
    bins.timeLower[bin]! += u <= 0 ? dt : 0;
    bins.timeBrake[bin]! += brake > 0 ? dt : 0;
    bins.timeInBand[bin]! += Math.abs(v - set) <= band ? dt : 0;
    bins.driveWork[bin]! += Math.max(0, force) * way;
    bins.regenerationWork[bin]! += Math.min(0, force) * way;
    bins.brakeWork[bin]! += brake * way;
    rows.push([t, x, v, command, u, force, brake, a]);
    v += a * dt;
    x += way;
    t += dt;
  }
  for (let i = 0; i < size; i++) {
    const time = bins.time[i]!;
    if (time === 0) {
      // A fast run may pass a bin within one step: it takes the values of the one before.
      for (const name of [
        'speedMean',
        'speedMin',
        'speedMax',
        'throttleMean',
        'throttleMin',
        'throttleMax',
      ] as const)
        bins[name][i] = i > 0 ? bins[name][i - 1]! : 0;
    } else {
      bins.speedMean[i]! /= time;
      bins.throttleMean[i]! /= time;
    }
    bins.errorMin[i] = bins.speedMin[i]! - set;
    bins.errorMax[i] = bins.speedMax[i]! - set;
    bins.wheelPower[i] = time > 0 ? (bins.driveWork[i]! + bins.regenerationWork[i]!) / time : 0;
  }
  const all = (k: number) => Float64Array.from(rows, (row) => row[k]!);
  const zero = new Float64Array(rows.length);
  const series: FullSeries = {
    size: rows.length,
    time: all(0),
    distance: all(1),
    setSpeed: new Float64Array(rows.length).fill(set),
    reference: new Float64Array(rows.length).fill(set),
    speed: all(2),
    measured: all(2),
    command: all(3),
    actuator: all(4),
    proportional: zero,
    integral: zero,
    feedforward: zero,
    limit: new Uint8Array(rows.length),
    gear: new Uint8Array(rows.length),
    shaftSpeed: all(5).fill(0),
    driveForce: all(5),
    brakeForce: all(6),
    acceleration: all(7),
  };
  return {
    bins,
    ledger: { ...ledger, shifts: 0, drawn: null, chargeAtEnd: null, residual: 3e-9 },
    series,
    endTime: t,
    endDistance: x,
  };
}

/** Every so many rows of a series between two times. */
export function cutSeries(series: FullSeries, from: number, to: number, most: number): FullSeries {
  const inside: number[] = [];
  for (let i = 0; i < series.size; i++) if (series.time[i]! >= from && series.time[i]! <= to) inside.push(i);
  const step = Math.max(1, Math.ceil(inside.length / most));
  const rows = inside.filter((_, k) => k % step === 0);
  const pick = (column: Float64Array) => Float64Array.from(rows, (i) => column[i]!);
  return {
    size: rows.length,
    time: pick(series.time),
    distance: pick(series.distance),
    setSpeed: pick(series.setSpeed),
    reference: pick(series.reference),
    speed: pick(series.speed),
    measured: pick(series.measured),
    command: pick(series.command),
    actuator: pick(series.actuator),
    proportional: pick(series.proportional),
    integral: pick(series.integral),
    feedforward: pick(series.feedforward),
    limit: new Uint8Array(rows.length),
    gear: new Uint8Array(rows.length),
    shaftSpeed: pick(series.shaftSpeed),
    driveForce: pick(series.driveForce),
    brakeForce: pick(series.brakeForce),
    acceleration: pick(series.acceleration),
  };
}
