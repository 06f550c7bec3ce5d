import type { CaseDocument } from '../case/read-case-file.ts';
import type { Output, Segmenting } from '../case/run-of.ts';
import { type Path, placeOf } from '../case/yaml-source.ts';
import type { LoopPlan } from '../loop/plan.ts';
import { InputError } from '../problems/input-error.ts';
import type { Replayed } from '../study/findings.ts';
import { toKm } from '../units/convert.ts';

/** Controller samples of all candidates together: at about a million a second, some minutes. */
const MOST_SAMPLES = 500_000_000;
/** Rows of a kind of table, of all candidates together: some 500 MB as tables, and half of what a string can hold as text. */
const MOST_ROWS = 2_000_000;

const sampleOf = ({ controller, lockedSample }: LoopPlan): number =>
  controller.kind === 'locked' ? lockedSample : controller.sample;

/** Time of a run at the lowest set speed [s]. */
function usualTime({ road, hold }: LoopPlan): number {
  const end = road.station[road.size - 1] ?? 0;
  if (road.along === 'time') return end;
  return end / hold.changes.reduce((least, { setSpeed }) => Math.min(least, setSpeed), hold.setSpeed);
}

/**
 * Refuses, before the work begins, what would run for hours or fill the memory.
 *
 * @param plans of the candidates, all over the same road
 * @param combinations of the matrix, each of which is run as long as the case itself
 * @throws InputError `run-too-long`, `series-too-long`, `too-many-segments`
 */
export function checkSize(
  document: CaseDocument,
  plans: readonly LoopPlan[],
  { series, bin }: Output,
  segmenting: Segmenting,
  combinations = 0,
): void {
  const [first] = plans;
  if (first === undefined) return;
  const length = first.road.distance[first.road.size - 1] ?? 0;
  const samples = plans.map((plan) => usualTime(plan) / sampleOf(plan));
  const all = samples.reduce((sum, count) => sum + count, 0);
  if (all > MOST_SAMPLES) {
    const longest = samples.indexOf(samples.reduce((most, count) => Math.max(most, count), 0));
    refuse(document, ['candidates', longest, 'sample_s'], {
      code: 'run-too-long',
      message: `the runs over ${toKm(length).toFixed(1)} km would take too many samples`,
      found: `about ${all.toPrecision(2)} samples of all candidates`,
      allowed: `at most ${MOST_SAMPLES}: a shorter road, fewer candidates, or a longer sample time`,
    });
  }
  if (all * (1 + combinations) > MOST_SAMPLES)
    refuse(document, ['matrix'], {
      code: 'run-too-long',
      message: `the runs of ${combinations} combinations over ${toKm(length).toFixed(1)} km would take too many samples`,
      found: `about ${(all * (1 + combinations)).toPrecision(2)} samples of all candidates`,
      allowed: `at most ${MOST_SAMPLES}: fewer combinations, a shorter road, fewer candidates, or a longer sample time`,
    });
  const bins = (plans.length * length) / bin;
  if (bins > MOST_ROWS) refuse(document, ['output', 'bin_m'], tooManyRows(bins, 'wider bins'));
  if (series === 'full') checkFullRows(document, all);
  const segments = segmenting.by === 'length' ? (plans.length * length) / segmenting.length : 0;
  if (segments > MOST_ROWS)
    refuse(document, ['segments', 'length_m'], {
      ...tooManyRows(segments, 'longer segments'),
      code: 'too-many-segments',
    });
}

/**
 * Refuses a series of every sample that came out too long: a run can take longer than its set speed would.
 *
 * @throws InputError `series-too-long`
 */
export function checkFullSeries(document: CaseDocument, replayed: readonly Replayed[]): void {
  checkFullRows(
    document,
    replayed.reduce((sum, { plan, result }) => sum + result.endTime / sampleOf(plan), 0),
  );
}

function checkFullRows(document: CaseDocument, rows: number): void {
  if (rows > MOST_ROWS)
    refuse(document, ['output', 'series'], tooManyRows(rows, 'series: bins, or a longer sample time'));
}

interface Fault {
  readonly code: string;
  readonly message: string;
  readonly found: string;
  readonly allowed: string;
}

const tooManyRows = (rows: number, instead: string): Fault => ({
  code: 'series-too-long',
  message: 'the tables would have too many rows',
  found: `about ${rows.toFixed(0)} rows of all candidates`,
  allowed: `at most ${MOST_ROWS}: a shorter road, fewer candidates, or ${instead}`,
});

function refuse(document: CaseDocument, path: Path, fault: Fault): never {
  throw new InputError({ ...fault, place: placeOf(document.source, path) });
}
