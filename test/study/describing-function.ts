// Limit cycles by hand: the describing functions of textbooks (Slotine and Li, Applied Nonlinear Control, 1991, chapter 5;
// Gelb and Vander Velde, Multiple-Input Describing Functions, 1968; both from memory), solved for the loop of a vehicle.
//
// A nonlinearity in the loop that is fed a sine of amplitude A passes on its first harmonic, N(A) times as large. The
// loop keeps swinging at the frequency w and amplitude A at which N(A) L(jw) = -1, L all that is linear.

/** A complex number as size and phase; phases are not wrapped, so that they add up. */
interface Polar {
  readonly size: number;
  readonly phase: number;
}

/** A vehicle near a speed under a PI controller, its lags and delays; force gain [N] a unit of throttle. */
export interface Loop {
  readonly kp: number;
  readonly ki: number;
  readonly forceGain: number;
  /** [kg], and slope of the road load [N/(m/s)]. */
  readonly mass: number;
  readonly drag: number;
  readonly actuatorLag: number;
  readonly driveLag: number;
  readonly filter: number;
  /** Sensor, computing, and half a sample of the hold [s]. */
  readonly delay: number;
}

export interface Swing {
  readonly period: number;
  /** First harmonic of the true speed [m/s], and of what the nonlinearity is fed, in throttle. */
  readonly speed: number;
  readonly fed: number;
}

const lag = (time: number, w: number): Polar => ({
  size: 1 / Math.hypot(1, time * w),
  phase: -Math.atan(time * w),
});
const times = (...factors: readonly Polar[]): Polar => ({
  size: factors.reduce((product, { size }) => product * size, 1),
  phase: factors.reduce((sum, { phase }) => sum + phase, 0),
});

/** From wheel force per unit of throttle to true speed. */
function plant({ mass, drag }: Loop, w: number): Polar {
  return { size: 1 / Math.hypot(drag, mass * w), phase: -Math.atan2(mass * w, drag) };
}

/** All of the loop, for a force gain of one. */
function open(loop: Loop, w: number): Polar {
  const { kp, ki, actuatorLag, driveLag, filter, delay } = loop;
  const controller = { size: Math.hypot(kp, ki / w), phase: -Math.atan2(ki / w, kp) };
  const late = { size: 1, phase: -delay * w };
  return times(controller, lag(actuatorLag, w), lag(driveLag, w), plant(loop, w), lag(filter, w), late);
}

/** Where a falling function passes a value, by bisection. */
export function falling(f: (x: number) => number, value: number, low: number, high: number): number {
  for (let i = 0; i < 80; i++) {
    const middle = (low + high) / 2;
    if (f(middle) > value) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** Frequency above which the phase stays behind half a turn: an integral brings it down again at low ones [rad/s]. */
export function crossover(loop: Loop): number {
  const phase = (w: number): number => open(loop, w).phase;
  let low = 20;
  while (phase(low) < -Math.PI) low *= 0.98;
  return falling(phase, -Math.PI, low, 20);
}

/**
 * A controller whose command is cut off at `limit` on either side of the throttle needed: N = 2/pi (asin q + q sqrt(1 - q^2)),
 * q = limit / A, real, so that it swings at the phase crossover.
 */
export function saturated(loop: Loop, limit: number): Swing {
  const w = crossover(loop);
  const needed = 1 / (loop.forceGain * open(loop, w).size);
  const less = (x: number): number => {
    const q = 1 / x;
    return (2 / Math.PI) * (Math.asin(q) + q * Math.sqrt(1 - q * q));
  };
  const x = falling(less, needed, 1, 1e6);
  const behind = needed * lag(loop.actuatorLag, w).size;
  return swing(loop, w, limit * x, loop.forceGain * behind);
}

/**
 * A step of `force` in the drive's law at the throttle that is needed, beside its slope: N = K + 2 force / (pi A), real
 * (an ideal relay of half the step on either side).
 */
export function stepped(loop: Loop, force: number): Swing {
  const w = crossover(loop);
  // Of the actuator's amplitude, what comes back: open(loop) is the way from there to there.
  const needed = 1 / open(loop, w).size;
  const fed = (2 * force) / (Math.PI * (needed - loop.forceGain));
  return swing(loop, w, fed, needed);
}

/**
 * A throttle that moves in steps of `force`, ahead of its lag, about the middle between two of them: the same relay, and
 * no slope beside it.
 */
export function quantised(loop: Loop, force: number): Swing {
  const relay = stepped({ ...loop, forceGain: 0 }, force);
  const behind = lag(loop.actuatorLag, (2 * Math.PI) / relay.period).size;
  return { ...relay, speed: relay.speed * behind };
}

/**
 * Play of full width 2 b behind the actuator (play operator): with r = b / A,
 * N = 1/pi (pi/2 + asin(1 - 2 r) + 2 (1 - 2 r) sqrt(r (1 - r))) - j 4/pi r (1 - r).
 */
export function played(loop: Loop, slack: number): Swing {
  const describing = (r: number): Polar => {
    const rest = 1 - 2 * r;
    const re = (Math.PI / 2 + Math.asin(rest) + 2 * rest * Math.sqrt(r * (1 - r))) / Math.PI;
    const im = (4 / Math.PI) * r * (1 - r);
    return { size: Math.hypot(re, im), phase: -Math.atan2(im, re) };
  };
  const phaseOf = (r: number): number => describing(r).phase;
  /** The play that brings the phase at w to half a turn. */
  const shareAt = (w: number): number => falling(phaseOf, -Math.PI - open(loop, w).phase, 1e-9, 1 - 1e-9);
  const round = (w: number): number => loop.forceGain * open(loop, w).size * describing(shareAt(w)).size;
  const w = falling(round, 1, 0.02, crossover(loop));
  const r = shareAt(w);
  return swing(loop, w, slack / 2 / r, loop.forceGain * describing(r).size);
}

/** @param gain from what the nonlinearity is fed to the wheel force that is asked for [N] */
function swing(loop: Loop, w: number, fed: number, gain: number): Swing {
  const speed = fed * gain * times(lag(loop.driveLag, w), plant(loop, w)).size;
  return { period: (2 * Math.PI) / w, speed, fed };
}
