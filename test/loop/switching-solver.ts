// A plain solver of the sampled loop for vehicles that switch: classical RK4 at a small step, straight from the
// equations, cut by bisection where slack is taken up or an edge of the drive's law is crossed. It takes the law as a
// formula, not as cells; gears are shifted and a belt is moved at the samples, as the loop says it does.
import type { PiSetup } from '../../src/control/setup.ts';
import type { LoopPlan } from '../../src/loop/plan.ts';

const G = 9.80665;

/** Torque at shaft speed w and throttle x by the formula of the cell (i over w, j over x), also beyond its edges. */
export interface LawScene {
  readonly torque: (w: number, x: number, i: number, j: number) => number;
  readonly shaftEdges: readonly number[];
  readonly throttleEdges: readonly number[];
}

/** Speed at each controller sample [m/s]; PI with back-calculation. A rate limit needs a lag of the actuator. */
export function switchingSpeeds(plan: LoopPlan, law: LawScene, step: number): number[] {
  const { road, vehicle, hold } = plan;
  const { drive, roadLoad, mass, actuator } = vehicle;
  const pi = plan.controller as PiSetup;
  const sin = road.grade.map((g) => (G * g) / Math.sqrt(1 + g * g));
  const cos = road.grade.map((g) => G / Math.sqrt(1 + g * g));
  let cell = 0;
  // Between knots g sin and g cos are linear on the way, but a rider who holds a speed goes by the grade itself.
  const resistance = (v: number, q: number, rider = false): number => {
    while (cell < road.size - 2 && q >= road.station[cell + 1]!) cell++;
    while (cell > 0 && q < road.station[cell]!) cell--;
    const share = (q - road.station[cell]!) / (road.station[cell + 1]! - road.station[cell]!);
    const at = (c: Float64Array): number => c[cell]! + share * (c[cell + 1]! - c[cell]!);
    const ahead = v + at(road.headwind);
    const rolling = roadLoad.c0 + v * (roadLoad.c1 + v * roadLoad.c2);
    const air = 0.5 * at(road.airDensity) * roadLoad.cda * ahead * ahead;
    if (!rider) return air + mass * (at(cos) * rolling + at(sin));
    const grade = at(road.grade);
    return air + (mass * G * (rolling + grade)) / Math.sqrt(1 + grade * grade);
  };

  const ta = actuator.lag;
  const td = drive.lag;
  const rate = actuator.rateLimit ?? Number.POSITIVE_INFINITY;
  const play = actuator.slack / 2;
  const least = actuator.travel?.least ?? drive.throttleMin;
  const greatest = actuator.travel?.greatest ?? drive.throttleMax;
  const below = (edges: readonly number[], a: number): number => edges.filter((edge) => a >= edge).length;

  // Modes, frozen over a step; ratio 0: clutch open.
  let ratio = 0;
  let inertia = 0;
  let i = 0;
  let j = 0;
  let u = 0;
  let rests = false;
  let rated = false;
  let plate = 0;
  const plateAt = (y: number): number => (rests ? plate : u < y ? y + play : y - play);
  // State: v, q, y (actuator), x (behind the drive's lag).
  type State = readonly [number, number, number, number];
  const throttle = (s: State): number => (td > 0 ? s[3] : plateAt(s[2]));
  const slope = (s: State): number[] => {
    const [v, q, y, x] = s;
    const force = ratio === 0 ? 0 : ratio * law.torque(ratio * v, throttle(s), i, j);
    const wanted = ta > 0 ? (u - y) / ta : 0;
    return [
      (force - resistance(v, q)) / inertia,
      v,
      rated ? Math.sign(u - y) * rate : wanted,
      td > 0 ? (plateAt(y) - x) / td : 0,
    ];
  };
  const rk4 = (s: State, h: number): State => {
    const move = (k: readonly number[], share: number): State =>
      s.map((value, n) => value + share * k[n]!) as unknown as State;
    const k1 = slope(s);
    const k2 = slope(move(k1, h / 2));
    const k3 = slope(move(k2, h / 2));
    const k4 = slope(move(k3, h));
    return move(
      k1.map((k, n) => (k + 2 * (k2[n]! + k3[n]!) + k4[n]!) / 6),
      h,
    );
  };
  /** How far a state is past the borders of the present modes; at most 0 inside. */
  const past = (s: State): number => {
    const w = ratio * s[0];
    const x = throttle(s);
    const inf = Number.POSITIVE_INFINITY;
    return Math.max(
      w - (law.shaftEdges[i] ?? inf),
      (law.shaftEdges[i - 1] ?? -inf) - w,
      x - (law.throttleEdges[j] ?? inf),
      (law.throttleEdges[j - 1] ?? -inf) - x,
      rests ? Math.abs(s[2] - plate) - play : -inf,
      ta > 0 ? (rated ? -1 : 1) * (Math.abs(u - s[2]) / ta - rate) : -inf,
    );
  };
  /** Enters the modes that hold just behind a border. */
  const turn = (s: State): void => {
    const ahead = rk4(s, 1e-9);
    if (rests && Math.abs(ahead[2] - plate) - play > 0) rests = false;
    rated = ta > 0 && Math.abs(u - ahead[2]) / ta > rate;
    i = ratio === 0 ? 0 : below(law.shaftEdges, ratio * ahead[0]);
    j = below(law.throttleEdges, throttle(ahead));
  };
  const runSample = (start: State): State => {
    let s = start;
    const count = Math.round(pi.sample / step);
    for (let n = 0; n < count; n++) {
      let left = step;
      while (left > 0) {
        const end = rk4(s, left);
        if (past(end) <= 1e-14) {
          s = end;
          break;
        }
        let low = 0;
        let high = left;
        for (let k = 0; k < 50; k++) {
          const middle = 0.5 * (low + high);
          if (past(rk4(s, middle)) > 1e-14) high = middle;
          else low = middle;
        }
        s = rk4(s, high);
        turn(s);
        left -= high;
      }
    }
    return s;
  };

  const load = (gear: number): void => {
    ratio = gear < 0 ? 0 : drive.gears[gear]!.ratio;
    inertia = mass + vehicle.rotatingMass + (gear < 0 ? 0 : drive.gears[gear]!.inertia);
  };
  const loadRatio = (to: number): void => {
    ratio = to;
    inertia = mass + vehicle.rotatingMass + drive.belt!.inertia * to * to;
  };
  const beltLine = (v: number, x: number): number => {
    const { throttle: xs, shaftSpeed: ws, least: low, greatest: high } = drive.belt!;
    let line = x <= xs[0]! ? ws[0]! : ws[ws.length - 1]!;
    for (let n = 1; n < xs.length; n++)
      if (x > xs[n - 1]! && x <= xs[n]!)
        line = ws[n - 1]! + ((x - xs[n - 1]!) / (xs[n]! - xs[n - 1]!)) * (ws[n]! - ws[n - 1]!);
    return Math.min(high, Math.max(low, line / v));
  };
  /** Throttle that holds a speed here, by bisection of a law that rises with it. */
  const holding = (v: number, q: number): number => {
    let low = least;
    let high = greatest;
    for (let k = 0; k < 60; k++) {
      const x = 0.5 * (low + high);
      const r = drive.belt === null ? ratio : beltLine(v, x);
      const force =
        r * law.torque(r * v, x, below(law.shaftEdges, r * v), below(law.throttleEdges, x)) -
        resistance(v, q, true);
      if (force > 0) high = x;
      else low = x;
    }
    return 0.5 * (low + high);
  };

  const v0 = hold.startSpeed;
  load(drive.gear);
  const settled = holding(v0, 0);
  if (drive.belt !== null) loadRatio(beltLine(v0, settled));
  let s: State = [v0, 0, settled, settled];
  plate = settled;
  let x = settled;
  let reference = hold.setSpeed;
  let integral = settled - pi.kp * (pi.setpointWeight - 1) * v0;
  let command = settled;
  let measured = v0;
  let gear = drive.gear;
  // A shift by the rider: samples with the clutch open, then with the throttle in the rider's hand.
  const box = drive.gearbox;
  const samples = (time: number): number => Math.ceil(time / pi.sample - 1e-9);
  const shifts = [...plan.rider.shifts];
  let open = 0;
  let ridden = 0;
  const speeds: number[] = [];
  const end = road.station[road.size - 1]!;
  const stationOf = (distance: number): number => {
    let n = 0;
    while (n < road.size - 2 && distance >= road.distance[n + 1]!) n++;
    const share = (distance - road.distance[n]!) / (road.distance[n + 1]! - road.distance[n]!);
    return road.station[n]! + share * (road.station[n + 1]! - road.station[n]!);
  };
  let held = false;
  while (s[1] < end) {
    if (box.kind === 'clutch') {
      if (held && open === 0 && ratio === 0) {
        load(gear);
        command = holding(s[0], s[1]);
      } else if (held && open === 0 && ridden === 0) {
        held = false;
        reference = measured;
        integral = command - pi.kp * (pi.setpointWeight * reference - measured);
      }
      if (!held && shifts.length > 0 && s[1] >= stationOf(shifts[0]!.distance)) {
        gear = shifts.shift()!.gear;
        held = true;
        open = samples(box.open);
        ridden = samples(box.resume);
        load(-1);
        command = 0;
      }
    }
    if (drive.belt !== null) {
      const before = inertia;
      const rest = beltLine(s[0], throttle(s));
      const kept = drive.belt.lag > 0 ? Math.exp(-pi.sample / drive.belt.lag) : 0;
      loadRatio(rest + (ratio - rest) * kept);
      s = [s[0] * Math.sqrt(before / inertia), s[1], s[2], s[3]];
    }
    speeds.push(s[0]);
    measured = s[0];
    const most = (pi.ramp ?? 0.5) * pi.sample;
    reference += Math.min(most, Math.max(-most, hold.setSpeed - reference));
    if (held) {
      if (open > 0) open--;
      else ridden--;
    } else {
      const raw = pi.kp * (pi.setpointWeight * reference - measured) + integral;
      command = Math.min(greatest, Math.max(least, raw));
      integral += pi.ki * pi.sample * (reference - measured);
      if (pi.antiWindup.kind === 'back_calculation')
        integral += (pi.sample / pi.antiWindup.trackingTime) * (command - raw);
    }
    const grid = actuator.resolution;
    u = grid > 0 ? Math.min(greatest, Math.max(least, grid * Math.floor(command / grid + 0.5))) : command;
    let y = s[2];
    if (ta === 0 && rate === Number.POSITIVE_INFINITY) y = u;
    plate = Math.min(y + play, Math.max(y - play, plate));
    // At rest until the actuator has come to the end of the play on the side to which it goes.
    rests = play > 0 && (u < y ? plate - (y + play) < -1e-13 : u > y ? y - play - plate < -1e-13 : true);
    s = [s[0], s[1], y, s[3]];
    rated = ta > 0 && Math.abs(u - y) / ta > rate;
    x = throttle(s);
    i = ratio === 0 ? 0 : below(law.shaftEdges, ratio * s[0]);
    j = below(law.throttleEdges, x);
    s = runSample(s);
    plate = plateAt(s[2]);
  }
  return speeds;
}
