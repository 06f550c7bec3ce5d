import { BUS_COMMAND, BUS_LIMITED, BUS_MEASURED, BUS_REFERENCE, BUS_TARGET } from '../control/bus.ts';
import { moveReference } from '../control/set-point.ts';
import { exp } from '../numeric/elementary.ts';
import { keepHistory, readDelayed } from './delayed-speed.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';

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
 *
 * Inside a piece everything is per unit of effective mass and the acceleration is a cubic in v over v,
 *
 *     dv/dt = g0 + v (g1 + v g2) + x b3 / v,
 *
 * whose coefficients hang on x and q alone: they are ready before v is, which leaves three dependent operations a stage.
 */
export function advanceExact(machine: Machine, ticks: number, until: number): number {
  const { s, p, rows, cells, speedEdges, throttleEdges, controller, tangent, log } = machine;
  // A knot is met within this distance [m] or time [s], an edge of the drive within this speed [m/s] and throttle.
  // Constants stand inside the function: as variables of the module they would be read and checked at every use.
  const KNOT = 1e-7;
  const EDGE = 1e-9;
  // Trials to hit a kink; pieces of one step after which kinks are no longer looked for (a drive that chatters).
  const TRIALS = 6;
  const PIECES = 40;
  const SIXTH = 1 / 6;
  const BRAKE_MARGIN = at.BRAKE_TIME * at.BRAKE_LIMIT;

  const sample = p[at.P_SAMPLE];
  const steps = p[at.P_STEPS];
  const step = p[at.P_STEP];
  const timed = p[at.P_TIMED] === 1;
  const effectiveMass = p[at.P_EFFECTIVE_MASS];
  const inverse = 1 / effectiveMass;
  const share = p[at.P_MASS] * inverse;
  const cda = p[at.P_CDA] * inverse;
  const roll0 = p[at.P_C0];
  const roll1 = p[at.P_C1];
  const roll2 = p[at.P_C2];
  const curved = roll1 !== 0 || roll2 !== 0;
  const ta = p[at.P_ACTUATOR_LAG];
  const td = p[at.P_DRIVE_LAG];
  const rate = p[at.P_RATE];
  const rateGap = p[at.P_RATE_GAP];
  const weight = p[at.P_LAG_WEIGHT];
  const equal = p[at.P_LAG_EQUAL];
  const actuatorHalf = p[at.P_ACTUATOR_HALF];
  const actuatorFull = p[at.P_ACTUATOR_FULL];
  const driveHalf = p[at.P_DRIVE_HALF];
  const driveFull = p[at.P_DRIVE_FULL];
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
  // The road cell and the drive cell at hand, loaded where they change.
  let loadedRow = -1;
  let loadedDrive = -1;
  let begin = 0;
  let length = 0;
  let sin0 = 0;
  let sin1 = 0;
  let cos0 = 0;
  let cos1 = 0;
  let wind0 = 0;
  let wind1 = 0;
  let air0 = 0;
  let air1 = 0;
  let floor = 0;
  let ceiling = 0;
  let low = 0;
  let high = 0;
  let a0 = 0;
  let a1 = 0;
  let c0 = 0;
  let c1 = 0;
  let c2 = 0;
  let c3 = 0;

  s[at.LOGGED] = 0;
  for (let tick = 0; tick < ticks && q < until && event === at.RUNNING; tick++) {
    const entry = tick * at.L_STRIDE;
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
    let limited = false;
    const brakeSpeed = s[BUS_REFERENCE] * toTrue + brakesAbove;

    let parts = steps;
    let left = step;
    let patience = PIECES;
    while (parts > 0 && event === at.RUNNING) {
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

      if (row !== loadedRow) {
        loadedRow = row;
        begin = rows[row + at.R_STATION];
        length = rows[row + at.R_LENGTH];
        sin0 = share * rows[row + at.R_SIN];
        sin1 = share * rows[row + at.R_SIN + 1];
        cos0 = share * rows[row + at.R_COS];
        cos1 = share * rows[row + at.R_COS + 1];
        wind0 = rows[row + at.R_HEADWIND];
        wind1 = rows[row + at.R_HEADWIND + 1];
        air0 = rows[row + at.R_AIR];
        air1 = rows[row + at.R_AIR + 1];
      }
      const drive = speedCell * throttleCells + throttleCell;
      if (drive !== loadedDrive) {
        loadedDrive = drive;
        floor = speedCell > 0 ? speedEdges[speedCell - 1] : 0;
        ceiling = speedCell < lastSpeedCell ? speedEdges[speedCell] : Number.POSITIVE_INFINITY;
        low = throttleCell > 0 ? throttleEdges[throttleCell - 1] : Number.NEGATIVE_INFINITY;
        high = throttleCell < throttleCells - 1 ? throttleEdges[throttleCell] : Number.POSITIVE_INFINITY;
        a0 = inverse * cells[6 * drive];
        a1 = inverse * cells[6 * drive + 1];
        c0 = inverse * cells[6 * drive + 2];
        c1 = inverse * cells[6 * drive + 3];
        c2 = inverse * cells[6 * drive + 4];
        c3 = inverse * cells[6 * drive + 5];
      }
      const from = q - begin;
      const room = length - from;

      let h = most;
      let aimed = false;
      if (timed ? h > room : h * (v + 0.5 * h * acceleration) > room) {
        h = timed ? room : room / (v + (0.5 * room * acceleration) / v);
        if (!(h > 0)) h = 0;
        aimed = true;
      }

      let k1 = 0;
      let k4 = 0;
      let ve = 0;
      let xe = 0;
      let ds = 0;
      let dq = 0;
      let ea = 0;
      let force = 0;
      let drag = 0;
      let r0 = 0;
      let r1 = 0;
      let r2 = 0;
      let b0 = 0;
      let b1 = 0;
      let b2 = 0;
      let b3 = 0;
      let near = 0;
      let slope = 0;
      let xh = 0;
      for (let trial = pieces < patience ? 0 : TRIALS; ; trial++) {
        const half = 0.5 * h;
        let eah = 0;
        let edh = 0;
        let ed = 0;
        if (h === step) {
          eah = actuatorHalf;
          ea = actuatorFull;
          edh = driveHalf;
          ed = driveFull;
        } else {
          eah = ta > 0 ? exp(-half / ta) : 0;
          ea = eah * eah;
          edh = td > 0 ? exp(-half / td) : 0;
          ed = edh * edh;
        }
        xh = l0 + l1 * half + la * eah + (ld + le * half) * edh;
        xe = l0 + l1 * h + la * ea + (ld + le * h) * ed;
        if (throttleCells > 1 && trial < TRIALS && (xe > high + EDGE || xe < low - EDGE)) {
          const part = ((xe > high ? high : low) - x) / (xe - x);
          h *= Math.max(0, part);
          continue;
        }

        const middle = from + (timed ? half : half * v);
        const air = air0 + air1 * middle;
        const normal = cos0 + cos1 * middle;
        r0 = normal * roll0;
        r1 = normal * roll1;
        r2 = normal * roll2;
        const u1 = wind0 + wind1 * from;
        near = 0;
        slope = air * cda;
        if (crosswind) {
          const side = rows[row + at.R_CROSSWIND] + rows[row + at.R_CROSSWIND + 1] * middle;
          tangent.at(v + half * acceleration + wind0 + wind1 * middle, side, air * inverse);
          near = tangent.out[0];
          slope = tangent.out[1];
        } else if (v + u1 < 0) slope = -slope;
        b0 = c0;
        b1 = c1;
        b2 = c2;
        b3 = c3;
        if (derated) {
          const d = rows[row + at.R_DERATE] + rows[row + at.R_DERATE + 1] * middle;
          b0 = d * (b0 + a0) - a0;
          b1 = d * (b1 + a1) - a1;
          b2 *= d;
          b3 *= d;
        }

        // Drive f0 + v (f1 + v f2) + x b3 / v, air w (near + slope w) at w = v + wind, slope sin0 + sin1 q.
        force = a0 + x * b0 + v * (a1 + x * b1 + v * x * b2) + (b3 === 0 ? 0 : (x * b3) / v);
        drag = (v + u1) * (near + slope * (v + u1));
        k1 = force - drag - r0 - v * (r1 + v * r2) - sin0 - sin1 * from;
        if (pieces === 0 && v > brakeSpeed - BRAKE_MARGIN) {
          brake = k1 + (v - brakeSpeed) / at.BRAKE_TIME;
          if (!(brake > 0)) brake = 0;
          if (brake > at.BRAKE_LIMIT) brake = at.BRAKE_LIMIT;
        }
        k1 -= brake;
        const resist = r0 + sin0 + brake;

        const q2 = from + (timed ? half : half * v);
        const u2 = wind0 + wind1 * q2;
        const f0h = a0 + xh * b0;
        const f1h = a1 + xh * b1;
        const f2h = xh * b2;
        const eh = xh * b3;
        const g1h = f1h - r1 - near;
        const g2h = f2h - r2 - slope;
        const v2 = v + half * k1;
        const k2 =
          f0h -
          resist -
          sin1 * q2 -
          u2 * (near + slope * u2) +
          (b3 === 0 ? 0 : eh / v2) +
          v2 * (g1h - 2 * slope * u2 + v2 * g2h);

        const q3 = from + (timed ? half : half * v2);
        const u3 = wind0 + wind1 * q3;
        const v3 = v + half * k2;
        const k3 =
          f0h -
          resist -
          sin1 * q3 -
          u3 * (near + slope * u3) +
          (b3 === 0 ? 0 : eh / v3) +
          v3 * (g1h - 2 * slope * u3 + v3 * g2h);

        const q4 = from + (timed ? h : h * v3);
        const u4 = wind0 + wind1 * q4;
        const f04 = a0 + xe * b0;
        const f14 = a1 + xe * b1;
        const f24 = xe * b2;
        const e4 = xe * b3;
        const v4 = v + h * k3;
        k4 =
          f04 -
          resist -
          sin1 * q4 -
          u4 * (near + slope * u4) +
          (b3 === 0 ? 0 : e4 / v4) +
          v4 * (f14 - r1 - near - 2 * slope * u4 + v4 * (f24 - r2 - slope));

        const sixth = h * SIXTH;
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
        log[entry + at.L_ACCELERATION] = k1;
        log[entry + at.L_DRIVE_FORCE] = effectiveMass * force;
        limited = rated;
        slope0 = filter > 0 ? (v - z) / filter : k1;
      }
      // Works, by Simpson's rule on the powers at both ends and in the middle, where v is that of the cubic through both.
      const sixth = h * SIXTH;
      const vm = 0.5 * (v + ve) + 0.125 * h * (k1 - k4);
      const qm = from + 0.5 * dq + (timed ? 0 : 0.125 * h * (v - ve));
      const qe = from + dq;
      const wm = vm + wind0 + wind1 * qm;
      const we = ve + wind0 + wind1 * qe;
      const work =
        sixth *
        (force * v +
          4 * (vm * (a0 + xh * b0 + vm * (a1 + xh * b1 + vm * xh * b2)) + xh * b3) +
          ve * (a0 + xe * b0 + ve * (a1 + xe * b1 + ve * xe * b2)) +
          xe * b3);
      const airWork = sixth * (v * drag + 4 * vm * wm * (near + slope * wm) + ve * we * (near + slope * we));
      let rollingWork = r0 * ds;
      if (curved)
        rollingWork +=
          sixth * (v * v * (r1 + v * r2) + 4 * vm * vm * (r1 + vm * r2) + ve * ve * (r1 + ve * r2));
      const climbWork = timed
        ? sin0 * ds + sixth * sin1 * (from * v + 4 * qm * vm + qe * ve)
        : ds * (sin0 + sin1 * (from + 0.5 * ds));
      if (work >= 0) push += work;
      else hold += work;
      aero += airWork;
      rolling += rollingWork;
      climb += climbWork;
      magnitude +=
        Math.abs(work) +
        Math.abs(airWork) +
        rollingWork +
        Math.abs(climbWork) +
        Math.abs(0.5 * (ve + v) * (ve - v)) +
        brake * ds;

      if (filter > 0) {
        // The filter behind the cubic through both ends: particular solution P - tf P' + tf^2 P'' - tf^3 P'''.
        const cubic = h > 1e-3 ? (k1 + k4 - (2 * (ve - v)) / h) / (h * h) : 0;
        const bend = h > 0 ? (k4 - k1) / h - 3 * cubic * h : 0;
        const fixed = 6 * filter * filter * filter * cubic;
        const ef = h === step ? filterFull : exp(-h / filter);
        const start = v - filter * k1 + filter * filter * bend - fixed;
        z = ve - filter * k4 + filter * filter * (bend + 6 * cubic * h) - fixed + (z - start) * ef;
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
      if (!(left > 0)) {
        parts--;
        left = step;
        patience = pieces + PIECES;
      }

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

    if (!(v < 1e9 && v > -1e9)) return at.NON_FINITE;
    if (event === at.STOPPED) v = 0;
    else if (v < stallSpeed) event = at.STALLED;
    slope1 = filter > 0 ? (v - z) / filter : acceleration;
    if (delay > 0) keepHistory(s, p, z0, slope0, slope1, sample);

    log[entry + at.L_SPEED] = v0;
    log[entry + at.L_ACTUATOR] = y0;
    log[entry + at.L_LIMITED] = u;
    log[entry + at.L_COMMAND] = s[BUS_COMMAND];
    log[entry + at.L_RATED] = limited ? 1 : 0;
    log[entry + at.L_BRAKE_FORCE] = effectiveMass * brake;
    log[entry + at.L_TIME] = elapsed;
    log[entry + at.L_DISTANCE] = travelled;
    log[entry + at.L_PUSH] = effectiveMass * push;
    log[entry + at.L_HOLD] = effectiveMass * hold;
    s[at.DRIVE_WORK] += effectiveMass * push;
    s[at.REGENERATION_WORK] += effectiveMass * hold;
    s[at.AERO_WORK] += effectiveMass * aero;
    s[at.ROLLING_WORK] += effectiveMass * rolling;
    s[at.CLIMB_WORK] += effectiveMass * climb;
    s[at.BRAKE_WORK] += effectiveMass * brake * travelled;
    s[at.WORK_MAGNITUDE] += effectiveMass * magnitude;
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
