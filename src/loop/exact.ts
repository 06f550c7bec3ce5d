import { BUS_LIMITED, BUS_MEASURED, BUS_REFERENCE, BUS_TARGET } from '../control/bus.ts';
import { moveReference } from '../control/set-point.ts';
import { exp } from '../numeric/elementary.ts';
import { keepHistory, readDelayed } from './delayed-speed.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import { recordSample } from './record.ts';

/** A knot is met within this distance [m] or time [s], an edge of the drive within this speed [m/s] and throttle. */
const KNOT = 1e-7;
const EDGE = 1e-9;
/** Trials to hit a kink; pieces of one step after which kinks are no longer looked for (a drive that chatters). */
const TRIALS = 6;
const PIECES = 40;

/**
 * The `exact` kernel. With command u held over a sample, actuator y, throttle x behind the drive's lag:
 *
 *     dy/dt = (u - y) / ta, |dy/dt| <= rate          dx/dt = (y - x) / td
 *     me dv/dt = F(v, x) - F_aero - F_roll - m g sin(theta) - F_brake
 *     dq/dt = v (or 1 along time)                    dW/dt = power of each force
 *
 * y and x have closed forms, so RK4 sees only (v, q) under a smooth x(t); W is its quadrature. A step is cut where
 * the right-hand side has a kink: at road knots, where the rate limit lets go, at edges of the drive's cells, at v = 0.
 * Coefficients of a cell are frozen over a piece, so that all stages are evaluated on one side of the kink.
 * Density, cos(theta) and derating are taken at the middle of the piece; grade and wind along the road stay linear.
 */
