import '../../case/jitless.ts';
import { startWorker } from '../worker/start-worker.ts';
import { startPage } from './start-page.ts';

// One script for the page and for its threads: most of what they need is the same.
if (typeof document === 'undefined') startWorker();
else startPage(document.currentScript?.textContent ?? '');
