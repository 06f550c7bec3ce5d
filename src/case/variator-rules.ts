import type { RuleFault } from './check-file.ts';
import type { DriveFileOf } from './drive-schemas.ts';
import { above, increasing } from './order-rules.ts';

/** What no single field of a belt variator can say. Paths start at the drive. */
export function variatorFaults(file: DriveFileOf<'variator'>): RuleFault[] {
  const { belt, clutch, idle_rpm: idle } = file;
  const begins = { value: clutch.begins_rpm, words: 'where the clutch begins to close' };
  return [
    ...above(
      ['belt', 'low_ratio'],
      belt.low_ratio,
      { value: belt.high_ratio, words: 'the ratio in high gear' },
      '',
    ),
    ...increasing(
      belt.line.map(({ throttle_pct }) => throttle_pct),
      (i) => ['belt', 'line', i, 'throttle_pct'],
      '%',
    ),
    ...belt.line.flatMap(({ rpm }, i) => above(['belt', 'line', i, 'rpm'], rpm, begins, 'rpm')),
    ...above(
      ['clutch', 'begins_rpm'],
      clutch.begins_rpm,
      { value: idle, words: `the idle speed, ${idle} rpm` },
      'rpm',
    ),
    ...above(['clutch', 'locked_rpm'], clutch.locked_rpm, begins, 'rpm'),
  ];
}
