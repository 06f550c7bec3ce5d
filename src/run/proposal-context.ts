import { candidateSchema } from '../case/candidate-schema.ts';
import { candidateOf } from '../case/candidates-of.ts';
import type { CaseDocument } from '../case/read-case-file.ts';
import type { TunePlan } from '../case/tune-of.ts';
import { linearController } from '../control/linear-controller.ts';
import type { Gains } from '../control/sampled-loop.ts';
import type { ControllerSetup } from '../control/setup.ts';
import type { OperatingPoint } from '../study/operating-point.ts';
import { gainsAtPoint, type pointLoop } from '../study/point-margins.ts';
import type { Surroundings } from '../vehicle/surroundings.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { textOfGains } from './candidate-text.ts';
import type { CandidateText } from './tune-result.ts';

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

/** A proposal, or why there is none. */
export type Found = { readonly file: CandidateText; readonly words: string } | { readonly none: string };

export const NONE_KEEPS = 'no gains of this kind keep the bound at every operating point';

/** A controller as `run` makes it of its text. */
export function controllerOf(
  { document, vehicle, surroundings }: ProposalContext,
  file: CandidateText,
): ControllerSetup {
  const index = document.file.candidates.length;
  return candidateOf(candidateSchema.parse(file), { document, vehicle, surroundings, index }).controller;
}

/**
 * By the margins themselves, at every point.
 *
 * @param scans of the points, under the timing of the controller
 */
export function keepsBound(
  { points, plan }: ProposalContext,
  scans: readonly ReturnType<typeof pointLoop>[],
  controller: ControllerSetup,
): boolean {
  const linear = linearController(controller);
  if ('none' in linear) return false;
  return points.every((point, i) => {
    const { figures } = scans[i]!.margins(gainsAtPoint(point, linear));
    return figures !== null && figures.sensitivity <= plan.sensitivity;
  });
}

/** `kp 3 % per km/h, Ti 18 s`, as they are written. */
export function gainWords(gains: Gains): string {
  const { kp_pct_per_kmh: kp, ti_s: ti } = textOfGains('words', {}, gains);
  return `kp ${kp} % per km/h, Ti ${ti} s`;
}
