import { runLoop } from '../loop/run-loop.ts';
import { seededStream } from '../numeric/random.ts';
import { perturbRoad } from '../road/perturb-road.ts';
import type { Recovery } from './figure-measures.ts';
import { askDetail, type FigureRow, figureRow } from './figure-table.ts';
import type { RecoveredHill, Replayed, Requirement } from './findings.ts';
import { speedsOver } from './hill-series.ts';
import { courseOfRun, type HoldCourse } from './hold-course.ts';
import { chooseBins, endedEarly, type FigureContext, recordOf } from './measure-figure.ts';
import { outOfRange } from './out-of-range.ts';
import { RECOVERED_BAND, recoveryOf } from './recovery.ts';
import { sampleAt } from './series-measures.ts';

/** S.d. of the figures that requirements speak of, from the grade's uncertainty. */
export interface FigureSpread {
  /** Roads drawn, and the seed they were drawn with; 0 roads where the grade has no uncertainty. */
  readonly roads: number;
  readonly seed: number;
  readonly rows: readonly SpreadRow[];
}
export interface SpreadRow {
  readonly requirement: string;
  readonly candidate: string;
  /** In the unit of the figure. */
  readonly sd: number;
  /** Drawn roads on which the run ended early or gave no such figure: they are not in the s.d. */
  readonly failed: number;
}

export interface SpreadPlan {
  /** Roads to draw, >= 2. */
  readonly roads?: number;
  readonly seed?: number;
  /** Told before each road how many are done, and of how many. */
  readonly onRoad?: (done: number, of: number) => void;
}

const ROADS = 8;
const SEED = 20_120_401;
/** Hills whose recovery is taken again on every drawn road: those that recover slowest. */
const SLOWEST = 2;

/** Names of the candidates that a requirement speaks of: those it names, or all but the locked ones. */
export function candidatesOf(requirement: Requirement, replayed: readonly Replayed[]): Replayed[] {
  const { candidates } = requirement;
  return replayed.filter(({ name, plan }) =>
    candidates === null ? plan.controller.kind !== 'locked' : candidates.includes(name),
  );
}

/**
 * How far the figures of the requirements depend on what is not known of the grade: each candidate is run, under the
 * fast scheme, over roads drawn from the grade's own error field (seeded, the same roads for all candidates), and the
 * sample s.d. of each figure is taken (n - 1). What is holdable is kept as it is on the road itself.
 *
 * A run that ends before the end of what the requirement is about, or that has no such figure, has failed; such roads
 * are counted, because a s.d. over the others says nothing about them.
 *
 * With n roads the s.d. is itself known to about 1 / sqrt(2 (n - 1)): 27 % for 8.
 *
 * @returns rows of s.d. 0 where the road has no uncertainty: a written road, survey data
 */
export function figureSpread(
  requirements: readonly Requirement[],
  replayed: readonly Replayed[],
  context: FigureContext,
  { roads = ROADS, seed = SEED, onRoad }: SpreadPlan = {},
): FigureSpread {
  const asked = requirements.flatMap((requirement) => {
    const row = figureRow(requirement.figure);
    if (row === undefined) return [];
    return candidatesOf(requirement, replayed).map((candidate) => ({ requirement, row, candidate }));
  });
  const uncertain = context.road.smoothing !== null && context.road.gradeSd.some((sd) => sd > 0);
  const draws = uncertain && asked.length > 0 ? roads : 0;
  const values: number[][] = asked.map(() => []);
  const detail = askDetail(asked.map(({ row: { name } }) => name));
  const stream = seededStream(seed);
  for (let n = 0; n < draws; n++) {
    onRoad?.(n, draws);
    const road = perturbRoad(context.road, stream);
    const runs = new Map<string, Replayed>();
    asked.forEach(({ requirement, row, candidate }, k) => {
      let run = runs.get(candidate.name);
      if (run === undefined) {
        const plan = { ...candidate.plan, road, scheme: 'fast' as const, detail };
        run = { name: candidate.name, plan, result: runLoop(plan) };
        runs.set(candidate.name, run);
      }
      if (endedEarly(run, requirement.where)) return;
      const value = measureDrawn(row, requirement, run, context);
      if (typeof value === 'number') values[k].push(value);
    });
  }
  return {
    roads: draws,
    seed,
    rows: asked.map(({ requirement, candidate }, k) => ({
      requirement: requirement.id,
      candidate: candidate.name,
      sd: sampleSd(values[k]),
      failed: draws - values[k].length,
    })),
  };
}

function measureDrawn(row: FigureRow, requirement: Requirement, run: Replayed, context: FigureContext) {
  const course = courseOfRun(run);
  const chosen = chooseBins(run.result.bins, requirement.where, context, course.settling);
  const band = requirement.band ?? run.plan.bands[0];
  const recoveries =
    row.name === 'recovery_s' ? drawnRecoveries(requirement, run, context, band, course) : [];
  const record = recordOf(run, context, chosen, recoveries, requirement.where);
  return row.measure({ ...record, band: row.takesBand ? requirement.band : null }).value;
}

/** Recoveries of one candidate over a drawn road, on the hills that it recovers from slowest on the road itself. */
function drawnRecoveries(
  { where }: Requirement,
  run: Replayed,
  { road, hills, demand }: FigureContext,
  band: number,
  course: HoldCourse,
): Recovery[] {
  const slow: { hill: RecoveredHill; time: number }[] = [];
  for (const hill of hills) {
    if (typeof where !== 'string' && !(hill.from < where.to && hill.to > where.from)) continue;
    const outcome = hill.outcomes.find(({ candidate }) => candidate === run.name);
    if (outcome?.affected && typeof outcome.recovery === 'number')
      slow.push({ hill, time: outcome.recovery });
  }
  slow.sort((a, b) => b.time - a.time);
  const rule = { demand, outOfRange: outOfRange(road, demand), course, band, recoveryBand: RECOVERED_BAND };
  return slow.slice(0, SLOWEST).map(({ hill }) => {
    const { series, whole } = speedsOver(run, hill, rule);
    const first = sampleAt(series, hill.from);
    const last = sampleAt(series, hill.until);
    return {
      at: hill.from,
      time: recoveryOf(series, first, last, {
        ...rule,
        settling: course.settling,
        gaveUp: course.gaveUp,
        whole,
      }).time,
    };
  });
}

function sampleSd(values: readonly number[]): number {
  const n = values.length;
  if (n < 2) return 0;
  const mean = values.reduce((total, x) => total + x, 0) / n;
  return Math.sqrt(values.reduce((total, x) => total + (x - mean) * (x - mean), 0) / (n - 1));
}

/** One sentence for the method section. */
export function spreadMethod({ roads, seed, rows }: FigureSpread): string {
  if (rows.length === 0) return 'No requirement asks for a figure, so no spread was computed.';
  if (roads === 0) return 'The grade has no uncertainty here, so the figures have no spread from it.';
  return `The spread of a figure is its sample standard deviation over ${roads} roads drawn from the grade's uncertainty (seed ${seed}), each candidate replayed over all of them; a limit within two of it of the measured figure is too close to call.`;
}
