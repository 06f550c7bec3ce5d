import { availableParallelism } from 'node:os';
import { Worker } from 'node:worker_threads';
import type { CellOutcome } from '../run/matrix-result.ts';
import type { MatrixWork } from '../run/matrix-work.ts';
import { runCell } from '../run/run-cell.ts';

export interface CellThreads {
  /** Where the program stands: the code of its threads stands beside it. */
  readonly program: string;
  /** Threads; null: as many as there are cores. Never more than combinations. */
  readonly threads: number | null;
  /** Told how many are done whenever one is. */
  readonly onDone: (done: number) => void;
}

/**
 * Runs every combination of a matrix, side by side where there are cores for it. Each depends on its own plain data
 * alone, so that the outcomes are the same bit for bit whatever the number of threads.
 *
 * @returns outcomes in the order of the cells
 */
export async function runCells(work: MatrixWork, options: CellThreads): Promise<readonly CellOutcome[]> {
  const { program, threads, onDone } = options;
  const count = work.cells.length;
  const most = Math.min(threads ?? availableParallelism(), count);
  if (most <= 1)
    return work.cells.map((_, i) => {
      const outcome = runCell(work, i);
      onDone(i + 1);
      return outcome;
    });
  const outcomes: CellOutcome[] = new Array(count);
  let [next, done] = [0, 0];
  /** A thread until there is nothing left to do. */
  const thread = (worker: Worker): Promise<void> =>
    new Promise((resolve, reject) => {
      let index = -1;
      const take = (): void => {
        index = next++;
        if (index < count) worker.postMessage(index);
        else resolve();
      };
      worker.on('message', (outcome: CellOutcome) => {
        outcomes[index] = outcome;
        onDone(++done);
        take();
      });
      worker.on('error', reject);
      worker.on('exit', (code) => reject(new Error(`a thread ended by itself with status ${code}`)));
      take();
    });
  const file = new URL('./cell-worker.js', program);
  const workers = Array.from({ length: most }, () => new Worker(file, { workerData: work }));
  try {
    await Promise.all(workers.map(thread));
  } finally {
    await Promise.all(workers.map((worker) => worker.terminate()));
  }
  return outcomes;
}
