import { type LinearController, linearController } from '../control/linear-controller.ts';
import { type SpeedResponse, sampledLoop } from '../control/sampled-loop.ts';
import type { Candidate } from '../control/setup.ts';
import { logarithmicGrid, type ResponseScan, scanResponse } from '../linear/response-scan.ts';
import type { OperatingPoint, PointNotHeld } from './operating-point.ts';
import type { OperatingPoints } from './operating-points.ts';
import {
  type PointFigures,
  type PointSteps,
  pointFigures,
  pointSteps,
  setpointWeightOf,
} from './point-figures.ts';
import { gainsAtPoint, linearAt, vehicleAt } from './point-margins.ts';

/** How the loops of candidates stand at operating points, on paper: linear, for small errors, without limits. Plain data. */
export interface LoopSheet {
  readonly points: readonly OperatingPoint[];
  readonly notHeld: readonly PointNotHeld[];
  /** One a candidate, in order. */
  readonly loops: readonly CandidateLoop[];
}

export interface CandidateLoop {
  readonly name: string;
  /** Why it is nothing linear: then all else is empty; null: it is. */
  readonly notLinear: string | null;
  /** [s]; null: nothing linear. */
  readonly sample: number | null;
  /** At each point. */
  readonly figures: readonly PointFigures[];
  /** Points, the worst first: unstable ones by falling growth, then by falling sensitivity. */
  readonly order: readonly number[];
  /** At the first of them, and at the point that stands for the most time; null: no points. */
  readonly worst: PointCurves | null;
  readonly nominal: PointCurves | null;
}

/** What is drawn of a loop at a point. */
export interface PointCurves {
  /** Number of the point. */
  readonly point: number;
  /** The open loop, up to the Nyquist frequency. */
  readonly response: ResponseScan;
  /** null: unstable. */
  readonly steps: PointSteps | null;
}

/** Lowest frequency drawn [rad/s], and steps of the curve. */
const SLOWEST = 1e-3;
const STEPS = 240;
/** Points of a response that is drawn, at most. */
const STEP_POINTS = 600;

/** The sheet of all candidates over the same operating points. */
export function loopSheet({ points, notHeld }: OperatingPoints, candidates: readonly Candidate[]): LoopSheet {
  const nominal = points.reduce((best, { weight }, i) => (weight > points[best].weight ? i : best), 0);
  const loops = candidates.map((candidate): CandidateLoop => {
    const { name } = candidate;
    const linear = linearController(candidate.controller);
    if ('none' in linear)
      return {
        name,
        notLinear: linear.none,
        sample: null,
        figures: [],
        order: [],
        worst: null,
        nominal: null,
      };
    const weight = setpointWeightOf(candidate.controller);
    const figures = points.map((point) => pointFigures(point, linear, weight));
    const order = worstFirst(figures);
    const curves = (i: number | undefined): PointCurves | null =>
      i === undefined || points.length === 0 ? null : curvesAt(points, figures, i, linear, weight);
    return {
      name,
      notLinear: null,
      sample: linear.sample,
      figures,
      order,
      worst: curves(order[0]),
      nominal: curves(nominal),
    };
  });
  return { points, notHeld, loops };
}

/** Numbers of the points: unstable ones first, the fastest growth before all, then by falling sensitivity. */
function worstFirst(figures: readonly PointFigures[]): readonly number[] {
  const growth = ({ margins, poles }: PointFigures): number =>
    margins.stable ? Number.NEGATIVE_INFINITY : poles.reduce((most, { re }) => Math.max(most, re), 0);
  const ranks = figures.map((one) => ({ growth: growth(one), sensitivity: one.margins.sensitivity ?? 0 }));
  const before = (i: number, j: number): number => {
    const [a, b] = [ranks[i], ranks[j]];
    if (a.growth !== b.growth) return a.growth > b.growth ? -1 : 1;
    return b.sensitivity - a.sensitivity || i - j;
  };
  return figures.map((_, i) => i).sort(before);
}

function curvesAt(
  points: readonly OperatingPoint[],
  figures: readonly PointFigures[],
  i: number,
  controller: LinearController,
  setpointWeight: number,
): PointCurves {
  const point = points[i];
  const gains = gainsAtPoint(point, controller);
  const loop = sampledLoop(vehicleAt(point), linearAt(point), controller);
  const grid = logarithmicGrid(SLOWEST, Math.PI / controller.sample, STEPS);
  const { margins, poles } = figures[i];
  return {
    point: i,
    response: scanResponse((w) => loop.openLoop(gains, w), grid),
    steps: margins.stable
      ? pointSteps(
          point,
          (push, duration, spacing) => fewer(loop.respond(gains, push, duration, spacing)),
          poles,
          { setpointWeight },
        )
      : null,
  };
}

/** Every so manieth sample, for a line. */
function fewer({ speed, spacing }: SpeedResponse): SpeedResponse {
  const stride = Math.ceil(speed.length / STEP_POINTS);
  if (stride === 1) return { speed, spacing };
  return { speed: speed.filter((_, i) => i % stride === 0), spacing: stride * spacing };
}
