import type * as z from 'zod';
import type { Rule, RuleFault } from './check-file.ts';
import type { vehicleSchema } from './vehicle-schema.ts';

type VehicleInput = z.input<typeof vehicleSchema>;

/** What no single field of a vehicle can say. */
export const vehicleRules: readonly Rule<VehicleInput>[] = [
  {
    about: ['road_load'],
    check: ({ road_load: load }) => {
      if (!('cda_table' in load)) return [];
      const faults: RuleFault[] = [];
      load.cda_table.forEach(({ yaw_deg }, i) => {
        const before = i === 0 ? null : load.cda_table[i - 1]!.yaw_deg;
        if (before === null ? yaw_deg !== 0 : yaw_deg <= before)
          faults.push({
            path: ['road_load', 'cda_table', i, 'yaw_deg'],
            code: 'not-in-order',
            message:
              before === null ? 'the table does not start without yaw' : 'the yaw angles do not increase',
            found: `${yaw_deg} deg`,
            allowed: before === null ? '0 deg' : `more than ${before} deg`,
          });
      });
      return faults;
    },
  },
];
