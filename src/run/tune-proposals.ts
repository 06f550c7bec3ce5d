import { candidateSchema } from '../case/candidate-schema.ts';
import { candidateOf } from '../case/candidates-of.ts';
import type { CaseDocument } from '../case/read-case-file.ts';
import type { TuneDesign, TunePlan } from '../case/tune-of.ts';
import { type DesignLoop, designLoop } from '../control/design-point.ts';
import { greatestIntegralGain, trimmed } from '../control/design-rejection.ts';
import { equalGainSchedule } from '../control/design-schedule.ts';
import { delayedLag } from '../control/design-simc.ts';
import { type GainRegion, gainRegion } from '../control/gain-region.ts';
import { gainsAt } from '../control/gain-schedule.ts';
import { type LinearController, linearController } from '../control/linear-controller.ts';
import type { Gains } from '../control/sampled-loop.ts';
import type { Candidate, ControllerSetup, GainSchedule } from '../control/setup.ts';
import { exp, log } from '../numeric/elementary.ts';
import { InputError } from '../problems/input-error.ts';
import { keptInGear } from '../study/gear-course.ts';
import type { OperatingPoint } from '../study/operating-point.ts';
import { gainsAtPoint, pointLoop } from '../study/point-margins.ts';
import { type RoadTrial, searchOnRoad } from '../study/tune-search.ts';
import { type Keeps, tightestClosedLoop, tightestDroop, tightestSettling } from '../study/tune-tightest.ts';
import { toKmh, toPct } from '../units/convert.ts';
import { linearise } from '../vehicle/linearise.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { keysLike, textOfDesign, textOfGains, textOfSchedule, writtenGains } from './candidate-text.ts';
import type { CandidateText, NotProposed, Proposal } from './tune-result.ts';

/** What proposals are made from. */
export interface ProposalContext {
  readonly document: CaseDocument;
  readonly vehicle: Vehicle;
  /** Where designs are made: level, still, at sea level, at the true speed of the set speed [m/s]. */
  readonly surroundings: Surroundings;
  readonly speed: number;
  readonly plan: TunePlan;
  /** At least one. */
  readonly points: readonly OperatingPoint[];
  /** Cost of a run over the road; Infinity: it did not get to its end. `search`: fast is good enough. */
  readonly costOf: (controller: ControllerSetup, purpose: 'search' | 'confirm') => number;
  readonly onProgress: (share: number, words: string) => void;
}

export interface Proposals {
  readonly proposed: readonly Proposed[];
  readonly notProposed: readonly NotProposed[];
  readonly trials: readonly RoadTrial[];
  readonly border: readonly { readonly kp: number; readonly ki: number }[];
}
export interface Proposed extends Candidate {
  readonly proposal: Proposal;
}

/** The scan of a loop looks between no two of its frequencies: what it finds may be so much too small. */
const BETWEEN = 5e-4;
/** A design that does not come out as it was foreseen is asked for less, in steps of this. */
const EASE = 1.03;
const EASES = 25;
/** A design that does is asked for more, in steps that begin with this. */
const TIGHTEN = 1.13;
const NONE_KEEPS = 'no gains of this kind keep the bound at every operating point';
/** Trials on the road that are looked at with all exactness. */
const CONFIRMED = 3;
const BORDER_POINTS = 120;

type Found = { readonly file: CandidateText; readonly words: string } | { readonly none: string };

/**
 * Gains by every way that the case asks for, each the tightest that keeps the bound at all operating points: the ways
 * that have a figure to be tightened (settling time, droop, closed loop) are written with that figure as their design,
 * the others as gains.
 */
