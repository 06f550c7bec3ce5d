import type { Vehicle } from './vehicle.ts';

/** Range of throttle and command: that of the drive, between the end stops of the actuator. */
export function throttleRange({ drive, actuator }: Pick<Vehicle, 'actuator' | 'drive'>): {
  readonly least: number;
  readonly greatest: number;
} {
  const { travel } = actuator;
  return {
    least: Math.max(drive.throttleMin, travel?.least ?? drive.throttleMin),
    greatest: Math.min(drive.throttleMax, travel?.greatest ?? drive.throttleMax),
  };
}
