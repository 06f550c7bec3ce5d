import type { Vehicle } from '../vehicle/vehicle.ts';

/** Range of the command: that of the drive, between the end stops of the actuator. */
export function commandRange({ drive, actuator }: Vehicle): {
  readonly least: number;
  readonly greatest: number;
} {
  const { travel } = actuator;
  return {
    least: Math.max(drive.throttleMin, travel?.least ?? drive.throttleMin),
    greatest: Math.min(drive.throttleMax, travel?.greatest ?? drive.throttleMax),
  };
}
