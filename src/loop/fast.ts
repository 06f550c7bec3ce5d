import { BUS_COMMAND, BUS_LIMITED, BUS_MEASURED, BUS_REFERENCE, BUS_TARGET } from '../control/bus.ts';
import { moveReference } from '../control/set-point.ts';
import { exp } from '../numeric/elementary.ts';
import { keepHistory, readDelayed } from './delayed-speed.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';

/**
 * The `fast` kernel: one evaluation of the forces a step of length h, second order.
 *
 *     x, y         in closed form (as in exact.ts); xm the mean of x over the step
 *     vm           = v + h/2 a, a of the step before
 *     g sin(theta) = (H(q + h vm) - H(q)) / (h vm), H the integral of g sin(theta): no hill is stepped over;
 *                    the headwind in the same way
 *     a            = (F(vm, xm) - F_aero(vm) - F_roll(vm) - F_brake) / me - mean slope
 *     v <- v + h a,  q <- q + h (v_old + v_new) / 2
 *
 * Every work is its force over the same displacement, so that the account of energy closes to rounding.
 */
export function advanceFast(machine: Machine, ticks: number, until: number): number {
  const { s, p, rows, cells, speedEdges, throttleEdges, controller, tangent, log } = machine;
  const sample = p[at.P_SAMPLE];
  const steps = p[at.P_STEPS];
  const step = p[at.P_STEP];
  const half = 0.5 * step;
  const timed = p[at.P_TIMED] === 1;
  const mass = p[at.P_MASS];
  const effectiveMass = p[at.P_EFFECTIVE_MASS];
  const inverse = 1 / effectiveMass;
  const cda = p[at.P_CDA];
  const c0 = p[at.P_C0];
  const c1 = p[at.P_C1];
  const c2 = p[at.P_C2];
  const ta = p[at.P_ACTUATOR_LAG];
  const td = p[at.P_DRIVE_LAG];
  const rate = p[at.P_RATE];
  const rateGap = p[at.P_RATE_GAP];
  const weight = p[at.P_LAG_WEIGHT];
  const equal = p[at.P_LAG_EQUAL];
  const eaf = p[at.P_ACTUATOR_FULL];
  const edf = p[at.P_DRIVE_FULL];
  const meanActuator = p[at.P_ACTUATOR_MEAN];
  const meanDrive = p[at.P_DRIVE_MEAN];
  const momentDrive = p[at.P_DRIVE_MOMENT];
  const filter = p[at.P_FILTER];
  const filterFull = p[at.P_FILTER_FULL];
  const delay = p[at.P_DELAY];
  const scale = p[at.P_SCALE];
  const stallSpeed = p[at.P_STALL_SPEED];
  const derated = p[at.P_DERATED] === 1;
  const crosswind = p[at.P_CROSSWIND] === 1;
  const throttleCells = p[at.P_THROTTLE_CELLS];
  const lastSpeedCell = p[at.P_SPEED_CELLS] - 1;
  const lastRow = (p[at.P_ROAD_CELLS] - 1) * at.R_STRIDE;
  const end = rows[lastRow + at.R_STATION] + rows[lastRow + at.R_LENGTH];
  const toTrue = p[at.P_TO_TRUE];
  const brakesAbove = p[at.P_BRAKES_ABOVE];

  let v = s[at.SPEED];
  let q = s[at.STATION];
  let x = s[at.THROTTLE];
  let y = s[at.ACTUATOR];
  let z = s[at.FILTERED];
  let acceleration = s[at.ACCELERATION];
  let row = (s[at.CELL] * at.R_STRIDE) | 0;
  let speedCell = s[at.SPEED_CELL] | 0;
  let throttleCell = s[at.THROTTLE_CELL] | 0;
  let event = at.RUNNING;

  s[at.LOGGED] = 0;
  for (let tick = 0; tick < ticks && q < until && event === at.RUNNING; tick++) {
    const entry = tick * at.L_STRIDE;
    s[BUS_MEASURED] = scale * (delay > 0 ? readDelayed(s, p) : z);
    if (s[BUS_REFERENCE] !== s[BUS_TARGET]) moveReference(s);
    controller.step(s);
    const u = s[BUS_LIMITED];
    if (ta === 0 && rate === Number.POSITIVE_INFINITY) y = u;
    if (td === 0) x = y;

    const v0 = v;
    const z0 = z;
    const y0 = y;
    const brakeSpeed = s[BUS_REFERENCE] * toTrue + brakesAbove;
    const rated = u - y - rateGap > 1e-12 || y - u - rateGap > 1e-12;
    let slope0 = 0;
    let brake = 0;
    let elapsed = 0;
    let travelled = 0;
    let push = 0;
    let hold = 0;
    let aero = 0;
    let rolling = 0;
    let climb = 0;
    let magnitude = 0;

    for (let part = 0; part < steps && event === at.RUNNING; part++) {
      let xm = x;
      let xe = x;
      let ye = y;
      const gap = y - u;
      if (gap - rateGap > 1e-12 || -gap - rateGap > 1e-12) {
        // At the rate limit: two halves, each a ramp and, after the crossover, the lags.
        for (let side = 0; side < 2; side++) {
          const far = u - ye;
          const over = ((far > 0 ? far : -far) - rateGap) / rate;
          const ramp = over <= 0 ? 0 : Math.min(over, half);
          if (ramp > 0) {
            const slope = far > 0 ? rate : -rate;
            const l0 = ye - slope * td;
            xe = l0 + slope * ramp + (xe - l0) * (td > 0 ? exp(-ramp / td) : 0);
            ye += slope * ramp;
          }
          const rest = half - ramp;
          if (rest > 0) {
            const ya = ye - u;
            const ea = ta > 0 ? exp(-rest / ta) : 0;
            const ed = td > 0 ? exp(-rest / td) : 0;
            xe = u + weight * ya * ea + (xe - u - weight * ya + equal * ya * rest) * ed;
            ye = u + ya * ea;
          }
          if (side === 0) xm = xe;
        }
        xm = (x + 4 * xm + xe) * (1 / 6);
      } else {
        const la = weight * gap;
        const le = equal * gap;
        const ld = x - u - la;
        xm = u + la * meanActuator + ld * meanDrive + le * momentDrive;
        xe = u + la * eaf + (ld + le * step) * edf;
        ye = u + gap * eaf;
      }

      let vm = v + half * acceleration;
      if (!(vm > 0)) vm = 0.5 * v;
      while (speedCell > 0 && vm < speedEdges[speedCell - 1]) speedCell--;
      while (speedCell < lastSpeedCell && vm > speedEdges[speedCell]) speedCell++;
      while (throttleCell > 0 && xm < throttleEdges[throttleCell - 1]) throttleCell--;
      while (throttleCell < throttleCells - 1 && xm > throttleEdges[throttleCell]) throttleCell++;

      const from = q - rows[row + at.R_STATION];
      const ahead = timed ? step : step * vm;
      let there = row;
      while (there < lastRow && q + ahead >= rows[there + at.R_STRIDE + at.R_STATION]) there += at.R_STRIDE;
      const to = q + ahead - rows[there + at.R_STATION];
      let sine = rows[row + at.R_SIN] + rows[row + at.R_SIN + 1] * from;
      let wind = rows[row + at.R_HEADWIND] + rows[row + at.R_HEADWIND + 1] * from;
      if (there === row) {
        sine += 0.5 * ahead * rows[row + at.R_SIN + 1];
        wind += 0.5 * ahead * rows[row + at.R_HEADWIND + 1];
      } else if (ahead > 1e-9) {
        const each = 1 / ahead;
        sine =
          each *
          (rows[there + at.R_CLIMB] -
            rows[row + at.R_CLIMB] +
            to * (rows[there + at.R_SIN] + 0.5 * rows[there + at.R_SIN + 1] * to) -
            from * (rows[row + at.R_SIN] + 0.5 * rows[row + at.R_SIN + 1] * from));
        wind =
          each *
          (rows[there + at.R_WIND_RUN] -
            rows[row + at.R_WIND_RUN] +
            to * (rows[there + at.R_HEADWIND] + 0.5 * rows[there + at.R_HEADWIND + 1] * to) -
            from * (rows[row + at.R_HEADWIND] + 0.5 * rows[row + at.R_HEADWIND + 1] * from));
      }
      const middle = from + 0.5 * ahead;
      const air = rows[row + at.R_AIR] + rows[row + at.R_AIR + 1] * middle;
      const normal = mass * (rows[row + at.R_COS] + rows[row + at.R_COS + 1] * middle);
      const w = vm + wind;
      let drag = 0;
      if (crosswind) {
        tangent.at(w, rows[row + at.R_CROSSWIND] + rows[row + at.R_CROSSWIND + 1] * middle, air);
        drag = w * (tangent.out[0] + tangent.out[1] * w);
      } else drag = air * cda * w * (w < 0 ? -w : w);
      const c = 6 * (speedCell * throttleCells + throttleCell);
      const b3 = cells[c + 5];
      const closed = cells[c] + cells[c + 1] * vm;
      let gain = cells[c + 2] + vm * (cells[c + 3] + vm * cells[c + 4]) + (b3 === 0 ? 0 : b3 / vm);
      if (derated) {
        const d = rows[row + at.R_DERATE] + rows[row + at.R_DERATE + 1] * middle;
        gain = d * (gain + closed) - closed;
      }
      const force = closed + xm * gain;
      const resist = normal * (c0 + vm * (c1 + vm * c2));
      const slope = mass * sine;
      let a = (force - drag - resist - slope) * inverse;
      if (part === 0) {
        if (v > brakeSpeed - at.BRAKE_TIME * at.BRAKE_LIMIT) {
          brake = effectiveMass * (a + (v - brakeSpeed) / at.BRAKE_TIME);
          if (!(brake > 0)) brake = 0;
          if (brake > effectiveMass * at.BRAKE_LIMIT) brake = effectiveMass * at.BRAKE_LIMIT;
        }
        log[entry + at.L_ACCELERATION] = a - brake * inverse;
        log[entry + at.L_DRIVE_FORCE] = force;
        slope0 = filter > 0 ? (v - z) / filter : a - brake * inverse;
      }
      a -= brake * inverse;

      let h = step;
      let ve = v + h * a;
      if (ve <= 0) {
        h = a < 0 ? v / -a : 0;
        if (h > step) h = step;
        ve = 0;
        event = at.STOPPED;
      }
      let ds = 0.5 * h * (v + ve);
      if (q + (timed ? h : ds) >= end) {
        const room = end - q;
        const share = timed ? room / h : room / ds;
        if (share < 1) {
          // v is linear in time over the step: room = v t + a t^2 / 2.
          const time = timed ? room : (2 * room) / (v + Math.sqrt(Math.max(0, v * v + 2 * a * room)));
          if (time < h) h = time;
          ve = v + h * a;
          ds = timed ? 0.5 * h * (v + ve) : room;
        }
        event = at.END_OF_ROAD;
      }

      const work = force * ds;
      if (work >= 0) push += work;
      else hold += work;
      aero += drag * ds;
      rolling += resist * ds;
      climb += slope * ds;
      const kinetic = effectiveMass * a * ds;
      magnitude +=
        (work >= 0 ? work : -work) +
        (drag >= 0 ? drag : -drag) * ds +
        resist * ds +
        (slope >= 0 ? slope : -slope) * ds +
        (kinetic >= 0 ? kinetic : -kinetic) +
        brake * ds;
      if (filter > 0) {
        const ef = h === step ? filterFull : exp(-h / filter);
        z = ve - filter * a + (z - v + filter * a) * ef;
      } else z = ve;
      v = ve;
      q = event === at.END_OF_ROAD ? end : q + (timed ? h : ds);
      x = xe;
      y = ye;
      if (td === 0) x = y;
      travelled += ds;
      elapsed += h;
      acceleration = a;
      while (row < lastRow && q >= rows[row + at.R_STRIDE + at.R_STATION]) row += at.R_STRIDE;
    }

    if (!(v < 1e9)) return at.NON_FINITE;
    if (event === at.RUNNING && v < stallSpeed) event = at.STALLED;
    if (delay > 0) keepHistory(s, p, z0, slope0, filter > 0 ? (v - z) / filter : acceleration, sample);

    log[entry + at.L_SPEED] = v0;
    log[entry + at.L_ACTUATOR] = y0;
    log[entry + at.L_LIMITED] = u;
    log[entry + at.L_COMMAND] = s[BUS_COMMAND];
    log[entry + at.L_RATED] = rated ? 1 : 0;
    log[entry + at.L_BRAKE_FORCE] = brake;
    log[entry + at.L_TIME] = elapsed;
    log[entry + at.L_DISTANCE] = travelled;
    log[entry + at.L_PUSH] = push;
    log[entry + at.L_HOLD] = hold;
    s[at.DRIVE_WORK] += push;
    s[at.REGENERATION_WORK] += hold;
    s[at.AERO_WORK] += aero;
    s[at.ROLLING_WORK] += rolling;
    s[at.CLIMB_WORK] += climb;
    s[at.BRAKE_WORK] += brake * travelled;
    s[at.WORK_MAGNITUDE] += magnitude;
    s[at.TRAVELLED] += travelled;
    s[at.SPEED] = v;
    s[at.STATION] = q;
    s[at.THROTTLE] = x;
    s[at.ACTUATOR] = y;
    s[at.FILTERED] = z;
    s[at.ACCELERATION] = acceleration;
    s[at.CELL] = row / at.R_STRIDE;
    s[at.SPEED_CELL] = speedCell;
    s[at.THROTTLE_CELL] = throttleCell;
    s[at.LOGGED] = tick + 1;
    if (event === at.RUNNING) s[at.TICK] += 1;
    else s[at.PARTIAL] = elapsed;
  }
  return event;
}
