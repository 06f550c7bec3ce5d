import { compareResults } from '../../../src/report/compare/compare-results.ts';
import { readSeries, type SeriesPair } from '../../../src/report/compare/read-series.ts';
import { readSummary, seriesName } from '../../../src/report/compare/read-summary.ts';
import { type ComparisonOptions, renderComparison } from '../../../src/report/compare/render-comparison.ts';
import { dataFiles } from '../../../src/report/data/data-files.ts';
import { summaryJson } from '../../../src/report/data/summary.ts';
import type { RunResult } from '../../../src/run/run-result.ts';

/** What two runs left in their folders, read and compared, as a page. */
export function pageOf(
  before: RunResult,
  after: RunResult,
  units: ComparisonOptions['units'] = 'kmh',
): string {
  const read = (run: RunResult) => {
    const files = dataFiles(run);
    const summary = readSummary(
      summaryJson(
        { ...run, schemaVersion: '1.1' },
        files.map(({ name }) => name),
      ),
      'summary.json',
    );
    const series = (name: string) =>
      readSeries(files.find((file) => file.name === seriesName(name))!.text, seriesName(name));
    return { summary, series };
  };
  const [a, b] = [read(before), read(after)];
  const names = b.summary.candidates
    .map(({ name }) => name)
    .filter((name) => a.summary.candidates.some((one) => one.name === name));
  const series = new Map<string, SeriesPair>(
    names.map((name) => [name, { before: a.series(name), after: b.series(name) }]),
  );
  return renderComparison(compareResults(a.summary, b.summary, series), series, {
    units,
    folders: { before: 'before', after: 'after' },
  });
}