export function proposalsOf(context: ProposalContext): Proposals {
  const { document, plan, points } = context;
  const like = keysLike(document, plan.like);
  const taken = new Set(document.file.candidates.map(({ name, kind }) => name ?? kind));
  const timing = timingOf(context, textOfGains('timing', like, { kp: 1, ki: 0.1 }));
  const scans = points.map((point) => pointLoop(point, timing));
  const atPoints: Keeps = (gains) =>
    scans.every((scan) => scan.sensitivity(gains) <= plan.sensitivity / (1 + BETWEEN));
  const region = gainRegion(
    scans.map(({ loop }) => ({ loop, sample: timing.sample })),
    plan.sensitivity,
  );
  const settle = (gains: Gains): Gains | null => {
    const kept = trimmed(gains, (one) => atPoints(writtenGains(one)));
    return kept === null ? null : writtenGains(kept);
  };
  const keeps = (file: CandidateText): boolean => keepsBound(context, controllerOf(context, file));
  const design = designOf(context, timing);
  let trials: readonly RoadTrial[] = [];

  /** The least value whose design keeps the bound, to a few per cent, sought from a foreseen one. */
  const tightest = (
    foreseen: number | null,
    words: string,
    fileOf: (value: number) => CandidateText,
    least = 0,
  ): Found => {
    if ('none' in design) return design;
    let reason = NONE_KEEPS;
    const at = (value: number): CandidateText | null => {
      try {
        const file = fileOf(roundedUp(value));
        return keeps(file) ? file : null;
      } catch (error) {
        if (!(error instanceof InputError)) throw error;
        reason = error.problems.map(({ message }) => message).join('; ');
        return null;
      }
    };
    if (foreseen === null) return { none: reason };
    let value = foreseen;
    let file = at(value);
    for (let i = 1; file === null && i < EASES; i++) {
      value *= EASE;
      file = at(value);
    }
    if (file === null) return { none: reason };
    for (let ratio = TIGHTEN; ratio > EASE; ) {
      const tighter = value / ratio < least ? null : at(value / ratio);
      if (tighter === null) ratio = Math.sqrt(ratio);
      else [file, value] = [tighter, value / ratio];
    }
    return { file, words: `${words} ${designWords(controllerOf(context, file))}` };
  };
  const name = (way: TuneDesign): string => freeName(`tuned-${way}`, taken);

  const ways: Readonly<Record<TuneDesign, () => Found>> = {
    settling: () =>
      tightest(
        'none' in design ? null : tightestSettling(design, atPoints, plan.overshoot),
        'The shortest settling time that keeps the bound at every operating point.',
        (settling_s) =>
          textOfDesign(name('settling'), like, { settling_s, overshoot_pct: plain(toPct(plan.overshoot)) }),
      ),
    droop: () => {
      const droop = 'none' in design ? null : tightestDroop(design, atPoints, plan.gradeStep, plan.damping);
      return tightest(
        droop === null ? null : toKmh(droop),
        'The least droop that keeps the bound at every operating point.',
        (droop_kmh) =>
          textOfDesign(name('droop'), like, {
            droop_kmh,
            grade_step_pct: plain(toPct(plan.gradeStep)),
            damping: plan.damping,
          }),
      );
    },
    simc: () =>
      tightest(
        'none' in design ? null : tightestClosedLoop(design, atPoints),
        'The fastest closed loop, no faster than its delay, that keeps the bound at every operating point.',
        (closed_loop_s) => textOfDesign(name('simc'), like, { closed_loop_s }),
        'none' in design ? 0 : delayedLag(design).delay,
      ),
    rejection: () => {
      const greatest = greatestIntegralGain(region);
      const gains = greatest === null ? null : settle(greatest);
      if (gains === null) return { none: 'no gains keep the bound at every operating point' };
      return trimmedText(
        gains,
        (one) => textOfGains(name('rejection'), like, one),
        `The greatest integral gain that keeps the bound at every operating point: ${gainWords(gains)}.`,
      );
    },
    schedule: () => scheduleFound(context, scans, timing.sample, name('schedule'), like, keeps),
    road: () => {
      const setupOf = (gains: Gains): ControllerSetup =>
        controllerOf(context, textOfGains(name('road'), like, gains));
      trials = searchOnRoad({
        region,
        settle,
        costAt: (gains) => context.costOf(setupOf(gains), 'search'),
        mostReplays: plan.mostReplays,
        onReplay: (done) =>
          context.onProgress(done / plan.mostReplays, `replay ${done} of the tuning on the road`),
      });
      const finite = trials.filter(({ cost }) => Number.isFinite(cost));
      const best = [...finite].sort((a, b) => a.cost - b.cost).slice(0, CONFIRMED);
      const costs = best.map((trial) => context.costOf(setupOf(trial), 'confirm'));
      const winner = best[costs.indexOf(costs.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY))];
      if (winner === undefined)
        return {
          none:
            trials.length === 0
              ? 'no gains keep the bound at every operating point'
              : 'no replay has a cost: none comes to the end of the road with every figure of it',
        };
      return trimmedText(
        winner,
        (one) => textOfGains(name('road'), like, one),
        `The least cost of ${trials.length} replays of the road with gains that keep the bound at every operating point: ${gainWords(winner)}.`,
      );
    },
  };

  /** What the scan let pass between two of its frequencies is taken back. */
  const trimmedText = (gains: Gains, fileOf: (gains: Gains) => CandidateText, words: string): Found => {
    const kept = trimmed(gains, (one) => keeps(fileOf(one)));
    return kept === null
      ? { none: 'no gains keep the bound at every operating point' }
      : { file: fileOf(kept), words };
  };

  const proposed: Proposed[] = [];
  const notProposed: NotProposed[] = [];
  for (const way of plan.designs) {
    if (way !== 'road') context.onProgress(0, `design: ${way}`);
    const found = ways[way]();
    if ('none' in found) notProposed.push({ design: way, reason: found.none });
    else {
      const { file, words } = found;
      const controller = controllerOf(context, file);
      proposed.push({ name: file.name, controller, proposal: { design: way, file, words } });
    }
  }
  return { proposed, notProposed, trials, border: borderOf(region) };
}

