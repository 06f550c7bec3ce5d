import { chartFiles } from '../../report/chart-files.ts';
import { dataFiles, type TextFile } from '../../report/data/data-files.ts';
import { summaryJson } from '../../report/data/summary.ts';
import { answerOf } from '../../report/model/answer.ts';
import { viewOf } from '../../report/model/view.ts';
import type { Units } from '../../report/quantity.ts';
import { renderReport, reportMemo, reportSections } from '../../report/render-report.ts';
import type { Reader } from '../../run/input-log.ts';
import { type CaseRun, runWithoutMatrix } from '../../run/run-case.ts';
import { runCell } from '../../run/run-cell.ts';
import { matrixWords, shareOfMatrix, withMatrix } from '../../run/with-matrix.ts';
import type { Parcel, Reply } from './messages.ts';
import { sectionTexts } from './section-texts.ts';

type Progress = (share: number, words: string) => void;
type WholeReply = Omit<Extract<Reply, { kind: 'whole' }>, 'kind' | 'number'>;

/** The whole run of a case, kept for what is asked of it later: its matrix, and files. */
export class WholeAnswer {
  private last: (CaseRun & { readonly units: Units }) | null = null;

  run(file: string, read: Reader, units: Units, onProgress: Progress): WholeReply {
    this.last = null;
    this.last = { ...runWithoutMatrix({ file, read, onProgress }), units };
    return this.told();
  }

  /** The last run with its matrix. */
  matrix(onProgress: Progress): WholeReply {
    this.completeMatrix(onProgress);
    return this.told();
  }

  take(parcel: Parcel, onProgress: Progress): readonly TextFile[] {
    this.completeMatrix(onProgress);
    const { run, units } = this.kept();
    switch (parcel) {
      case 'report':
        return [{ name: 'report.html', text: renderReport(run, { units }) }];
      case 'charts':
        return chartFiles(run, { units }).map(({ name, svg }) => ({ name, text: svg }));
      case 'data': {
        const files = dataFiles(run);
        const charts = chartFiles(run, { units }).map(({ name }) => `charts/${name}`);
        // The list that the command line writes, so that the bytes are the same.
        const names = ['report.html', ...files.map(({ name }) => name), ...charts];
        return [{ name: 'summary.json', text: summaryJson(run, names) }, ...files];
      }
    }
  }

  private kept(): NonNullable<typeof this.last> {
    if (this.last === null) throw new RangeError('nothing was run yet');
    return this.last;
  }

  private completeMatrix(onProgress: Progress): void {
    const { run, matrix, units } = this.kept();
    if (matrix === null) return;
    const outcomes = matrix.cells.map((_, i) => {
      onProgress(shareOfMatrix(matrix, i), matrixWords(matrix, i));
      return runCell(matrix, i);
    });
    this.last = { run: withMatrix(run, matrix, outcomes), matrix: null, units };
  }

  private told(): WholeReply {
    const { run, matrix, units } = this.kept();
    const view = viewOf(run, units);
    return {
      head: { title: run.title, memo: reportMemo(view) },
      sentence: answerOf(view).sentence,
      sections: sectionTexts(reportSections(view)),
      cells: matrix?.cells.length ?? 0,
    };
  }
}
