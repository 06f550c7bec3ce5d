import { join } from 'node:path';
import { marginsCsv } from '../report/data/margin-table.ts';
import { proposalsCsv } from '../report/tune/proposal-table.ts';
import { renderTune } from '../report/tune/render-tune.ts';
import { tuneAnswer } from '../report/tune/tune-answer.ts';
import { tuneChartFiles } from '../report/tune/tune-chart-files.ts';
import { tuneJson } from '../report/tune/tune-json.ts';
import { tuneLines } from '../report/tune/tune-lines.ts';
import { tuneView } from '../report/tune/tune-view.ts';
import { type Addition, addProposals, checkAdditions, readAddition } from '../run/add-proposals.ts';
import { tuneCase } from '../run/tune-case.ts';
import type { TuneResult } from '../run/tune-result.ts';
import { type CaseReader, readerOf } from './case-reader.ts';
import { type EditedFile, fileToEdit } from './case-text.ts';
import type { Invocation } from './commands.ts';
import { defaultFolder } from './default-folder.ts';
import { DONE, NOT_MET, NUMERICAL_FAILURE } from './exit-status.ts';
import { pictureFiles } from './picture-files.ts';
import { pngRenderer, pngWidthOf } from './png-renderer.ts';
import { ProgressBar } from './progress-bar.ts';
import { refuseTrack } from './refuse-track.ts';
import { checkFolder, type ResultFile, writeResult } from './result-folder.ts';
import { say, tellWarnings } from './tell.ts';

const PAGE = 'tune.html';
const MARK = 'tune.json';

/** `ridgehold tune CASE`: operating points, margins and gains; with --add, gains go into the case. */
export async function tuneCommand({ operands: [path], values }: Invocation<'tune'>): Promise<number> {
  refuseTrack(path);
  const additions = values.add.map(readAddition);
  const width = pngWidthOf(values);
  const folder = values.out ?? `${defaultFolder(path)}-tune`;
  checkFolder(folder, [PAGE, MARK]);
  const draw = width === null ? null : await pngRenderer(width);
  const reader = readerOf(path);
  const target = additions.length === 0 ? null : fileToEdit(path);
  if (target !== null) reader.telling(() => checkAdditions(target.text, reader.file, additions, values.set));
  const result = tuned(reader, values.set, values.quiet);
  const edited = target === null ? null : reader.telling(() => added(target, reader, result, additions));
  const units = values.units ?? 'kmh';
  const files: readonly ResultFile[] = [
    { name: PAGE, text: renderTune(result, { units }) },
    { name: 'margins.csv', text: marginsCsv(result.sheet) },
    { name: 'proposals.csv', text: proposalsCsv(result) },
    ...pictureFiles(tuneChartFiles(result, { units }), draw),
  ];
  const mark = tuneJson(
    result,
    files.map(({ name }) => name),
  );
  writeResult(folder, [...files, { name: MARK, text: mark }]);
  if (target !== null && edited !== null) target.write(edited);
  if (!values.quiet) {
    const view = tuneView(result, units);
    say(tuneAnswer(view).sentence);
    for (const line of tuneLines(view)) say(line);
    tellWarnings(result.warnings, reader.seen);
    if (edited !== null)
      say(
        `${additions.length === 1 ? 'A candidate was' : `${additions.length} candidates were`} added to ${path}`,
      );
    say(`Gains and margins are at ${join(folder, PAGE)}`);
  }
  if (values.json) process.stdout.write(mark);
  return statusOf(result);
}

function tuned(reader: CaseReader, overrides: readonly string[], quiet: boolean): TuneResult {
  const bar = new ProgressBar(process.stderr);
  try {
    const onProgress = quiet ? () => {} : bar.show;
    return reader.telling(() => tuneCase({ file: reader.file, read: reader.read, overrides, onProgress }));
  } finally {
    bar.clear();
  }
}

const added = (
  { text }: EditedFile,
  { file }: CaseReader,
  result: TuneResult,
  additions: readonly Addition[],
): string => addProposals(text, file, result, additions);

function statusOf({ status, tuned }: TuneResult): number {
  if (tuned.some(({ runStatus }) => runStatus === 'non_finite')) return NUMERICAL_FAILURE;
  return status === 'ok' ? DONE : NOT_MET;
}
