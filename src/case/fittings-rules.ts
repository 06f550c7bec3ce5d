import type { RuleFault } from './check-file.ts';
import { below } from './order-rules.ts';
import type { VehicleFile } from './vehicle-schema.ts';

/** What no single field of the actuator can say. Paths start at the vehicle. */
export function actuatorFaults({
  travel_pct: travel,
  slack_pct: slack,
  resolution_pct: resolution,
}: VehicleFile['actuator']): RuleFault[] {
  const path = ['actuator'];
  const [least = 0, greatest = 100] = travel ?? [];
  if (least >= greatest)
    return below([...path, 'travel_pct', 0], least, { value: greatest, words: 'the upper end stop' }, '%');
  const width = { value: greatest - least, words: 'the way between the end stops' };
  return [
    ...below([...path, 'slack_pct'], slack, width, '%'),
    ...below([...path, 'resolution_pct'], resolution, width, '%'),
  ];
}

/** End stops beyond what the drive can do. */
export function travelFaults(
  travel: VehicleFile['actuator']['travel_pct'],
  drive: VehicleFile['drive'],
): RuleFault[] {
  const least = travel?.[0] ?? 0;
  const regenerates = drive?.kind === 'electric' && drive.regeneration_force_n > 0;
  if (least >= 0 || regenerates) return [];
  return [
    {
      path: ['actuator', 'travel_pct', 0],
      code: 'out-of-range',
      message: 'is below what the drive can do: it does not regenerate',
      found: `${least} %`,
      allowed: 'at least 0 %',
    },
  ];
}

/** A toothed wheel needs its circumference and exactly one way of reading, and they need a toothed wheel. */
export function sensorFaults(sensor: VehicleFile['speed_sensor']): RuleFault[] {
  const at = (key: string) => ['speed_sensor', key];
  const ways = ['counting_window_s', 'timer_resolution_s'] as const;
  const given = ways.filter((key) => sensor[key] !== undefined);
  if (sensor.pulses_per_turn === undefined) {
    const alone = (['wheel_circumference_m', ...ways] as const).find((key) => sensor[key] !== undefined);
    return alone === undefined
      ? []
      : [
          {
            path: at('pulses_per_turn'),
            code: 'missing-key',
            message: `is missing: ${alone} is about pulses`,
            allowed: 'the pulses of a turn',
          },
        ];
  }
  const faults: RuleFault[] = [];
  if (sensor.wheel_circumference_m === undefined)
    faults.push({
      path: at('wheel_circumference_m'),
      code: 'missing-key',
      message: 'is missing: pulses_per_turn needs it',
      allowed: 'a number from 0.1 to 10 m',
    });
  if (given.length === 0)
    faults.push({
      path: ['speed_sensor'],
      code: 'missing-key',
      message: 'does not say how the pulses are read',
      allowed: `${ways.join(', or ')}`,
    });
  if (given.length === 2)
    faults.push({
      path: at(ways[1]),
      code: 'keys-exclude',
      message: `cannot stand beside ${ways[0]}`,
      allowed: 'one of them',
    });
  return faults;
}

/** The centre of mass lies between the wheels. */
export function tractionFaults({ traction }: Pick<VehicleFile, 'traction'>): RuleFault[] {
  if (traction === undefined) return [];
  return below(
    ['traction', 'mass_centre_ahead_m'],
    traction.mass_centre_ahead_m,
    { value: traction.wheelbase_m, words: 'the wheelbase' },
    'm',
  );
}
