// A plain solver of the sampled loop for the accuracy tests: classical RK4 at a small fixed step, straight from the
// equations, without cutting at kinks, closed-form lags or cells. At 1e-4 s its error is below 1e-9 m/s on these roads.
import type { PiSetup } from '../../src/control/setup.ts';
import type { LoopPlan } from '../../src/loop/plan.ts';

const G = 9.80665;

/** Speed at each controller sample [m/s]. PI with back-calculation or without, force drive. */
export function fineSpeeds(plan: LoopPlan, step: number): number[] {
  const { road, vehicle, hold } = plan;
  const { drive, roadLoad, mass, actuator, sensor } = vehicle;
  const pi = plan.controller as PiSetup;
  const inertia = mass + vehicle.rotatingMass;
  const sin = road.grade.map((g) => (G * g) / Math.sqrt(1 + g * g));
  const cos = road.grade.map((g) => G / Math.sqrt(1 + g * g));
  const { peakForce, closedThrottleForce } = drive;
  const power = drive.peakPower ?? Number.POSITIVE_INFINITY;
  let cell = 0;
  const resistance = (v: number, q: number): number => {
    while (cell < road.size - 2 && q >= road.station[cell + 1]!) cell++;
    while (cell > 0 && q < road.station[cell]!) cell--;
    const share = (q - road.station[cell]!) / (road.station[cell + 1]! - road.station[cell]!);
    const at = (c: Float64Array): number => c[cell]! + share * (c[cell + 1]! - c[cell]!);
    const ahead = v + at(road.headwind);
    const side = Math.abs(at(road.crosswind));
    // CdA grows with the square of the yaw angle, up to 0.44 rad.
    const yaw = Math.min(Math.atan2(side, ahead), 0.44);
    const area = roadLoad.cda * (1 + roadLoad.yawGain * yaw * yaw);
    const rolling = roadLoad.c0 + v * (roadLoad.c1 + v * roadLoad.c2);
    return (
      0.5 * at(road.airDensity) * area * Math.hypot(ahead, side) * ahead +
      mass * (at(cos) * rolling + at(sin))
    );
  };
  // ISO 1585 as printed: alpha = (99 kPa / p)^1.2 (T / 298 K)^0.6, dry air; linear between knots.
  const derate = Float64Array.from(road.airDensity, (density, i) => {
    if (drive.derate === 'none') return 1;
    const temperature = road.airTemperature[i]!;
    return Math.min(
      1,
      1 / ((99000 / (density * 287.05287 * temperature)) ** 1.2 * (temperature / 298) ** 0.6),
    );
  });
  const push = (v: number, x: number, q: number): number => {
    const share = (q - road.station[cell]!) / (road.station[cell + 1]! - road.station[cell]!);
    const d = derate[cell]! + share * (derate[cell + 1]! - derate[cell]!);
    return -closedThrottleForce + x * (d * Math.min(peakForce, power / v) + closedThrottleForce);
  };

  const ta = actuator.lag;
  const td = drive.lag;
  const tf = sensor.filter;
  const rate = actuator.rateLimit ?? Number.POSITIVE_INFINITY;
  let u = 0;
  // State: v, q, y (actuator), x (behind the drive's lag), z (filter).
  const slope = (s: readonly number[]): number[] => {
    const [v, q, y, x, z] = s as [number, number, number, number, number];
    const yNow = ta > 0 ? y : u;
    const xNow = td > 0 ? x : yNow;
    const wanted = ta > 0 ? (u - y) / ta : 0;
    // The rider lets the vehicle gain no more than this, and brakes by at most 3 m/s2.
    const resist = resistance(v, q);
    const free = (push(v, xNow, q) - resist) / inertia;
    const most = (hold.setSpeed + (plan.rider.brakesAbove ?? Number.POSITIVE_INFINITY) - v) / 0.5;
    return [
      Math.min(free, Math.max(most, free - 3)),
      v,
      Math.min(rate, Math.max(-rate, wanted)),
      td > 0 ? (yNow - x) / td : 0,
      tf > 0 ? (v - z) / tf : 0,
    ];
  };
  const v0 = hold.startSpeed;
  const settled =
    (resistance(v0, 0) + closedThrottleForce) /
    (derate[0]! * Math.min(peakForce, power / v0) + closedThrottleForce);
  let state = [v0, 0, settled, settled, v0];
  let integral = settled - pi.kp * (pi.setpointWeight - 1) * v0;
  const speeds: number[] = [];
  const end = road.station[road.size - 1]!;
  const count = Math.round(pi.sample / step);
  while (state[1]! < end) {
    speeds.push(state[0]!);
    const measured = tf > 0 ? state[4]! : state[0]!;
    const error = hold.setSpeed - measured;
    const raw = pi.kp * (pi.setpointWeight * hold.setSpeed - measured) + integral;
    u = Math.min(drive.throttleMax, Math.max(drive.throttleMin, raw));
    integral += pi.ki * pi.sample * error;
    if (pi.antiWindup.kind === 'back_calculation')
      integral += (pi.sample / pi.antiWindup.trackingTime) * (u - raw);
    for (let i = 0; i < count; i++) {
      const move = (k: readonly number[], h: number): number[] => state.map((value, j) => value + h * k[j]!);
      const k1 = slope(state);
      const k2 = slope(move(k1, step / 2));
      const k3 = slope(move(k2, step / 2));
      const k4 = slope(move(k3, step));
      state = state.map((value, j) => value + (step / 6) * (k1[j]! + 2 * (k2[j]! + k3[j]!) + k4[j]!));
    }
  }
  return speeds;
}
