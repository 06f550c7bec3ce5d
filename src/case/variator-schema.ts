import { combustionKeys, wheelRadius } from './combustion-schema.ts';
import { IDEAL, kind, list, mapping, number, otherwise } from './fields.ts';

const rpm = (words: string) => number('rpm', 50, 30000, words);

/** An engine with a belt variator and a centrifugal clutch. */
export const variatorSchema = mapping('Combustion engine with a belt variator', {
  kind: kind('variator'),
  ...combustionKeys,
  driveline_efficiency_pct: otherwise(
    number('%', 10, 100, 'Power at the wheel over power of the engine'),
    80,
    'from memory: a belt variator and its reduction, 70 to 88 %',
  ),
  belt: mapping('Belt', {
    high_ratio: number('', 0.05, 20, 'Ratio of the belt in high gear, the least'),
    low_ratio: number('', 0.05, 20, 'Ratio of the belt in low gear, the greatest'),
    final_ratio: number('', 0.05, 200, 'Ratio from the driven pulley to the wheel'),
    line: list(
      mapping('Row', {
        throttle_pct: number('%', 0, 100, 'Throttle, increasing'),
        rpm: rpm('Engine speed that the variator keeps'),
      }),
      1,
      50,
      'Engine speed over throttle; between rows on a straight line, beyond the ends constant',
    ),
    lag_s: otherwise(number('s', 0, 20, 'First-order lag of the ratio'), 0, IDEAL),
  }),
  clutch: mapping('Centrifugal clutch', {
    begins_rpm: rpm('Engine speed at which it begins to close'),
    locked_rpm: rpm('Engine speed from which it no longer slips'),
  }),
  wheel_radius_m: wheelRadius,
});
