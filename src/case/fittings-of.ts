import { fromKmh, fromPct } from '../units/convert.ts';
import type { Actuator, Pulses, SpeedSensor, Traction } from '../vehicle/vehicle.ts';
import type { VehicleFile } from './vehicle-schema.ts';

/** From command to throttle, in SI. */
export function actuatorOf(file: VehicleFile['actuator']): Actuator {
  const [least, greatest] = file.travel_pct ?? [];
  return {
    deadTime: file.dead_time_s,
    resolution: fromPct(file.resolution_pct),
    travel:
      least === undefined || greatest === undefined
        ? null
        : { least: fromPct(least), greatest: fromPct(greatest) },
    lag: file.lag_s,
    rateLimit: file.rate_limit_pct_per_s === undefined ? null : fromPct(file.rate_limit_pct_per_s),
    slack: fromPct(file.slack_pct),
    ...(file.engages_from === undefined ? {} : { engagesFrom: file.engages_from }),
  };
}

/** From true to measured speed, in SI. */
export function sensorOf(file: VehicleFile['speed_sensor']): SpeedSensor {
  return {
    pulses: pulsesOf(file),
    scaleError: fromPct(file.scale_error_pct),
    noise: file.noise_sd_kmh === 0 ? null : { sd: fromKmh(file.noise_sd_kmh), seed: file.noise_seed },
    filter: file.filter_s,
    delay: file.delay_s,
  };
}

/** The rules of the file see to it that a toothed wheel has its circumference and one way of reading. */
function pulsesOf(file: VehicleFile['speed_sensor']): Pulses | null {
  const { pulses_per_turn: pulses, wheel_circumference_m: circumference } = file;
  if (pulses === undefined || circumference === undefined) return null;
  const { counting_window_s: window, timer_resolution_s: clock } = file;
  return {
    spacing: circumference / pulses,
    reading: window === undefined ? { kind: 'timed', clock: clock ?? 0 } : { kind: 'counted', window },
  };
}

/** Grip of the driven wheel on a dry or wet road; null: not known. */
export function tractionOf(file: VehicleFile['traction'], surface: 'dry' | 'wet'): Traction | null {
  if (file === undefined) return null;
  return {
    friction: surface === 'wet' ? file.friction_wet : file.friction_dry,
    wheelbase: file.wheelbase_m,
    massCentreAhead: file.mass_centre_ahead_m,
    massCentreHeight: file.mass_centre_height_m,
  };
}
