import { toPct } from '../../units/convert.ts';
import type { Actuator, Pulses, SpeedSensor } from '../../vehicle/vehicle.ts';
import { fixed, type SpeedUnit, significant, trimmed, withUnit } from '../quantity.ts';

const milliseconds = (time: number): string => withUnit(trimmed(time * 1000, 1), 'ms');
const pct = (share: number): string => withUnit(trimmed(toPct(share), 2), '%');

/** From command to throttle, in the order of the signal; `ideal` for nothing at all. */
export function actuatorWords({ deadTime, resolution, travel, lag, rateLimit, slack }: Actuator): string {
  const parts = [
    deadTime > 0 && `dead time ${milliseconds(deadTime)}`,
    resolution > 0 && `steps of ${pct(resolution)}`,
    travel !== null && `end stops at ${pct(travel.least)} and ${pct(travel.greatest)}`,
    lag > 0 && `time constant ${milliseconds(lag)}`,
    rateLimit !== null && `at most ${withUnit(fixed(toPct(rateLimit)), '%/s')}`,
    slack > 0 && `slack ${pct(slack)}`,
  ].filter((part) => part !== false);
  return parts.length === 0 ? 'ideal: the throttle is the command' : parts.join(', then ');
}

/** From true to measured speed, in the order of the signal. */
export function sensorWords(
  { pulses, scaleError, noise, filter, delay }: SpeedSensor,
  speed: SpeedUnit,
): string {
  const parts = [
    pulses !== null && pulseWords(pulses, speed),
    scaleError !== 0 && `${pct(Math.abs(scaleError))} too ${scaleError > 0 ? 'much' : 'little'}`,
    noise !== null &&
      `white noise of ${withUnit(significant(speed.of(noise.sd), 2), speed.name)} (one s.d., seed ${noise.seed})`,
    filter > 0 && `filter with a time constant of ${milliseconds(filter)}`,
    delay > 0 && `delay ${milliseconds(delay)}`,
  ].filter((part) => part !== false);
  return parts.length === 0 ? 'ideal: the measured speed is the true speed' : parts.join(', then ');
}

/** The quantum of counting is one pulse in a window. */
function pulseWords({ spacing, reading }: Pulses, speed: SpeedUnit): string {
  const every = `a pulse every ${withUnit(trimmed(spacing * 1000, 1), 'mm')} of way`;
  if (reading.kind === 'timed')
    return `${every}, the last interval timed to ${withUnit(significant(reading.clock * 1e6, 2), 'µs')}`;
  return `${every}, counted over ${milliseconds(reading.window)} (steps of ${withUnit(significant(speed.of(spacing / reading.window), 2), speed.name)})`;
}
