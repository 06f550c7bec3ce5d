import type { RuleFault } from './check-file.ts';
import type { DriveFileOf } from './drive-schemas.ts';
import { above, atLeast, atMost, increasing } from './order-rules.ts';
import type { Path } from './yaml-source.ts';

/** What no single field of a belt variator can say. Paths start at the drive. */
export function variatorFaults(file: DriveFileOf<'variator'>): RuleFault[] {
  const { belt, clutch, idle_rpm: idle, rev_limit_rpm: limit } = file;
  const locked = { value: clutch.locked_rpm, words: 'where the clutch is locked' };
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
    ...belt.line.flatMap(({ rpm }, i) => {
      const path = ['belt', 'line', i, 'rpm'];
      return [...atLeast(path, rpm, locked, 'rpm'), ...belowLimit(path, rpm, limit)];
    }),
    ...above(
      ['clutch', 'begins_rpm'],
      clutch.begins_rpm,
      { value: idle, words: `the idle speed, ${idle} rpm` },
      'rpm',
    ),
    ...above(['clutch', 'locked_rpm'], clutch.locked_rpm, begins, 'rpm'),
    ...belowLimit(['clutch', 'locked_rpm'], clutch.locked_rpm, limit),
  ];
}

const belowLimit = (path: Path, rpm: number, limit: number | undefined): RuleFault[] =>
  limit === undefined ? [] : atMost(path, rpm, { value: limit, words: 'the rev limit' }, 'rpm');
