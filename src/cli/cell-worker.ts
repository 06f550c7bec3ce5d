// A thread that runs combinations of a matrix: it is given the work once, then one index after the other.
import { parentPort, workerData } from 'node:worker_threads';
import type { MatrixWork } from '../run/matrix-work.ts';
import { runCell } from '../run/run-cell.ts';

const work = workerData as MatrixWork;
parentPort?.on('message', (index: number) => {
  parentPort?.postMessage(runCell(work, index));
});
