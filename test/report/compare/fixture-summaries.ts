import type { Series, SeriesPair } from '../../../src/report/compare/read-series.ts';
import {
  type ResultSummary,
  readSummary,
  type SummaryHillRow,
  type SummaryRequirement,
} from '../../../src/report/compare/read-summary.ts';

interface SummaryWish {
  readonly inputs?: readonly (readonly [name: string, digit: string])[];
  readonly candidates?: Readonly<Record<string, Readonly<Record<string, unknown>>>>;
  readonly requirements?: readonly Partial<SummaryRequirement>[];
  readonly hills?: readonly Partial<SummaryHillRow>[];
  readonly given?: readonly (readonly [key: string, value: string])[];
  readonly defaults?: readonly (readonly [key: string, value: string])[];
  readonly lengthM?: number;
  readonly bandKmh?: number;
  readonly title?: string;
  readonly matrix?: ResultSummary['matrix'];
}

/** A summary.json as a run would write it, with what is wished for, read back. */
export function summaryWith(wish: SummaryWish = {}): ResultSummary {
  const values = (pairs: readonly (readonly [string, string])[]) =>
    pairs.map(([key, value]) => ({ key, value, of: 'case' }));
  const candidates = Object.entries(wish.candidates ?? { 'pi-a': {} }).map(([name, more]) => ({
    name,
    kind: 'pi',
    status: 'completed',
    end_m: wish.lengthM ?? 10_000,
    gains: null,
    ...more,
  }));
  return readSummary(
    JSON.stringify({
      schema_version: '1.1',
      tool: { name: 'ridgehold', version: '0.1.0' },
      status: 'ok',
      title: wish.title ?? 'A road',
      case: 'a-road',
      inputs: (wish.inputs ?? [['a.yaml', '0']]).map(([name, digit]) => ({
        name,
        sha256: digit.repeat(64),
        bytes: 1,
      })),
      overrides: [],
      scheme: 'exact',
      route: { name: 'A road', length_m: wish.lengthM ?? 10_000, climb_m: 100, holdable_pct: 90 },
      vehicle: { name: 'A bike', mass_kg: 200 },
      hold: { set_speed_kmh: 60, band_kmh: wish.bandKmh ?? 2 },
      candidates,
      hills: (wish.hills ?? []).map((row) => ({
        candidate: 'pi-a',
        kind: 'climb',
        mean_grade_pct: 4,
        speed_change_kmh: 0,
        time_at_limit_s: 0,
        recovery_s: 0,
        cause: null,
        ...row,
      })),
      requirements: (wish.requirements ?? []).map((one) => ({
        id: 'R-1',
        figure: 'worst_high_kmh',
        candidate: 'pi-a',
        measured: 3,
        limit: 4,
        sense: 'at most',
        where: 'all',
        margin: 1,
        worst_at_km: 1,
        verdict: 'met',
        words: '',
        ...one,
      })),
      defaults: values(wish.defaults ?? []),
      matrix: wish.matrix,
      given: values(wish.given ?? []),
      files: candidates.map(({ name }) => `series-${name}.csv`),
    }),
    'summary.json',
  );
}

/** A series with the same error all the way [m/s], in bins of 100 m. */
export function flatSeries(lengthM = 10_000, error = 0): Series {
  const size = Math.round(lengthM / 100);
  const at = Float64Array.from({ length: size }, (_, i) => 50 + 100 * i);
  const errors = new Float64Array(size).fill(error);
  const throttle = new Float64Array(size).fill(30);
  return {
    error: { size, at, low: errors, mean: errors, high: errors },
    throttle: { size, at, low: throttle, mean: throttle, high: throttle },
  };
}

export const flatPairs = (...names: string[]): ReadonlyMap<string, SeriesPair> =>
  new Map(names.map((name) => [name, { before: flatSeries(), after: flatSeries() }]));
