import { greatestIntegralGain, trimmed } from '../control/design-rejection.ts';
import { equalGainSchedule } from '../control/design-schedule.ts';
import { gainRegion } from '../control/gain-region.ts';
import { gainsAt } from '../control/gain-schedule.ts';
import type { Gains } from '../control/sampled-loop.ts';
import type { GainSchedule } from '../control/setup.ts';
import { keptInGear } from '../study/gear-course.ts';
import type { OperatingPoint } from '../study/operating-point.ts';
import type { pointLoop } from '../study/point-margins.ts';
import { linearise } from '../vehicle/linearise.ts';
import { type keysLike, textOfGains, textOfSchedule } from './candidate-text.ts';
import { type Found, gainWords, NONE_KEEPS, type ProposalContext } from './proposal-context.ts';
import type { CandidateText } from './tune-result.ts';

/** The greatest integral gain under the bound with a schedule over gears and speeds that makes the gain of the loop the same everywhere. */
export function scheduleProposal(
  context: ProposalContext,
  scans: readonly ReturnType<typeof pointLoop>[],
  sample: number,
  name: string,
  like: ReturnType<typeof keysLike>,
  keeps: (file: CandidateText) => boolean,
): Found {
  const { vehicle, surroundings, speed, plan, points } = context;
  const shown = 1 + vehicle.sensor.scaleError;
  const gainOf = (gear: number, at: number): number | null => {
    const model = linearise(keptInGear(vehicle, gear), { speed: at, surroundings });
    return model?.feasible === true ? model.b : null;
  };
  const base = gainOf(vehicle.drive.gear, speed);
  const gears = [...new Set([...plan.gears, ...points.map(({ gear }) => gear)])];
  const speeds = [...new Set([...plan.speeds, speed])];
  if (base === null) return { none: 'the drive does not hold the set speed on the level' };
  const schedule = equalGainSchedule(
    gears.flatMap((gear) => speeds.map((at) => ({ gear, speed: at * shown, gain: gainOf(gear, at) }))),
    base,
  );
  if (schedule === null)
    return {
      none: 'the gain of the vehicle is the same in every gear and at every speed that was asked for',
    };
  const factors = factorsOf(schedule, points, vehicle.drive.gears.length);
  const region = gainRegion(
    scans.map(({ loop }, i) => ({ loop, sample, factors: factors[i]! })),
    plan.sensitivity,
  );
  const greatest = greatestIntegralGain(region);
  const fileOf = (gains: Gains): CandidateText => ({
    ...textOfGains(name, like, gains),
    schedule: textOfSchedule(schedule),
  });
  const kept = greatest === null ? null : trimmed(greatest, (gains) => keeps(fileOf(gains)));
  if (kept === null) return { none: NONE_KEEPS };
  return {
    file: fileOf(kept),
    words: `The greatest integral gain that keeps the bound at every operating point, scheduled over ${gears.length > 1 ? 'gear and ' : ''}speed so that the gain of the loop is the same everywhere: ${gainWords(kept)} at the set speed.`,
  };
}

function factorsOf(schedule: GainSchedule, points: readonly OperatingPoint[], gears: number) {
  const gainsIn = gainsAt({ kp: 1, ki: 1, kd: 0 }, schedule, gears);
  return points.map(({ gear, speed, vehicle }) => {
    const out = new Float64Array(3);
    gainsIn(gear, speed * (1 + vehicle.sensor.scaleError), out);
    return { proportional: out[0]!, integral: out[1]! };
  });
}
