import { P_GREATEST, P_LEAST, P_RESOLUTION } from './layout.ts';

/** The command as an actuator with steps takes it: rounded to a whole number of them, kept between the end stops. */
export function heldCommand(p: Float64Array, command: number): number {
  const resolution = p[P_RESOLUTION];
  const u = resolution * Math.floor(command / resolution + 0.5);
  return Math.min(Math.max(u, p[P_LEAST]), p[P_GREATEST]);
}
