import type { Units } from '../../report/quantity.ts';
import type { Parcel, Question, Reply, StudyMessage } from '../worker/messages.ts';
import type { Study } from './study.ts';

/** The hand rests when nothing has come for so long [ms]. */
const REST = 300;
/** A fresh worker has to be started and warmed up: a run that ends sooner than this is waited for [ms]. */
const RESTART = 3000;

export interface Listener {
  readonly onReply: (reply: Reply) => void;
  /** The whole run was stopped, or its worker failed; `words` says why where there is something to say. */
  readonly onStopped: (words: string | null) => void;
}

/** A worker and which contents it has been sent. */
interface Thread {
  readonly worker: Worker;
  readonly sent: Set<number>;
}

/** What the whole worker is doing: since when, and how much of it is done. */
interface Work {
  readonly number: number;
  readonly since: number;
  share: number;
}

/**
 * Two threads of the core: one answers at once while a hand moves, the other works out the whole when it rests. Of
 * whole runs only the newest is worth anything: an older one at work is waited for if it ends soon, else ended.
 */
export class Answers {
  private quick: Thread;
  private whole: Thread;
  private work: Work | null = null;
  private waiting: (() => void) | null = null;
  private timer = 0;
  private number = 0;
  private readonly url: string;
  private readonly listener: Listener;

  /** @param code of the worker */
  constructor(code: string, listener: Listener) {
    this.url = URL.createObjectURL(new Blob([code], { type: 'text/javascript' }));
    this.listener = listener;
    this.quick = this.thread();
    this.whole = this.thread();
  }

  /** @param road whether more than controllers changed; @param moving part of a movement that goes on */
  ask(study: Study, units: Units, road: boolean, moving: boolean): void {
    const number = ++this.number;
    post(this.quick, { kind: 'quick', number, study: told(study, this.quick), units, road, moving });
    this.waiting = null;
    clearTimeout(this.timer);
    this.timer = setTimeout(() => this.askWhole(number, study, units), REST);
  }

  /** Ends the whole run that is at work; the quick answers go on. */
  stop(): void {
    clearTimeout(this.timer);
    this.waiting = null;
    if (this.work !== null) this.restart();
    this.listener.onStopped(null);
  }

  /** The matrix of the last whole run. */
  matrix(): void {
    this.begin({ kind: 'matrix', number: this.number });
  }

  takeOut(parcel: Parcel): void {
    this.begin({ kind: 'take', number: this.number, parcel });
  }

  private askWhole(number: number, study: Study, units: Units): void {
    const start = (): void => this.begin({ kind: 'whole', number, study: told(study, this.whole), units });
    if (this.work === null) {
      start();
      return;
    }
    const { since, share } = this.work;
    const left = share === 0 ? Number.POSITIVE_INFINITY : ((performance.now() - since) * (1 - share)) / share;
    if (left > RESTART) {
      this.restart();
      start();
    } else this.waiting = start;
  }

  private begin(question: Question): void {
    this.work = { number: question.number, since: performance.now(), share: 0 };
    post(this.whole, question);
  }

  private restart(): void {
    this.whole.worker.terminate();
    this.whole = this.thread();
    this.work = null;
  }

  private thread(): Thread {
    const worker = new Worker(this.url);
    const thread: Thread = { worker, sent: new Set() };
    worker.onmessage = ({ data }: MessageEvent<Reply>) => this.hear(thread, data);
    worker.onerror = (event) => {
      event.preventDefault();
      this.listener.onStopped(event.message || 'a thread could not be started');
    };
    return thread;
  }

  private hear(thread: Thread, reply: Reply): void {
    if (thread === this.whole) {
      if (reply.kind === 'progress') {
        if (this.work !== null) this.work.share = reply.share;
      } else {
        this.work = null;
        const next = this.waiting;
        this.waiting = null;
        next?.();
      }
    }
    // Quick answers of a movement come late by nature: any that comes is newer than what is shown.
    if (reply.number === this.number || reply.kind === 'quick') this.listener.onReply(reply);
  }
}

const post = ({ worker }: Thread, question: Question): void => worker.postMessage(question);

/** A study as a thread has to be told: what it has not been sent yet goes with it. */
function told({ file, files }: Study, { sent }: Thread): StudyMessage {
  const fresh = files.filter(({ content }) => !sent.has(content));
  for (const { content } of fresh) sent.add(content);
  return {
    file,
    files: files.map(({ name, content }) => ({ name, content })),
    fresh: fresh.map(({ content, bytes }) => ({ content, bytes })),
  };
}
