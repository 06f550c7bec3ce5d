import type * as z from 'zod';
import { actuatorSchema } from './actuator-schema.ts';
import type { Rule, RuleFault } from './check-file.ts';
import { combustionFaults } from './combustion-rules.ts';
import { type DriveFile, driveSchema } from './drive-schemas.ts';
import { electricFaults } from './electric-rules.ts';
import { actuatorFaults, sensorFaults, tractionFaults, travelFaults } from './fittings-rules.ts';
import { gearFaults } from './gear-rules.ts';
import { sensorSchema } from './sensor-schema.ts';
import { tractionSchema } from './traction-schema.ts';
import { variatorFaults } from './variator-rules.ts';
import type { vehicleSchema } from './vehicle-schema.ts';

type VehicleInput = z.input<typeof vehicleSchema>;

/** What no single field of a vehicle can say. A part is filled with its defaults first: they take part in the rules. */
export const vehicleRules: readonly Rule<VehicleInput>[] = [
  { about: ['road_load'], check: ({ road_load }) => yawTableFaults(road_load) },
  {
    about: ['drive'],
    check: ({ drive }) =>
      drive === undefined
        ? []
        : driveFaults(driveSchema.parse(drive)).map((fault) => ({
            ...fault,
            path: ['drive', ...fault.path],
          })),
  },
  { about: ['actuator'], check: ({ actuator = {} }) => actuatorFaults(actuatorSchema.parse(actuator)) },
  {
    about: ['actuator', 'travel_pct'],
    check: ({ actuator, drive }) => {
      const known = driveSchema.safeParse(drive);
      return drive !== undefined && !known.success ? [] : travelFaults(actuator?.travel_pct, known.data);
    },
  },
  {
    about: ['speed_sensor'],
    check: ({ speed_sensor = {} }) => sensorFaults(sensorSchema.parse(speed_sensor)),
  },
  {
    about: ['traction'],
    check: ({ traction }) =>
      traction === undefined ? [] : tractionFaults({ traction: tractionSchema.parse(traction) }),
  },
];

function driveFaults(file: DriveFile): RuleFault[] {
  switch (file.kind) {
    case 'force':
      return [];
    case 'engine':
      return [...combustionFaults(file), ...gearFaults(file)];
    case 'variator':
      return [...combustionFaults(file), ...variatorFaults(file)];
    case 'electric':
      return electricFaults(file);
  }
}

function yawTableFaults(load: VehicleInput['road_load']): RuleFault[] {
  if (!('cda_table' in load)) return [];
  const faults: RuleFault[] = [];
  load.cda_table.forEach(({ yaw_deg }, i) => {
    const before = i === 0 ? null : load.cda_table[i - 1]!.yaw_deg;
    if (before === null ? yaw_deg !== 0 : yaw_deg <= before)
      faults.push({
        path: ['road_load', 'cda_table', i, 'yaw_deg'],
        code: 'not-in-order',
        message: before === null ? 'the table does not start without yaw' : 'the yaw angles do not increase',
        found: `${yaw_deg} deg`,
        allowed: before === null ? '0 deg' : `more than ${before} deg`,
      });
  });
  return faults;
}
