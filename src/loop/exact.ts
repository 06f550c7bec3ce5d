import { BUS_COMMAND, BUS_LIMITED, BUS_MEASURED, BUS_REFERENCE, BUS_TARGET } from '../control/bus.ts';
import { moveReference } from '../control/set-point.ts';
import { takeUpTime } from './actuator-step.ts';
import { enterDriveCell, enterRoadCell } from './cells-at-hand.ts';
import { keepHistory, latestRow, readDelayed } from './delayed-speed.ts';
import { drawLast, drawOverChunk, drawPower } from './draw-power.ts';
import { stallSpeed } from './engage-gear.ts';
import { heldCommand } from './held-command.ts';
import { lagFactors } from './lags.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import { BRAKE_WATCH, riderBrake } from './rider-brake.ts';
import { integralTo } from './road-table.ts';
import { beginSample, hasSampleDevices } from './sample-devices.ts';

/**
 * The `exact` kernel. With command u held over a sample, actuator y, throttle x behind the drive's lag:
 *
 *     dy/dt = (u - y) / ta, |dy/dt| <= rate          dx/dt = (y - x) / td
 *     me dv/dt = F(v, x) - F_aero - F_roll - m g sin(theta) - F_brake
 *     dq/dt = v (or 1 along time)                    dW/dt = power of each force
 *
 * y and x have closed forms, so RK4 sees only (v, q) under a smooth x(t); works are the quadrature of its stages, but
 * that of the slope, which is the height gained. Per unit of effective mass, with the air speed w = v + headwind(q):
 *
 *     F = f0 + v (f1 + v f2) + f3 / v                f0 = a0 + x b0, f1 = a1 + x b1, f2 = x b2, f3 = x b3
 *     F_aero = w (near + slope w)                    F_roll = r0 + v (r1 + v r2)
 *
 * A step is cut where the right-hand side has a kink or a step: at road knots, where the rate limit lets go, where the
 * slack has been taken up, at edges of the drive's cells, at v = 0. The coefficients of a cell are frozen over a piece,
 * so that all stages are evaluated on one side of the kink; where the rider's brake comes on is not cut (a kink of about
 * 1e-5 m/s). Density, cos(theta) and derating are taken at the middle of the piece; grade and wind stay linear.
 */