/** A controller as `run` makes it of its text. */
function controllerOf(
  { document, vehicle, surroundings }: ProposalContext,
  file: CandidateText,
): ControllerSetup {
  const index = document.file.candidates.length;
  return candidateOf(candidateSchema.parse(file), { document, vehicle, surroundings, index }).controller;
}

function timingOf(context: ProposalContext, file: CandidateText): LinearController {
  const linear = linearController(controllerOf(context, file));
  if ('none' in linear) throw new RangeError('a PI controller is linear');
  return linear;
}

/** By the margins themselves, at every point. */
function keepsBound({ points, plan }: ProposalContext, controller: ControllerSetup): boolean {
  const linear = linearController(controller);
  if ('none' in linear) return false;
  return points.every((point) => {
    const { figures } = pointLoop(point, linear).margins(gainsAtPoint(point, linear));
    return figures !== null && figures.sensitivity <= plan.sensitivity;
  });
}

/** The loop that designs are made on; or why there is none. */
function designOf(
  { vehicle, surroundings, speed }: ProposalContext,
  { sample, computingDelay, integration }: LinearController,
): DesignLoop | { readonly none: string } {
  try {
    return designLoop({
      vehicle,
      surroundings,
      at: speed,
      sample,
      computingDelay,
      integration,
      setpointWeight: 0,
    });
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    return { none: error.problems.map(({ message }) => message).join('; ') };
  }
}

function scheduleFound(
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
  if (kept === null) return { none: 'no gains keep the bound at every operating point' };
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

const designWords = (controller: ControllerSetup): string =>
  (controller.kind === 'pi' || controller.kind === 'pid' ? controller.design?.words : undefined) ?? '';

function gainWords(gains: Gains): string {
  const { kp_pct_per_kmh: kp, ti_s: ti } = textOfGains('words', {}, gains);
  return `kp ${kp} % per km/h, Ti ${ti} s`;
}

/** A name that no candidate has, with a number where it must. */
function freeName(name: string, taken: ReadonlySet<string>): string {
  if (!taken.has(name)) return name;
  let number = 2;
  while (taken.has(`${name}-${number}`)) number++;
  return `${name}-${number}`;
}

/** Three digits, upwards: what is asked for is met. */
function roundedUp(value: number): number {
  const near = Number(value.toPrecision(3));
  return near >= value ? near : Number((value * 1.005).toPrecision(3));
}
/** Without what binary fractions leave behind. */
const plain = (value: number): number => Number(value.toPrecision(12));

/** The greatest ki over kp, to be drawn. */
function borderOf({ ranges, greatestIntegral }: GainRegion): Proposals['border'] {
  return ranges.flatMap(({ low, high }) => {
    const from = Math.max(log(low), log(high) - 3 * log(10));
    return Array.from({ length: BORDER_POINTS }, (_, i) => {
      const kp = i === BORDER_POINTS - 1 ? high : exp(from + ((log(high) - from) * i) / (BORDER_POINTS - 1));
      return { kp, ki: greatestIntegral(kp) };
    }).filter(({ ki }) => ki > 0);
  });
}
