import { BUS_COMMAND, BUS_LIMITED, BUS_MEASURED, BUS_REFERENCE, BUS_TARGET } from '../control/bus.ts';
import { moveReference } from '../control/set-point.ts';
import { actuatorStep } from './actuator-step.ts';
import { enterDriveCell, enterRoadCell, lawStep } from './cells-at-hand.ts';
import { keepHistory, latestRow, readDelayed } from './delayed-speed.ts';
import { drawLast, drawOverChunk, drawPower } from './draw-power.ts';
import { stallSpeed } from './engage-gear.ts';
import { heldCommand } from './held-command.ts';
import { decay } from './lags.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import { BRAKE_WATCH, riderBrake } from './rider-brake.ts';
import { meanBetween } from './road-table.ts';
import { beginSample, hasSampleDevices } from './sample-devices.ts';

/**
 * The `fast` kernel: one evaluation of the forces a step of length h, second order. Per unit of effective mass:
 *
 *     x, y         in closed form (see lags.ts, actuator-step.ts); xm the mean of x over the step
 *     vm           = v + h/2 a, a of the step before
 *     g sin(theta) = (H(q + h vm) - H(q)) / (h vm), H the integral of g sin(theta): no hill is stepped over;
 *                    the headwind in the same way
 *     a            = F(vm, xm) - F_aero(vm) - F_roll(vm) - F_brake - mean slope
 *     v <- v + h a,  q <- q + h (v_old + v_new) / 2
 *
 * A law that steps over the throttle within the step counts by the time on each side, as if x went in a line.
 * Every work is its force over the same displacement, so that the account of energy closes to rounding.
 */
