// Invented matrices: what each combination measured is said by the test.
import type { Combination, MatrixList } from '../../src/case/matrix-of.ts';
import type { MatrixCell, MatrixResult } from '../../src/run/matrix-result.ts';
import type { RunResult } from '../../src/run/run-result.ts';
import type { RequirementFinding } from '../../src/study/findings.ts';

export interface MatrixWish {
  readonly loads?: readonly string[];
  readonly winds?: readonly string[];
  readonly directions?: readonly ('there' | 'back')[];
  readonly gears?: readonly number[];
  readonly speeds?: readonly number[];
  /** Margin of a row in a combination, as a share of its limit; `ended` at km 3; `unable` to be run. Default: met with 0.5. */
  readonly margin?: (cell: number, row: number) => number | 'ended' | 'unable';
}

/** The result with a matrix of the rows of its requirements. */
export function withFixtureMatrix(run: RunResult, wish: MatrixWish): RunResult {
  const { loads, winds, directions, gears, speeds } = wish;
  const combinations = (loads ?? ['own']).flatMap((load, l) =>
    (winds ?? ['still air']).flatMap((wind, w) =>
      (directions ?? (['there'] as const)).flatMap((direction) =>
        (gears ?? [null]).flatMap((gear) =>
          (speeds ?? [60]).map(
            (setSpeedKmh): Combination => ({
              load: { label: load, riderKg: 75, payloadKg: 10 * l, pillionKg: 0 },
              wind: { label: wind, speed: w, fromDeg: w === 0 ? null : 90, file: null },
              direction,
              gear,
              setSpeedKmh,
            }),
          ),
        ),
      ),
    ),
  );
  const lists = [
    ...(loads ? ['loads' as const] : []),
    ...(winds ? ['winds' as const] : []),
    ...(directions ? ['directions' as const] : []),
    ...(gears ? ['gears' as const] : []),
    ...(speeds ? ['set_speeds_kmh' as const] : []),
  ] satisfies MatrixList[];
  const matrix: MatrixResult = {
    lists,
    direction: 'there',
    cells: combinations.map((combination, i) => cellOf(run, combination, i, wish)),
  };
  return { ...run, matrix };
}

function cellOf(run: RunResult, combination: Combination, i: number, { margin }: MatrixWish): MatrixCell {
  const told = run.requirements.map((_, row) => margin?.(i, row) ?? 0.5);
  const unable = told.includes('unable');
  const findings = run.requirements.map((finding, row) => findingOf(finding, told[row]!, row));
  return {
    number: i + 1,
    combination,
    own: i === 0,
    reason: unable ? 'the engine would turn beyond its limit' : null,
    findings,
    pictures: findings.map(({ worstAt }) => (worstAt === null ? null : pictureAt(worstAt, i))),
    runs: unable
      ? []
      : run.candidates.map(({ name }) => ({
          candidate: name,
          status: told.includes('ended') ? 'stalled' : 'completed',
          endDistance: told.includes('ended') ? 3000 + i : 28_000,
          figures: { rms_error_kmh: 0.5 },
        })),
  };
}

function findingOf(
  { requirement, candidate }: RequirementFinding,
  told: number | 'ended' | 'unable',
  row: number,
): RequirementFinding {
  const base = { requirement, candidate, spread: 0, words: `${candidate}: told by the test.` };
  if (told === 'unable') {
    const none = { none: 'the engine would turn beyond its limit' };
    return { ...base, measured: none, margin: none, worstAt: null, verdict: 'not judged' };
  }
  if (told === 'ended')
    return {
      ...base,
      measured: 1,
      margin: { none: 'the run ended at km 3.00 (stalled)' },
      worstAt: 2500,
      verdict: 'not met',
    };
  const limit = requirement.atLeast ?? requirement.atMost ?? 0;
  const margin = told * Math.abs(limit);
  const measured = requirement.atLeast === null ? limit - margin : limit + margin;
  return { ...base, measured, margin, worstAt: 2000 + 100 * row, verdict: margin < 0 ? 'not met' : 'met' };
}

/** A dip of the speed, deeper from one combination to the next. */
function pictureAt(at: number, i: number): NonNullable<MatrixCell['pictures'][number]> {
  const distance = Float64Array.from({ length: 120 }, (_, k) => at - 595 + 10 * k);
  const depth = 1 + 0.02 * i;
  const mean = distance.map((x) => -depth * Math.max(0, 1 - Math.abs(x - at) / 300));
  return { at, distance, low: mean.map((e) => e - 0.1), mean, high: mean.map((e) => e + 0.1) };
}
