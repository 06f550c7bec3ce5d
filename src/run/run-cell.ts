import type { LoopPlan } from '../loop/plan.ts';
import type { BinRecord } from '../loop/result.ts';
import { runLoop } from '../loop/run-loop.ts';
import { InputError } from '../problems/input-error.ts';
import { askedHold } from '../study/asked-hold.ts';
import { demandOf } from '../study/demand.ts';
import { askDetail, figureRow } from '../study/figure-table.ts';
import type { Replayed, Requirement, RequirementFinding } from '../study/findings.ts';
import { meanErrorIn } from '../study/held-time.ts';
import { judge } from '../study/judge.ts';
import { endedEarly, measureFigure } from '../study/measure-figure.ts';
import { slowestRecoveries } from '../study/slowest-recoveries.ts';
import { loopPlans, type Setting } from './loop-plans.ts';
import type { CellOutcome, CellPicture, CellRun } from './matrix-result.ts';
import type { CellPlan, CellRide, MatrixWork } from './matrix-work.ts';

/** A picture reaches this far to both sides of its place [m]. */
const REACH = 600;
/** Figures of every candidate, whether a requirement asks for them or not. */
const KEPT = ['within_band_pct', 'rms_error_kmh', 'worst_low_kmh', 'worst_high_kmh'];

/**
 * One combination of a matrix: every candidate replayed over its road, every requirement judged. Depends on nothing but
 * its arguments, so that combinations can be run anywhere and in any order.
 *
 * Left out, beside the run of the case itself: hills with their causes and remedies, limit cycles, segments, and a
 * spread of its own: a figure near its limit is judged by the spread that it has in the run of the case.
 *
 * @param index of the cell
 */
export function runCell(work: MatrixWork, index: number): CellOutcome {
  const cell = work.cells[index];
  if (cell === undefined) throw new RangeError(`there is no combination ${index}`);
  const { ride, reason } = cell;
  if (ride === null) return notRun(work, cell, reason ?? '');
  try {
    return ridden(work, cell, ride);
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    return notRun(work, cell, error.problems.map(({ message }) => message).join('; '));
  }
}

/** The plans of all candidates in one combination; none where it cannot be run. */
export function plansOfCell(work: MatrixWork, index: number): readonly LoopPlan[] {
  const ride = work.cells[index]?.ride;
  return ride ? loopPlans(settingOf(work, ride), work.candidates) : [];
}

function settingOf({ roads, vehicles, scheme, bands, bin }: MatrixWork, ride: CellRide): Setting {
  const { road: roadIndex, vehicle: vehicleIndex, ...ridden } = ride;
  const road = roads[roadIndex];
  const vehicle = vehicles[vehicleIndex];
  if (road === undefined || vehicle === undefined) throw new RangeError('a ride without road or vehicle');
  return { road, vehicle, ...ridden, scheme, bands, bin };
}

function ridden(work: MatrixWork, { requirements }: CellPlan, ride: CellRide): CellOutcome {
  const { candidates, bands, spread } = work;
  const setting = settingOf(work, ride);
  const { road, vehicle, hold, rider } = setting;
  const detail = askDetail(requirements.map(({ figure }) => figure));
  const replayed = loopPlans(setting, candidates).map(
    (plan, i): Replayed => ({
      name: candidates[i]?.name ?? '',
      plan,
      result: runLoop({ ...plan, detail }),
    }),
  );
  const demand = demandOf(road, vehicle, askedHold(hold, rider, setting.supervisor ?? {}, vehicle), rider);
  const recovers = requirements.some(({ figure }) => figure === 'recovery_s');
  const band = bands[0] ?? 0;
  const hills = recovers ? slowestRecoveries(road, demand, replayed, band) : [];
  const context = { road, demand, hills };
  const findings = judge(requirements, replayed, context, spread);
  const runs = replayed.map((candidate): CellRun => {
    const { status, endDistance } = candidate.result;
    const figures = KEPT.flatMap((name) => {
      const row = figureRow(name);
      return row === undefined ? [] : [[name, measureFigure(row, candidate, context, 'all', band).value]];
    });
    return { candidate: candidate.name, status, endDistance, figures: Object.fromEntries(figures) };
  });
  const pictures = findings.map(({ requirement, candidate, worstAt }) => {
    const run = replayed.find(({ name }) => name === candidate);
    if (run === undefined) return null;
    const { bins, endDistance } = run.result;
    return pictureOf(bins, endedEarly(run, requirement.where) ? endDistance : worstAt);
  });
  return { reason: null, findings, pictures, runs };
}

/** Nothing was run: nothing is judged, and says why. */
function notRun({ candidates }: MatrixWork, { requirements }: CellPlan, reason: string): CellOutcome {
  const none = { none: reason };
  const findings = requirements.flatMap((requirement) =>
    askedOf(requirement, candidates).map(
      (candidate): RequirementFinding => ({
        requirement,
        candidate,
        measured: none,
        margin: none,
        spread: 0,
        worstAt: null,
        verdict: 'not judged',
        words: `${candidate}: not judged, ${reason}.`,
      }),
    ),
  );
  return { reason, findings, pictures: findings.map(() => null), runs: [] };
}

/** Names of the candidates that a requirement speaks of, as `judge` takes them. */
function askedOf(requirement: Requirement, candidates: MatrixWork['candidates']): string[] {
  return candidates
    .filter(({ name, controller }) =>
      requirement.candidates === null ? controller.kind !== 'locked' : requirement.candidates.includes(name),
    )
    .map(({ name }) => name);
}

/** The record around a place; around the greatest error where there is none. */
function pictureOf(bins: BinRecord, place: number | null): CellPicture | null {
  if (bins.size === 0) return null;
  const at = place ?? greatestErrorAt(bins);
  const rows: number[] = [];
  for (let i = 0; i < bins.size; i++)
    if (bins.edge[i + 1]! > at - REACH && bins.edge[i]! < at + REACH) rows.push(i);
  const column = (of: (i: number) => number): Float64Array => Float64Array.from(rows, of);
  return {
    at,
    distance: column((i) => (bins.edge[i]! + bins.edge[i + 1]!) / 2),
    low: column((i) => bins.errorMin[i]!),
    mean: column((i) => meanErrorIn(bins, i) ?? Number.NaN),
    high: column((i) => bins.errorMax[i]!),
  };
}

function greatestErrorAt(bins: BinRecord): number {
  let [at, greatest] = [0, -1];
  for (let i = 0; i < bins.size; i++) {
    const error = Math.max(bins.errorMax[i]!, -bins.errorMin[i]!);
    if (error > greatest) [at, greatest] = [(bins.edge[i]! + bins.edge[i + 1]!) / 2, error];
  }
  return at;
}