export function advanceFast(machine: Machine, ticks: number, until: number): number {
  const { s, p, rows, speedEdges, throttleEdges, lags, here, controller, tangent, log, chunk } = machine;
  // A gap of the actuator, or a play of its slack, smaller than this is none.
  const NO_GAP = 1e-12;

  const sample = p[at.P_SAMPLE];
  const steps = p[at.P_STEPS];
  const step = p[at.P_STEP];
  const half = 0.5 * step;
  const timed = p[at.P_TIMED] === 1;
  const cda = p[at.P_CDA];
  const cdaBehind = p[at.P_CDA_BEHIND];
  const c0 = p[at.P_C0];
  const c1 = p[at.P_C1];
  const c2 = p[at.P_C2];
  const td = p[at.P_DRIVE_LAG];
  const rate = p[at.P_RATE];
  const rateGap = p[at.P_RATE_GAP];
  const lawEdge = p[at.P_LAW_STEP];
  const direct = p[at.P_ACTUATOR_LAG] === 0 && rate === Number.POSITIVE_INFINITY;
  const actuatorDecay = lags[at.G_ACTUATOR];
  const driveDecay = lags[at.G_DRIVE];
  const pull = lags[at.G_PULL];
  const driveMean = p[at.P_DRIVE_MEAN];
  const pullMean = p[at.P_PULL_MEAN];
  const sensed = p[at.P_SENSED] === 1;
  const scale = p[at.P_SCALE];
  const resolution = p[at.P_RESOLUTION];
  const play = p[at.P_PLAY];
  const filter = p[at.P_FILTER];
  const delayed = p[at.P_DELAY] > 0;
  const derated = p[at.P_DERATED] === 1;
  const belted = p[at.P_BELT] === 1;
  const fitted = hasSampleDevices(p);
  const drains = p[at.P_SOURCE] === at.DRAWN_BY_SAMPLE;
  const crosswind = p[at.P_CROSSWIND] === 1;
  const lastThrottleCell = throttleEdges.length;
  const lastSpeedCell = speedEdges.length;
  const lastRow = rows.length - at.R_STRIDE;
  const end = rows[lastRow + at.R_STATION] + rows[lastRow + at.R_LENGTH];
  const toTrue = p[at.P_TO_TRUE];
  const brakesAbove = p[at.P_BRAKES_ABOVE];
  const strongest = p[at.P_STRONGEST_BRAKE];

  let v = s[at.SPEED];
  let q = s[at.STATION];
  let x = s[at.THROTTLE];
  let y = s[at.ACTUATOR];
  let z = s[at.FILTERED];
  let plate = s[at.PLATE];
  let acceleration = s[at.ACCELERATION];
  let mass = s[at.EFFECTIVE_MASS];
  let ratio = s[at.RATIO];
  const stall = stallSpeed(machine);
  let row = (s[at.CELL] * at.R_STRIDE) | 0;
  let speedCell = s[at.SPEED_CELL] | 0;
  let throttleCell = s[at.THROTTLE_CELL] | 0;
  let past = delayed ? latestRow(s, p) : 0;

  let loadedRow = -1;
  let loadedDrive = -1;

  const kinetic0 = 0.5 * mass * v * v;
  for (let term = 0; term < at.C_DRIVE_FORCE; term++) chunk[term] = 0;
  let elapsed = 0;
  let event = at.RUNNING;
  let tick = 0;
  while (tick < ticks && q < until && event === at.RUNNING) {
    if (fitted) {
      if (!beginSample(machine, row, throttleCell)) break;
      v = s[at.SPEED];
      z = s[at.FILTERED];
      if (belted) {
        mass = s[at.EFFECTIVE_MASS];
        ratio = s[at.RATIO];
        speedCell = s[at.SPEED_CELL] | 0;
        loadedDrive = speedCell * (lastThrottleCell + 1) + throttleCell;
      }
    }
    if (!sensed) s[BUS_MEASURED] = scale * (delayed ? readDelayed(s, p, past, z) : z);
    if (s[BUS_REFERENCE] !== s[BUS_TARGET]) moveReference(s);
    controller.step(s);
    const u = resolution > 0 ? heldCommand(p, s[BUS_LIMITED]) : s[BUS_LIMITED];
    if (direct) y = u;
    plate = play === 0 ? y : Math.min(Math.max(plate, y - play), y + play);
    if (td === 0) x = plate;
    const line = tick * at.L_STRIDE;
    log[line + at.L_SPEED] = v;
    log[line + at.L_ACTUATOR] = plate;
    log[line + at.L_COMMAND] = s[BUS_COMMAND];
    log[line + at.L_RATIO] = ratio;
    tick++;

    const brakeSpeed = Math.min(s[BUS_REFERENCE], s[at.BRAKE_REFERENCE]) * toTrue + brakesAbove;
    const limited = u - y - rateGap > NO_GAP || y - u - rateGap > NO_GAP;
    let slope0 = 0;
    let travelled = 0;
    elapsed = 0;
    for (let part = 0; part < steps && event === at.RUNNING; part++) {
      const gap = y - u;
      let rest = u;
      let seen = gap;
      let ye = u + gap * actuatorDecay;
      let moved = gap - rateGap > NO_GAP || -gap - rateGap > NO_GAP;
      let pe = ye;
      if (play > 0 && !moved) {
        // The plate behind the slack is carried along, rests, or begins to move within the step.
        const free = play + (gap > 0 ? y - plate : plate - y);
        if (free <= NO_GAP) {
          rest = gap > 0 ? u + play : u - play;
          pe = rest + gap * actuatorDecay;
        } else if (Math.abs(ye - y) <= free) {
          rest = pe = plate;
          seen = 0;
        } else moved = true;
      }
      let xm = rest + (x - rest) * driveMean + seen * pullMean;
      let xe = rest + (x - rest) * driveDecay + seen * pull;
      if (moved) {
        actuatorStep(p, lags, u, x, y, plate);
        xm = lags[at.G_MOVED_MEAN];
        xe = lags[at.G_MOVED_DRIVE];
        ye = lags[at.G_MOVED_ACTUATOR];
        pe = lags[at.G_MOVED_PLATE];
      }

      let vm = v + half * acceleration;
      if (!(vm > 0)) vm = 0.5 * v;
      while (speedCell > 0 && ratio * vm < speedEdges[speedCell - 1]) speedCell--;
      while (speedCell < lastSpeedCell && ratio * vm > speedEdges[speedCell]) speedCell++;
      while (throttleCell > 0 && xm < throttleEdges[throttleCell - 1]) throttleCell--;
      while (throttleCell < lastThrottleCell && xm > throttleEdges[throttleCell]) throttleCell++;

      if (row !== loadedRow) {
        loadedRow = row;
        enterRoadCell(machine, row);
      }
      const drive = speedCell * (lastThrottleCell + 1) + throttleCell;
      if (drive !== loadedDrive) {
        loadedDrive = drive;
        enterDriveCell(machine, speedCell, throttleCell);
      }
      const from = q - here[at.H_STATION];
      const ahead = timed ? step : step * vm;
      const middle = from + 0.5 * ahead;
      let slope = here[at.H_SIN] + here[at.H_SIN + 1] * middle;
      let wind = here[at.H_HEADWIND] + here[at.H_HEADWIND + 1] * middle;
      if (from + ahead >= here[at.H_LENGTH] && row < lastRow && ahead > 1e-9) {
        let there = row;
        while (there < lastRow && q + ahead >= rows[there + at.R_STRIDE + at.R_STATION]) there += at.R_STRIDE;
        slope = (p[at.P_MASS] / mass) * meanBetween(rows, at.R_SIN, row, q, there, q + ahead);
        wind = meanBetween(rows, at.R_HEADWIND, row, q, there, q + ahead);
      }
      const air = here[at.H_AIR] + here[at.H_AIR + 1] * middle;
      const normal = here[at.H_COS] + here[at.H_COS + 1] * middle;
      const w = vm + wind;
      let drag = air * w * (w < 0 ? -w * cdaBehind : w * cda);
      if (crosswind) {
        tangent.at(w, rows[row + at.R_CROSSWIND] + rows[row + at.R_CROSSWIND + 1] * middle, air);
        drag = w * (tangent.out[0] + tangent.out[1] * w);
      }
      const b3 = here[at.H_LAW + 5];
      let force =
        here[at.H_LAW] +
        xm * here[at.H_LAW + 2] +
        vm * (here[at.H_LAW + 1] + xm * (here[at.H_LAW + 3] + vm * here[at.H_LAW + 4])) +
        (b3 === 0 ? 0 : (xm * b3) / vm);
      if (derated) {
        const factor = here[at.H_HIGH] > 0 ? s[at.DRIVE_FACTOR] : s[at.REGENERATION_FACTOR];
        const lost = 1 - factor * (here[at.H_DERATE] + here[at.H_DERATE + 1] * middle);
        const l3 = here[at.H_LOSS + 5];
        force -=
          lost *
          (here[at.H_LOSS] +
            xm * here[at.H_LOSS + 2] +
            vm * (here[at.H_LOSS + 1] + xm * (here[at.H_LOSS + 3] + vm * here[at.H_LOSS + 4])) +
            (l3 === 0 ? 0 : (xm * l3) / vm));
      }
      if (lawEdge > 0 && (x - lawEdge) * (xe - lawEdge) < 0) {
        // The law steps within the step: each side has its share of the time.
        const below = (xe > x ? lawEdge - x : lawEdge - xe) / Math.abs(xe - x);
        force += (xm < lawEdge ? 1 - below : -below) * lawStep(machine, vm);
      }
      const resist = normal * (c0 + vm * (c1 + vm * c2));
      let a = force - drag - resist - slope;
      const brake = v > brakeSpeed - BRAKE_WATCH ? riderBrake(a, vm - brakeSpeed, strongest) : 0;
      a -= brake;
      if (part === 0) {
        chunk[at.C_DRIVE_FORCE] = mass * force;
        log[line + at.L_FORCE] = mass * force;
        chunk[at.C_ACCELERATION] = a;
        chunk[at.C_BRAKE_FORCE] = mass * brake;
        slope0 = filter > 0 ? (v - z) / filter : a;
      }

      let h = step;
      let ve = v + h * a;
      if (ve <= 0) {
        h = a < 0 ? Math.min(v / -a, step) : 0;
        ve = 0;
        event = at.STOPPED;
      }
      let ds = 0.5 * h * (v + ve);
      if (q + (timed ? h : ds) >= end) {
        // v is linear in time over the step: room = v t + a t^2 / 2.
        const room = end - q;
        const time = timed ? room : (2 * room) / (v + Math.sqrt(Math.max(0, v * v + 2 * a * room)));
        if (time < h) {
          h = time;
          ve = v + h * a;
          ds = timed ? 0.5 * h * (v + ve) : room;
        }
        event = at.END_OF_ROAD;
      }

      const way = mass * ds;
      const work = force * way;
      if (work >= 0) chunk[at.C_PUSH] += work;
      else chunk[at.C_HOLD] += work;
      chunk[at.C_AERO] += drag * way;
      chunk[at.C_ROLLING] += resist * way;
      chunk[at.C_CLIMB] += slope * way;
      if (brake > 0) {
        chunk[at.C_BRAKE] += brake * way;
        chunk[at.C_BRAKE_TIME] += h;
      }
      chunk[at.C_DISTANCE] += ds;
      if (fitted) travelled += ds;
      elapsed += h;
      if (filter > 0) {
        const kept = h === step ? lags[at.G_FILTER] : decay(filter, h);
        z = ve - filter * a + (z - v + filter * a) * kept;
      } else z = ve;
      v = ve;
      q = event === at.END_OF_ROAD ? end : q + (timed ? h : ds);
      x = td === 0 ? pe : xe;
      y = ye;
      plate = pe;
      acceleration = a;
      while (row < lastRow && q >= rows[row + at.R_STRIDE + at.R_STATION]) row += at.R_STRIDE;
    }

    if (!(v < 1e9)) {
      chunk.fill(0);
      s[at.TICK] += tick - 1;
      return at.NON_FINITE;
    }
    if (event === at.RUNNING) {
      elapsed = sample;
      if (v < stall) event = at.STALLED;
    }
    if (limited) chunk[at.C_RATED_TIME] += elapsed;
    if (delayed) past = keepHistory(s, past, slope0, filter > 0 ? (v - z) / filter : acceleration);
    if (fitted) {
      s[at.SPEED] = v;
      s[at.STATION] = q;
      s[at.THROTTLE] = x;
      s[at.ACTUATOR] = y;
      s[at.PLATE] = plate;
      s[at.FILTERED] = z;
      s[at.ACCELERATION] = acceleration;
      s[at.TRAVELLED] += travelled;
      s[at.SPEED_CELL] = speedCell;
      if (drains && event === at.RUNNING) drawPower(machine, line);
      else if (drains) drawLast(machine, line, elapsed);
    }
  }

  s[at.SPEED] = v;
  s[at.STATION] = q;
  s[at.THROTTLE] = x;
  s[at.ACTUATOR] = y;
  s[at.PLATE] = plate;
  s[at.FILTERED] = z;
  s[at.ACCELERATION] = acceleration;
  s[at.SPEED_CELL] = speedCell;
  s[at.CELL] = row / at.R_STRIDE;
  s[at.THROTTLE_CELL] = throttleCell;
  if (event !== at.RUNNING) s[at.PARTIAL] = elapsed;
  if (p[at.P_SOURCE] === at.DRAWN_BY_CHUNK) drawOverChunk(machine, tick, elapsed);
  const whole = event === at.RUNNING ? tick : tick - 1;
  s[at.TICK] += whole;
  chunk[at.C_TICKS] = tick;
  chunk[at.C_TIME] = whole * sample + s[at.PARTIAL];
  chunk[at.C_KINETIC] = 0.5 * mass * v * v - kinetic0;
  return event;
}