export function advanceExact(machine: Machine, ticks: number, until: number): number {
  const { s, p, rows, throttleEdges, lags, here, controller, tangent, log, chunk } = machine;
  // A knot is met within this distance [m] or time [s], an edge of the drive within this speed [m/s]; one over throttle
  // closer, because the law may step there and a throttle may creep over it.
  // Constants stand inside the function: as variables of the module they would be read and checked at every use.
  const KNOT = 1e-7;
  const EDGE = 1e-9;
  const STOP = 1e-13;
  // Trials to hit a kink; pieces of one step after which kinks are no longer looked for (a drive that chatters).
  const TRIALS = 6;
  // A kink over throttle is not looked for closer to the start of a piece than this share of it.
  const LEAST_SHARE = 1e-3;
  const PIECES = 40;

  // A gap of the actuator, or a play of its slack, smaller than this is none.
  const NO_GAP = 1e-12;

  const sample = p[at.P_SAMPLE];
  const steps = p[at.P_STEPS];
  const step = p[at.P_STEP];
  const timed = p[at.P_TIMED] === 1;
  const cda = p[at.P_CDA];
  const cdaBehind = p[at.P_CDA_BEHIND];
  const c0 = p[at.P_C0];
  const c1 = p[at.P_C1];
  const c2 = p[at.P_C2];
  const td = p[at.P_DRIVE_LAG];
  const rate = p[at.P_RATE];
  const rateGap = p[at.P_RATE_GAP];
  const direct = p[at.P_ACTUATOR_LAG] === 0 && rate === Number.POSITIVE_INFINITY;
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
  const lastRow = rows.length - at.R_STRIDE;
  const end = rows[lastRow + at.R_STATION] + rows[lastRow + at.R_LENGTH] - KNOT;
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
  // The road cell and the drive cell at hand, loaded where they change.
  let loadedRow = -1;
  let loadedCell = -1;

  const kinetic0 = 0.5 * mass * v * v;
  for (let term = 0; term < at.C_DRIVE_FORCE; term++) chunk[term] = 0;
  const height0 = integralTo(rows, row, at.R_SIN, q);
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
        loadedCell = speedCell * (lastThrottleCell + 1) + throttleCell;
      }
    }
    if (!sensed) s[BUS_MEASURED] = scale * (delayed ? readDelayed(s, p, past, z) : z);
    if (s[BUS_REFERENCE] !== s[BUS_TARGET]) moveReference(s);
    controller.step(s);
    const u = resolution > 0 ? heldCommand(p, s[BUS_LIMITED]) : s[BUS_LIMITED];
    if (direct) y = u;
    plate = play === 0 ? y : Math.min(Math.max(plate, y - play), y + play);
    if (td === 0) x = plate;
    while (throttleCell > 0 && x < throttleEdges[throttleCell - 1]) throttleCell--;
    while (throttleCell < lastThrottleCell && x >= throttleEdges[throttleCell]) throttleCell++;
    const line = tick * at.L_STRIDE;
    log[line + at.L_SPEED] = v;
    log[line + at.L_ACTUATOR] = plate;
    log[line + at.L_COMMAND] = s[BUS_COMMAND];
    log[line + at.L_RATIO] = ratio;
    tick++;

    const brakeSpeed = Math.min(s[BUS_REFERENCE], s[at.BRAKE_REFERENCE]) * toTrue + brakesAbove;
    let limited = false;
    let slope0 = 0;
    let travelled = 0;
    let pieces = 0;
    let parts = steps;
    let left = step;
    let patience = PIECES;
    while (parts > 0 && event === at.RUNNING) {
      // Actuator and drive over a time t of this piece, with the decays e of their lags (see lags.ts):
      // y = u + gap e_actuator, or on a ramp y + l1 t; x = l0 + x1 t + (x - l0) e_drive + seen e_pull.
      let gap = y - u;
      let most = left;
      let l0 = u;
      let l1 = 0;
      const rated = gap - rateGap > NO_GAP || -gap - rateGap > NO_GAP;
      if (rated) {
        l1 = gap < 0 ? rate : -rate;
        l0 = y - l1 * td;
        const over = (y - u - (gap < 0 ? -rateGap : rateGap)) / -l1;
        if (over < most) most = over;
        gap = 0;
      }
      let x1 = l1;
      let seen = gap;
      // The plate behind the slack is carried along, or rests until the play has been taken up.
      let lead = 0;
      let rests = false;
      let takenUp = Number.POSITIVE_INFINITY;
      if (play > 0) {
        lead = u < y ? -play : play;
        const free = play + (u < y ? y - plate : plate - y);
        rests = free > NO_GAP;
        if (rests) {
          // By its lag alone the actuator makes no more way than this in a step: mostly the play outlasts it. Math.max, which
          // changes nothing, makes a plain number of what comes from a call: as it comes it would be boxed.
          if (rated || Math.abs(gap) * (1 - lags[at.G_ACTUATOR]) > (1 - NO_GAP) * free)
            takenUp = Math.max(0, takeUpTime(p[at.P_ACTUATOR_LAG], Math.abs(u - y), free, rated ? rate : 0));
          if (takenUp < most) most = takenUp;
          l0 = plate;
          x1 = 0;
          seen = 0;
        } else l0 -= lead;
      }

      if (row !== loadedRow) {
        loadedRow = row;
        enterRoadCell(machine, row);
      }
      const cell = speedCell * (lastThrottleCell + 1) + throttleCell;
      if (cell !== loadedCell) {
        loadedCell = cell;
        enterDriveCell(machine, speedCell, throttleCell);
      }
      const sin0 = here[at.H_SIN];
      const sin1 = here[at.H_SIN + 1];
      const wind0 = here[at.H_HEADWIND];
      const wind1 = here[at.H_HEADWIND + 1];
      const floor = here[at.H_FLOOR];
      const ceiling = here[at.H_CEILING];
      const low = here[at.H_LOW];
      const high = here[at.H_HIGH];
      const from = q - here[at.H_STATION];
      const room = here[at.H_LENGTH] - from;

      let h = most;
      let aimed = false;
      if (timed ? h > room : h * (v + 0.5 * h * acceleration) > room) {
        h = timed ? room : room / (v + (0.5 * room * acceleration) / v);
        if (!(h > 0)) h = 0;
        aimed = true;
      }

      let crossed = 0;
      for (let trial = pieces < patience ? 0 : TRIALS; ; trial++) {
        const decay = h === step ? 0 : at.G_STRIDE;
        if (decay > 0) lagFactors(p, lags, decay, h);
        const half = 0.5 * h;
        const xh =
          l0 + x1 * half + (x - l0) * lags[decay + at.G_DRIVE_HALF] + seen * lags[decay + at.G_PULL_HALF];
        const xe = l0 + x1 * h + (x - l0) * lags[decay + at.G_DRIVE] + seen * lags[decay + at.G_PULL];
        if (lastThrottleCell > 0 && trial < TRIALS && (xe > high + STOP || xe < low - STOP)) {
          crossed = xe > high + STOP ? 1 : -1;
          aimed = false;
          const ye = rated ? y + l1 * h : u + gap * lags[decay + at.G_ACTUATOR];
          const slope = rated ? l1 : (u - ye) / p[at.P_ACTUATOR_LAG];
          const target = rests ? plate : ye - lead;
          // Newton's rule from the far side, or along the chord where that leaves the piece, or makes no way in it: from a
          // point that the rule has found, it finds the same one again.
          const edge = crossed > 0 ? high : low;
          const met = h + (edge - xe) / (td > 0 ? (target - xe) / td : slope);
          if (met > LEAST_SHARE * h && met < h) h = met;
          else h *= Math.min(1, Math.max(0, (edge - x) / (xe - x)));
          continue;
        }

        const middle = from + (timed ? half : half * v);
        const air = here[at.H_AIR] + here[at.H_AIR + 1] * middle;
        const normal = here[at.H_COS] + here[at.H_COS + 1] * middle;
        const r0 = normal * c0;
        const r1 = normal * c1;
        const r2 = normal * c2;
        let near = 0;
        let slope = air * cda;
        if (crosswind) {
          const side = rows[row + at.R_CROSSWIND] + rows[row + at.R_CROSSWIND + 1] * middle;
          tangent.at(v + half * acceleration + wind0 + wind1 * middle, side, air);
          near = tangent.out[0];
          slope = tangent.out[1];
        } else if (v + wind0 + wind1 * from < 0) slope = -air * cdaBehind;
        let a0 = here[at.H_LAW];
        let a1 = here[at.H_LAW + 1];
        let b0 = here[at.H_LAW + 2];
        let b1 = here[at.H_LAW + 3];
        let b2 = here[at.H_LAW + 4];
        let b3 = here[at.H_LAW + 5];
        if (derated) {
          const factor = high > 0 ? s[at.DRIVE_FACTOR] : s[at.REGENERATION_FACTOR];
          const lost = 1 - factor * (here[at.H_DERATE] + here[at.H_DERATE + 1] * middle);
          a0 -= lost * here[at.H_LOSS];
          a1 -= lost * here[at.H_LOSS + 1];
          b0 -= lost * here[at.H_LOSS + 2];
          b1 -= lost * here[at.H_LOSS + 3];
          b2 -= lost * here[at.H_LOSS + 4];
          b3 -= lost * here[at.H_LOSS + 5];
        }

        const w1 = v + wind0 + wind1 * from;
        const drive1 = a0 + x * b0 + v * (a1 + x * b1 + v * x * b2) + (b3 === 0 ? 0 : (x * b3) / v);
        const aero1 = w1 * (near + slope * w1);
        const rolling1 = r0 + v * (r1 + v * r2);
        const watched = v > brakeSpeed - BRAKE_WATCH;
        let k1 = drive1 - aero1 - (rolling1 + (sin0 + sin1 * from));
        const brake1 = watched ? riderBrake(k1, v - brakeSpeed, strongest) : 0;
        k1 -= brake1;

        const f0 = a0 + xh * b0;
        const f1 = a1 + xh * b1;
        const f2 = xh * b2;
        const f3 = xh * b3;
        const v2 = v + half * k1;
        const q2 = from + (timed ? half : half * v);
        const w2 = v2 + (wind0 + wind1 * q2);
        const drive2 = f0 + (b3 === 0 ? 0 : f3 / v2) + v2 * (f1 + v2 * f2);
        const aero2 = w2 * (near + slope * w2);
        const rolling2 = r0 + v2 * (r1 + v2 * r2);
        let k2 = drive2 - aero2 - (rolling2 + (sin0 + sin1 * q2));
        const brake2 = watched ? riderBrake(k2, v2 - brakeSpeed, strongest) : 0;
        k2 -= brake2;

        const v3 = v + half * k2;
        const q3 = from + (timed ? half : half * v2);
        const w3 = v3 + (wind0 + wind1 * q3);
        const drive3 = f0 + (b3 === 0 ? 0 : f3 / v3) + v3 * (f1 + v3 * f2);
        const aero3 = w3 * (near + slope * w3);
        const rolling3 = r0 + v3 * (r1 + v3 * r2);
        let k3 = drive3 - aero3 - (rolling3 + (sin0 + sin1 * q3));
        const brake3 = watched ? riderBrake(k3, v3 - brakeSpeed, strongest) : 0;
        k3 -= brake3;

        const v4 = v + h * k3;
        const q4 = from + (timed ? h : h * v3);
        const w4 = v4 + (wind0 + wind1 * q4);
        const drive4 = a0 + xe * b0 + (b3 === 0 ? 0 : (xe * b3) / v4) + v4 * (a1 + xe * b1 + v4 * (xe * b2));
        const aero4 = w4 * (near + slope * w4);
        const rolling4 = r0 + v4 * (r1 + v4 * r2);
        let k4 = drive4 - aero4 - (rolling4 + (sin0 + sin1 * q4));
        const brake4 = watched ? riderBrake(k4, v4 - brakeSpeed, strongest) : 0;
        k4 -= brake4;

        const sixth = h * (1 / 6);
        const ve = v + sixth * (k1 + 2 * (k2 + k3) + k4);
        const ds = sixth * (v + 2 * (v2 + v3) + v4);
        const dq = timed ? h : ds;
        if (trial < TRIALS) {
          const miss = room - dq;
          if (miss < -KNOT || (aimed && miss > KNOT && h < most)) {
            h = Math.min(Math.max(0, h + (timed ? miss : miss / ve)), most);
            aimed = true;
            continue;
          }
          if (ve < floor - EDGE || ve > ceiling + EDGE) {
            aimed = false;
            h *= Math.max(0, ((ve < floor ? floor : ceiling) - v) / (ve - v));
            continue;
          }
        }

        const weight = mass * sixth;
        const work = weight * (v * drive1 + 2 * (v2 * drive2 + v3 * drive3) + v4 * drive4);
        if (work >= 0) chunk[at.C_PUSH] += work;
        else chunk[at.C_HOLD] += work;
        chunk[at.C_AERO] += weight * (v * aero1 + 2 * (v2 * aero2 + v3 * aero3) + v4 * aero4);
        chunk[at.C_ROLLING] += weight * (v * rolling1 + 2 * (v2 * rolling2 + v3 * rolling3) + v4 * rolling4);
        if (watched) {
          chunk[at.C_BRAKE] += weight * (v * brake1 + 2 * (v2 * brake2 + v3 * brake3) + v4 * brake4);
          if (brake1 + brake4 > 0) chunk[at.C_BRAKE_TIME] += h;
        }
        chunk[at.C_DISTANCE] += ds;
        if (fitted) travelled += ds;
        if (timed)
          chunk[at.C_CLIMB] +=
            mass * ds * sin0 + weight * sin1 * (v * from + 2 * (v2 * q2 + v3 * q3) + v4 * q4);
        if (pieces === 0) {
          chunk[at.C_DRIVE_FORCE] = mass * drive1;
          log[line + at.L_FORCE] = mass * drive1;
          chunk[at.C_ACCELERATION] = k1;
          chunk[at.C_BRAKE_FORCE] = mass * brake1;
          limited = rated;
          slope0 = filter > 0 ? (v - z) / filter : k1;
        }
        if (filter > 0)
          z =
            v +
            (z - v) * lags[decay + at.G_FILTER] +
            (ve - v) * lags[decay + at.G_FILTER_RISE] +
            k1 * lags[decay + at.G_FILTER_BEGIN] +
            k4 * lags[decay + at.G_FILTER_END];
        else z = ve;
        y = rated ? y + l1 * h : u + gap * lags[decay + at.G_ACTUATOR];
        if (rated && h === most && most < left && most !== takenUp) y = l1 > 0 ? u - rateGap : u + rateGap;
        if (play === 0) plate = y;
        else if (!rests) plate = y - lead;
        else if (h === takenUp) y = plate + lead;
        if (crossed > 0 && xe > high - STOP) throttleCell++;
        else if (crossed < 0 && xe < low + STOP) throttleCell--;
        x = td === 0 ? plate : xe;
        if (trial === TRIALS) {
          // The edge was not looked for, or not hit.
          while (throttleCell > 0 && x < throttleEdges[throttleCell - 1] - STOP) throttleCell--;
          while (throttleCell < lastThrottleCell && x > throttleEdges[throttleCell] + STOP) throttleCell++;
        }
        v = ve;
        q += dq;
        acceleration = k4;
        left -= h;
        pieces++;
        break;
      }

      if (!(left > 0)) {
        parts--;
        left = step;
        patience = pieces + PIECES;
      }
      if (q - here[at.H_STATION] > here[at.H_LENGTH] - KNOT) {
        while (row < lastRow && q >= rows[row + at.R_STRIDE + at.R_STATION] - KNOT) row += at.R_STRIDE;
        if (q >= end) event = at.END_OF_ROAD;
      }
      if (v > ceiling - EDGE && acceleration >= 0) speedCell++;
      else if (v < floor + EDGE && acceleration < 0) {
        if (speedCell > 0) speedCell--;
        else event = at.STOPPED;
      }
    }

    if (!(v < 1e9 && v > -1e9)) {
      chunk.fill(0);
      s[at.TICK] += tick - 1;
      return at.NON_FINITE;
    }
    if (event === at.STOPPED) v = 0;
    else if (v < stall) event = at.STALLED;
    // After a whole sample none of it is left.
    elapsed = sample - ((parts - 1) * step + left);
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
  // Told without a branch: one that is first taken at the end of a road would make the engine compile the loop anew.
  const cut = event === at.RUNNING ? 0 : 1;
  s[at.PARTIAL] = cut === 0 ? s[at.PARTIAL] : elapsed;
  if (p[at.P_SOURCE] === at.DRAWN_BY_CHUNK) drawOverChunk(machine, tick, elapsed);
  const whole = tick - cut;
  s[at.TICK] += whole;
  chunk[at.C_TICKS] = tick;
  chunk[at.C_TIME] = whole * sample + s[at.PARTIAL];
  if (!timed) chunk[at.C_CLIMB] = p[at.P_MASS] * (integralTo(rows, row, at.R_SIN, q) - height0);
  chunk[at.C_KINETIC] = 0.5 * mass * v * v - kinetic0;
  return event;
}
