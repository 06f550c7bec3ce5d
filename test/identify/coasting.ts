// A vehicle that coasts on a slope in a steady wind, in closed form: m_e dv/dt = -(f0 + f2 (v + w)^2), so that the air
// speed is sqrt(f0 / f2) tan(phi0 - k t) with k = sqrt(f0 f2) / m_e and phi0 = atan((v0 + w) sqrt(f2 / f0)).
import type { CoastRun, Direction } from '../../src/identify/coast-down.ts';

export interface Coasting {
  readonly mass: number;
  readonly rotating: number;
  readonly cda: number;
  readonly crr: number;
  readonly density: number;
  readonly gravity: number;
}

interface Plan {
  readonly direction: Direction;
  readonly from: number;
  readonly to: number;
  readonly step: number;
  /** Against the way there [m/s], and uphill on the way there. */
  readonly wind?: number;
  readonly grade?: number;
}

export function coastingRun(
  { mass, rotating, cda, crr, density, gravity }: Coasting,
  { direction, from, to, step, wind = 0, grade = 0 }: Plan,
  noise: (i: number) => number = () => 0,
): CoastRun {
  const forth = direction === 'there' ? 1 : -1;
  const head = forth * wind;
  const angle = Math.atan(forth * grade);
  const f0 = mass * gravity * (crr * Math.cos(angle) + Math.sin(angle));
  const f2 = (density * cda) / 2;
  const k = Math.sqrt(f0 * f2) / (mass + rotating);
  const phase = (v: number) => Math.atan((v + head) * Math.sqrt(f2 / f0));
  const count = Math.floor((phase(from) - phase(to)) / k / step) + 1;
  const time = Float64Array.from({ length: count }, (_, i) => i * step);
  return {
    file: 'made.csv',
    name: 'made.csv',
    direction,
    time,
    speed: time.map((t, i) => Math.sqrt(f0 / f2) * Math.tan(phase(from) - k * t) - head + noise(i)),
    elevation: null,
    grade: null,
    headwind: null,
  };
}
