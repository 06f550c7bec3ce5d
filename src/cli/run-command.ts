import { join } from 'node:path';
import { InputError } from '../problems/input-error.ts';
import { chartFiles } from '../report/chart-files.ts';
import { dataFiles } from '../report/data/data-files.ts';
import { summaryJson } from '../report/data/summary.ts';
import { junitXml } from '../report/junit-xml.ts';
import { answerOf } from '../report/model/answer.ts';
import { viewOf } from '../report/model/view.ts';
import { renderReport } from '../report/render-report.ts';
import { runCase } from '../run/run-case.ts';
import type { RunResult } from '../run/run-result.ts';
import { readerOf } from './case-reader.ts';
import type { Invocation } from './commands.ts';
import { defaultFolder } from './default-folder.ts';
import { DONE, NOT_MET, NUMERICAL_FAILURE } from './exit-status.ts';
import { checkJunitFile } from './junit-file.ts';
import { ProgressBar } from './progress-bar.ts';
import { requirementLines } from './requirement-lines.ts';
import { checkFolder, writeResult } from './result-folder.ts';
import { say, tellWarnings } from './tell.ts';
import { writeText } from './write-text.ts';

/** `ridgehold run CASE`: replays the case, writes the result whole, tells people the answer. */
export function runCommand({ operands: [path], values }: Invocation<'run'>): number {
  refuseTrack(path);
  const folder = values.out ?? defaultFolder(path);
  checkFolder(folder, ['report.html', 'summary.json']);
  if (values.junit !== undefined) checkJunitFile(values.junit);
  const reader = readerOf(path);
  const bar = new ProgressBar(process.stderr);
  const units = values.units ?? 'kmh';
  let run: RunResult;
  try {
    run = reader.telling(() =>
      runCase({
        file: reader.file,
        read: reader.read,
        overrides: values.set,
        ...(values.quiet ? {} : { onProgress: bar.show }),
      }),
    );
  } finally {
    bar.clear();
  }
  const files = [
    { name: 'report.html', text: renderReport(run, { units }) },
    ...dataFiles(run),
    ...chartFiles(run, { units }).map(({ name, svg }) => ({ name: `charts/${name}`, text: svg })),
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
    tellWarnings(run.warnings, reader.seen);
    say(`The report is at ${join(folder, 'report.html')}`);
  }
  if (values.json) process.stdout.write(summary);
  return statusOf(run);
}

function refuseTrack(path: string): void {
  if (!/\.(?:gpx|csv|geojson)$/i.test(path)) return;
  throw new InputError({
    code: 'not-a-case',
    place: { file: path },
    message: `is a track, not a case; a track alone goes to: ridgehold road ${path}`,
    allowed: 'a case in YAML or JSON that names the track',
  });
}

function statusOf(run: RunResult): number {
  if (run.candidates.some(({ result }) => result.status === 'non_finite')) return NUMERICAL_FAILURE;
  return run.status === 'requirement_not_met' ? NOT_MET : DONE;
}
