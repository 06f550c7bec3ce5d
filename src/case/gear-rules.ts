import type { RuleFault } from './check-file.ts';
import { stallRpm } from './combustion-of.ts';
import type { DriveFileOf } from './drive-schemas.ts';
import { above, atMost, decreasing, increasing } from './order-rules.ts';

type EngineFile = DriveFileOf<'engine'>;

/** What no single field of gears and gearbox can say. Paths start at the drive. */
export function gearFaults(file: EngineFile): RuleFault[] {
  const { gear_ratios: ratios, gear } = file;
  const faults = decreasing(ratios, (i) => ['gear_ratios', i], '');
  if (gear !== undefined && gear > ratios.length)
    faults.push({
      path: ['gear'],
      code: 'out-of-range',
      message: 'is no gear of gear_ratios',
      found: `${gear}`,
      allowed: `a gear from 1 to ${ratios.length}`,
    });
  // Ratios that do not decrease make nonsense of every step between gears.
  return faults.length > 0 ? faults : shiftLineFaults(file);
}

function shiftLineFaults(file: EngineFile): RuleFault[] {
  if (file.gearbox.kind !== 'automatic') return [];
  const { shift_lines: lines } = file.gearbox;
  const at = (i: number, key: string) => ['gearbox', 'shift_lines', i, key];
  const stall = stallRpm(file);
  const limit = file.rev_limit_rpm;
  const step = widestStep(file.gear_ratios);
  return [
    ...increasing(
      lines.map(({ throttle_pct }) => throttle_pct),
      (i) => at(i, 'throttle_pct'),
      '%',
    ),
    ...lines.flatMap(({ up_rpm: up, down_rpm: down }, i) => {
      const crossed = above(at(i, 'up_rpm'), up, { value: down, words: 'the line down' }, 'rpm');
      if (crossed.length > 0) return crossed;
      return [
        ...above(at(i, 'down_rpm'), down, { value: stall, words: 'where the engine stalls' }, 'rpm'),
        ...(limit === undefined
          ? []
          : atMost(at(i, 'up_rpm'), up, { value: limit, words: 'the rev limit' }, 'rpm')),
        ...hunting(at(i, 'down_rpm'), up, down, step),
      ];
    }),
  ];
}

interface Step {
  readonly from: number;
  readonly share: number;
}

/** The step up that takes most of the engine speed. */
function widestStep(ratios: readonly number[]): Step {
  return ratios.reduce<Step>(
    (widest, ratio, i) => {
      const share = ratio / (ratios[i - 1] ?? ratio);
      return share < widest.share ? { from: i, share } : widest;
    },
    { from: 0, share: 1 },
  );
}

/** Where a shift up ends below the line down, the gearbox would shift to and fro. */
function hunting(path: (string | number)[], up: number, down: number, { from, share }: Step): RuleFault[] {
  const after = up * share;
  if (share === 1 || after > down) return [];
  return [
    {
      path,
      code: 'not-in-order',
      message: `a shift up from gear ${from} ends at ${Math.floor(after)} rpm, below the line down: the gearbox would shift to and fro`,
      found: `${down} rpm`,
      allowed: `less than ${Math.floor(after)} rpm`,
    },
  ];
}
