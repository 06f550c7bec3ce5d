import { join } from 'node:path';
import { InputError } from '../problems/input-error.ts';
import { chartFiles } from '../report/chart-files.ts';
import { dataFiles } from '../report/data/data-files.ts';
import { summaryJson } from '../report/data/summary.ts';
import { junitXml } from '../report/junit-xml.ts';
import { answerOf } from '../report/model/answer.ts';
import { inReaderUnit } from '../report/model/reader-unit.ts';
import { viewOf } from '../report/model/view.ts';
import { SPEED_UNITS } from '../report/quantity.ts';
import { renderReport } from '../report/render-report.ts';
import { runWithoutMatrix } from '../run/run-case.ts';
import type { RunResult } from '../run/run-result.ts';
import { matrixWords, shareOfMatrix, withMatrix } from '../run/with-matrix.ts';
import { readerOf } from './case-reader.ts';
import type { Invocation } from './commands.ts';
import { defaultFolder } from './default-folder.ts';
import { DONE, NOT_MET, NUMERICAL_FAILURE } from './exit-status.ts';
import { checkJunitFile } from './junit-file.ts';
import { matrixLines } from './matrix-lines.ts';
import { pictureFiles } from './picture-files.ts';
import { pngRenderer, pngWidthOf } from './png-renderer.ts';
import { ProgressBar } from './progress-bar.ts';
import { refuseTrack } from './refuse-track.ts';
import { requirementLines } from './requirement-lines.ts';
import { checkFolder, type ResultFile, writeResult } from './result-folder.ts';
import { runCells } from './run-cells.ts';
import { say, tellWarnings } from './tell.ts';
import { writeText } from './write-text.ts';

const MOST_THREADS = 256;

/** `ridgehold run CASE`: replays the case, writes the result whole, tells people the answer. */
export async function runCommand(
  { operands: [path], values }: Invocation<'run'>,
  program: string,
): Promise<number> {
  refuseTrack(path);
  const threads = threadsOf(values.threads);
  const width = pngWidthOf(values);
  const folder = values.out ?? defaultFolder(path);
  checkFolder(folder, ['report.html', 'summary.json']);
  if (values.junit !== undefined) checkJunitFile(values.junit);
  const draw = width === null ? null : await pngRenderer(width);
  const reader = readerOf(path);
  const bar = new ProgressBar(process.stderr);
  const units = values.units ?? 'kmh';
  let run: RunResult;
  try {
    const onProgress = values.quiet ? () => {} : bar.show;
    const { run: alone, matrix } = reader.telling(() =>
      runWithoutMatrix({ file: reader.file, read: reader.read, overrides: values.set, onProgress }),
    );
    run = alone;
    if (matrix !== null) {
      const onDone = (done: number): void =>
        onProgress(shareOfMatrix(matrix, done), matrixWords(matrix, done));
      run = withMatrix(alone, matrix, await runCells(matrix, { program, threads, onDone }));
    }
  } finally {
    bar.clear();
  }
  const files: ResultFile[] = [
    { name: 'report.html', text: renderReport(run, { units }) },
    ...dataFiles(run),
    ...pictureFiles(chartFiles(run, { units }), draw),
  ];
  const summary = summaryJson(
    run,
    files.map(({ name }) => name),
  );
  writeResult(folder, [...files, { name: 'summary.json', text: summary }]);
  if (values.junit !== undefined) writeText(values.junit, junitXml(run, units));
  if (!values.quiet) {
    say(answerOf(viewOf(run, units)).sentence);
    for (const line of requirementLines(run.requirements, units)) say(line);
    if (run.matrix !== null) for (const line of matrixLines(run.matrix, units)) say(line);
    tellWarnings(
      run.warnings.map((one) => ({ ...one, message: inReaderUnit(one.message, SPEED_UNITS[units]) })),
      reader.seen,
    );
    say(`The report is at ${join(folder, 'report.html')}`);
  }
  if (values.json) process.stdout.write(summary);
  return statusOf(run);
}

/** null: not said. */
function threadsOf(text: string | undefined): number | null {
  if (text === undefined) return null;
  const count = /^\d{1,3}$/.test(text) ? Number(text) : 0;
  if (count < 1 || count > MOST_THREADS)
    throw new InputError({
      code: 'option-value',
      place: {},
      message: `--threads cannot be '${text}'`,
      allowed: `a whole number from 1 to ${MOST_THREADS}`,
    });
  return count;
}

function statusOf(run: RunResult): number {
  if (run.candidates.some(({ result }) => result.status === 'non_finite')) return NUMERICAL_FAILURE;
  return run.status === 'requirement_not_met' ? NOT_MET : DONE;
}