export function advanceExact(machine: Machine, ticks: number, until: number): number {
  const { s, p, rows, cells, speedEdges, throttleEdges, controller, tangent, sums } = machine;
  const sample = p[at.P_SAMPLE];
  const steps = p[at.P_STEPS];
  const step = p[at.P_STEP];
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
  const filter = p[at.P_FILTER];
  const delay = p[at.P_DELAY];
  const scale = p[at.P_SCALE];
  const stallSpeed = p[at.P_STALL_SPEED];
  const derated = p[at.P_DERATED] === 1;
  const crosswind = p[at.P_CROSSWIND] === 1;
  const throttleCells = p[at.P_THROTTLE_CELLS];
  const lastSpeedCell = p[at.P_SPEED_CELLS] - 1;
  const lastRow = (p[at.P_ROAD_CELLS] - 1) * at.R_STRIDE;
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

  for (let tick = 0; tick < ticks && q < until && event === at.RUNNING; tick++) {
    s[BUS_MEASURED] = scale * (delay > 0 ? readDelayed(s, p) : z);
    if (s[BUS_REFERENCE] !== s[BUS_TARGET]) moveReference(s);
    controller.step(s);
    const u = s[BUS_LIMITED];
    if (ta === 0 && rate === Number.POSITIVE_INFINITY) y = u;
    if (td === 0) x = y;
    while (throttleCell > 0 && x < throttleEdges[throttleCell - 1]) throttleCell--;
    while (throttleCell < throttleCells - 1 && x > throttleEdges[throttleCell]) throttleCell++;

    const v0 = v;
    const z0 = z;
    const y0 = y;
    let slope0 = 0;
    let slope1 = 0;
    let brake = 0;
    let elapsed = 0;
    let travelled = 0;
    let push = 0;
    let hold = 0;
    let aero = 0;
    let rolling = 0;
    let climb = 0;
    let magnitude = 0;
    let pieces = 0;
    const brakeSpeed = s[BUS_REFERENCE] * toTrue + brakesAbove;

    for (let part = 0; part < steps && event === at.RUNNING; part++) {
      let left = step;
      const patience = pieces + PIECES;
      while (left > 0 && event === at.RUNNING) {
        // Actuator and lag: x(t) = l0 + l1 t + la e^(-t/ta) + (ld + le t) e^(-t/td), y(t) = y1 + l1 t + ya e^(-t/ta).
        const gap = u - y;
        let most = left;
        let l0 = u;
        let l1 = 0;
        let ya = -gap;
        let y1 = u;
        let la = weight * ya;
        let le = equal * ya;
        const rated = gap - rateGap > 1e-12 || -gap - rateGap > 1e-12;
        if (rated) {
          l1 = gap > 0 ? rate : -rate;
          const over = ((gap > 0 ? gap : -gap) - rateGap) / rate;
          if (over < most) most = over;
          l0 = y - l1 * td;
          y1 = y;
          ya = 0;
          la = 0;
          le = 0;
        }
        const ld = x - l0 - la;

        const from = q - rows[row + at.R_STATION];
        const room = rows[row + at.R_LENGTH] - from;
        const sin0 = mass * rows[row + at.R_SIN];
        const sin1 = mass * rows[row + at.R_SIN + 1];
        const wind0 = rows[row + at.R_HEADWIND];
        const wind1 = rows[row + at.R_HEADWIND + 1];
        const floor = speedCell > 0 ? speedEdges[speedCell - 1] : 0;
        const ceiling = speedCell < lastSpeedCell ? speedEdges[speedCell] : Number.POSITIVE_INFINITY;
        const low = throttleCell > 0 ? throttleEdges[throttleCell - 1] : Number.NEGATIVE_INFINITY;
        const high =
          throttleCell < throttleCells - 1 ? throttleEdges[throttleCell] : Number.POSITIVE_INFINITY;
        const c = 6 * (speedCell * throttleCells + throttleCell);
        const a0 = cells[c];
        const a1 = cells[c + 1];

        let h = most;
        let aimed = false;
        if (timed ? h > room : h * (v + 0.5 * h * acceleration) > room) {
          h = timed ? room : room / (v + (0.5 * room * acceleration) / v);
          if (!(h > 0)) h = 0;
          aimed = true;
        }

        let half = 0;
        let w = 0;
        let k1 = 0;
        let k4 = 0;
        let v2 = 0;
        let v3 = 0;
        let v4 = 0;
        let ve = 0;
        let xe = 0;
        let ds = 0;
        let dq = 0;
        let ea = 0;
        let f1 = 0;
        let f2 = 0;
        let f3 = 0;
        let f4 = 0;
        let d1 = 0;
        let d2 = 0;
        let d3 = 0;
        let d4 = 0;
        let r0 = 0;
        let r1 = 0;
        let r2 = 0;
        let p2 = 0;
        let p3 = 0;
        let p4 = 0;
        for (let trial = pieces < patience ? 0 : TRIALS; ; trial++) {
          half = 0.5 * h;
          let eah = 0;
          let edh = 0;
          let ed = 0;
          if (h === step) {
            eah = p[at.P_ACTUATOR_HALF];
            ea = p[at.P_ACTUATOR_FULL];
            edh = p[at.P_DRIVE_HALF];
            ed = p[at.P_DRIVE_FULL];
          } else {
            eah = ta > 0 ? exp(-half / ta) : 0;
            ea = eah * eah;
            edh = td > 0 ? exp(-half / td) : 0;
            ed = edh * edh;
          }
          const xh = l0 + l1 * half + la * eah + (ld + le * half) * edh;
          xe = l0 + l1 * h + la * ea + (ld + le * h) * ed;
          if (throttleCells > 1 && trial < TRIALS && (xe > high + EDGE || xe < low - EDGE)) {
            const share = ((xe > high ? high : low) - x) / (xe - x);
            h *= Math.max(share, 0);
            continue;
          }

          const middle = from + (timed ? half : half * (v + half * 0.5 * acceleration));
          const air = rows[row + at.R_AIR] + rows[row + at.R_AIR + 1] * middle;
          const normal = mass * (rows[row + at.R_COS] + rows[row + at.R_COS + 1] * middle);
          r0 = normal * c0;
          r1 = normal * c1;
          r2 = normal * c2;
          let near = 0;
          let slope = air * cda;
          if (crosswind) {
            const side = rows[row + at.R_CROSSWIND] + rows[row + at.R_CROSSWIND + 1] * middle;
            tangent.at(v + half * acceleration + wind0 + wind1 * middle, side, air);
            near = tangent.out[0];
            slope = tangent.out[1];
          } else if (v + wind0 + wind1 * from < 0) slope = -slope;
          let b0 = cells[c + 2];
          let b1 = cells[c + 3];
          let b2 = cells[c + 4];
          let b3 = cells[c + 5];
          if (derated) {
            const d = rows[row + at.R_DERATE] + rows[row + at.R_DERATE + 1] * middle;
            b0 = d * (b0 + a0) - a0;
            b1 = d * (b1 + a1) - a1;
            b2 *= d;
            b3 *= d;
          }

          w = v + wind0 + wind1 * from;
          f1 = a0 + a1 * v + x * (b0 + v * (b1 + v * b2) + (b3 === 0 ? 0 : b3 / v));
          d1 = w * (near + slope * w);
          k1 = (f1 - d1 - r0 - v * (r1 + v * r2) - sin0 - sin1 * from) * inverse;
          if (pieces === 0 && v > brakeSpeed - at.BRAKE_TIME * at.BRAKE_LIMIT) {
            brake = effectiveMass * (k1 + (v - brakeSpeed) / at.BRAKE_TIME);
            if (!(brake > 0)) brake = 0;
            if (brake > effectiveMass * at.BRAKE_LIMIT) brake = effectiveMass * at.BRAKE_LIMIT;
          }
          k1 -= brake * inverse;

          p2 = from + (timed ? half : half * v);
          v2 = v + half * k1;
          w = v2 + wind0 + wind1 * p2;
          f2 = a0 + a1 * v2 + xh * (b0 + v2 * (b1 + v2 * b2) + (b3 === 0 ? 0 : b3 / v2));
          d2 = w * (near + slope * w);
          const k2 = (f2 - d2 - r0 - v2 * (r1 + v2 * r2) - sin0 - sin1 * p2 - brake) * inverse;

          p3 = from + (timed ? half : half * v2);
          v3 = v + half * k2;
          w = v3 + wind0 + wind1 * p3;
          f3 = a0 + a1 * v3 + xh * (b0 + v3 * (b1 + v3 * b2) + (b3 === 0 ? 0 : b3 / v3));
          d3 = w * (near + slope * w);
          const k3 = (f3 - d3 - r0 - v3 * (r1 + v3 * r2) - sin0 - sin1 * p3 - brake) * inverse;

          p4 = from + (timed ? h : h * v3);
          v4 = v + h * k3;
          w = v4 + wind0 + wind1 * p4;
          f4 = a0 + a1 * v4 + xe * (b0 + v4 * (b1 + v4 * b2) + (b3 === 0 ? 0 : b3 / v4));
          d4 = w * (near + slope * w);
          k4 = (f4 - d4 - r0 - v4 * (r1 + v4 * r2) - sin0 - sin1 * p4 - brake) * inverse;

          const sixth = h / 6;
          ve = v + sixth * (k1 + 2 * (k2 + k3) + k4);
          ds = sixth * (v + 2 * (v2 + v3) + v4);
          dq = timed ? h : ds;
          if (trial >= TRIALS) break;
          const miss = room - dq;
          if (miss < -KNOT || (aimed && miss > KNOT && h < most)) {
            h += timed ? miss : miss / ve;
            if (!(h > 0)) h = 0;
            if (h > most) h = most;
            aimed = true;
            continue;
          }
          if (ve < floor - EDGE || ve > ceiling + EDGE) {
            const share = ((ve < floor ? floor : ceiling) - v) / (ve - v);
            h *= Math.max(share, 0);
            continue;
          }
          break;
        }

        if (pieces === 0) {
          s[at.SAMPLE_ACCELERATION] = k1;
          s[at.SAMPLE_DRIVE_FORCE] = f1;
          s[at.SAMPLE_RATED] = rated ? 1 : 0;
          slope0 = filter > 0 ? (v - z) / filter : k1;
        }
        const sixth = h / 6;
        const work = sixth * (f1 * v + 2 * (f2 * v2 + f3 * v3) + f4 * v4);
        if (work >= 0) push += work;
        else hold += work;
        const airWork = sixth * (d1 * v + 2 * (d2 * v2 + d3 * v3) + d4 * v4);
        const square = v * v;
        const square2 = v2 * v2;
        const square3 = v3 * v3;
        const square4 = v4 * v4;
        const rollingWork =
          r0 * ds +
          sixth *
            (square * (r1 + r2 * v) +
              2 * (square2 * (r1 + r2 * v2) + square3 * (r1 + r2 * v3)) +
              square4 * (r1 + r2 * v4));
        const climbWork = sin0 * ds + sixth * sin1 * (from * v + 2 * (p2 * v2 + p3 * v3) + p4 * v4);
        aero += airWork;
        rolling += rollingWork;
        climb += climbWork;
        const kinetic = 0.5 * effectiveMass * (ve * ve - square);
        magnitude +=
          (work >= 0 ? work : -work) +
          (airWork >= 0 ? airWork : -airWork) +
          rollingWork +
          (climbWork >= 0 ? climbWork : -climbWork) +
          (kinetic >= 0 ? kinetic : -kinetic) +
          brake * ds;

        if (filter > 0) {
          // The filter behind the cubic through both ends: particular solution P - tf P' + tf^2 P'' - tf^3 P'''.
          const cubic = h > 1e-3 ? (k1 + k4 - (2 * (ve - v)) / h) / (h * h) : 0;
          const bend = h > 0 ? (k4 - k1) / h - 3 * cubic * h : 0;
          const fixed = 6 * filter * filter * filter * cubic;
          const ef = h === step ? p[at.P_FILTER_FULL] : exp(-h / filter);
          const begin = v - filter * k1 + filter * filter * bend - fixed;
          z = ve - filter * k4 + filter * filter * (bend + 6 * cubic * h) - fixed + (z - begin) * ef;
        } else z = ve;
        y = y1 + l1 * h + ya * ea;
        if (rated && h === most && most < left) y = gap > 0 ? u - rateGap : u + rateGap;
        const rising = xe > x;
        x = xe;
        if (td === 0) x = y;
        v = ve;
        q += dq;
        travelled += ds;
        elapsed += h;
        left -= h;
        acceleration = k4;
        pieces++;

        if (dq > room - KNOT) {
          while (row < lastRow && q >= rows[row + at.R_STRIDE + at.R_STATION] - KNOT) row += at.R_STRIDE;
          if (row === lastRow && q >= rows[row + at.R_STATION] + rows[row + at.R_LENGTH] - KNOT)
            event = at.END_OF_ROAD;
        }
        if (v > ceiling - EDGE && k4 >= 0) speedCell++;
        else if (v < floor + EDGE && k4 < 0) {
          if (speedCell > 0) speedCell--;
          else event = at.STOPPED;
        }
        if (throttleCells > 1) {
          if (rising && x > high - EDGE) throttleCell++;
          else if (!rising && x < low + EDGE) throttleCell--;
        }
      }
    }

    if (!(v < 1e9 && v > -1e9)) return at.NON_FINITE;
    if (event === at.STOPPED) v = 0;
    else if (v < stallSpeed) event = at.STALLED;
    slope1 = filter > 0 ? (v - z) / filter : acceleration;
    if (delay > 0) keepHistory(s, p, z0, slope0, slope1, sample);

    s[at.SAMPLE_SPEED] = v0;
    s[at.SAMPLE_ACTUATOR] = y0;
    s[at.SAMPLE_BRAKE_FORCE] = brake;
    s[at.SAMPLE_TIME] = elapsed;
    s[at.SAMPLE_DISTANCE] = travelled;
    s[at.SAMPLE_DRIVE_WORK] = push + hold;
    s[at.SAMPLE_PUSH] = push;
    s[at.SAMPLE_BRAKE_WORK] = brake * travelled;
    recordSample(s, p, sums);
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
    if (event === at.RUNNING) s[at.TICK] += 1;
    else s[at.PARTIAL] = elapsed;
  }
  return event;
}
