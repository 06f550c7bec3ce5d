import type { TuneDesign } from '../case/tune-of.ts';
import { type DesignLoop, designLoop } from '../control/design-point.ts';
import { greatestIntegralGain, trimmed } from '../control/design-rejection.ts';
import { delayedLag } from '../control/design-simc.ts';
import { type GainRegion, gainRegion } from '../control/gain-region.ts';
import { type LinearController, linearController } from '../control/linear-controller.ts';
import type { Gains } from '../control/sampled-loop.ts';
import type { Candidate, ControllerSetup } from '../control/setup.ts';
import { exp, log } from '../numeric/elementary.ts';
import { InputError } from '../problems/input-error.ts';
import { pointLoop } from '../study/point-margins.ts';
import { type RoadTrial, searchOnRoad } from '../study/tune-search.ts';
import { type Keeps, tightestClosedLoop, tightestDroop, tightestSettling } from '../study/tune-tightest.ts';
import { toKmh, toPct } from '../units/convert.ts';
import { isWritable, keysLike, textOfDesign, textOfGains, writtenGains } from './candidate-text.ts';
import {
  controllerOf,
  type Found,
  gainWords,
  keepsBound,
  NONE_KEEPS,
  type ProposalContext,
} from './proposal-context.ts';
import { scheduleProposal } from './schedule-proposal.ts';
import type { CandidateText, NotProposed, Proposal } from './tune-result.ts';

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
/** Trials on the road that are looked at with all exactness. */
const CONFIRMED = 3;
const BORDER_POINTS = 120;

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
    return kept === null || !isWritable(kept) ? null : writtenGains(kept);
  };
  const keeps = (file: CandidateText): boolean => keepsBound(context, scans, controllerOf(context, file));
  const design = designOf(context, timing);
  let trials: readonly RoadTrial[] = [];
  const proposed: Proposed[] = [];
  const notProposed: NotProposed[] = [];

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
      if (gains === null) return { none: NONE_KEEPS };
      return trimmedText(
        gains,
        (one) => textOfGains(name('rejection'), like, one),
        `The greatest integral gain that keeps the bound at every operating point: ${gainWords(gains)}.`,
      );
    },
    schedule: () => scheduleProposal(context, scans, timing.sample, name('schedule'), like, keeps),
    road: () => {
      const setupOf = (gains: Gains): ControllerSetup =>
        controllerOf(context, textOfGains(name('road'), like, gains));
      trials = searchOnRoad({
        region,
        settle,
        costAt: (gains) => context.costOf(setupOf(gains), 'search'),
        mostReplays: plan.mostReplays,
        starts: proposed.flatMap(({ controller }) => (controller.kind === 'pi' ? [controller] : [])),
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
              ? NONE_KEEPS
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
    return kept === null ? { none: NONE_KEEPS } : { file: fileOf(kept), words };
  };

  // The road comes last, whatever the order: it begins with what the other ways have found.
  for (const way of plan.designs.toSorted((a, b) => Number(a === 'road') - Number(b === 'road'))) {
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

function timingOf(context: ProposalContext, file: CandidateText): LinearController {
  const linear = linearController(controllerOf(context, file));
  if ('none' in linear) throw new RangeError('a PI controller is linear');
  return linear;
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

const designWords = (controller: ControllerSetup): string =>
  (controller.kind === 'pi' || controller.kind === 'pid' ? controller.design?.words : undefined) ?? '';

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
