import type { Question, Reply } from './messages.ts';
import { QuickAnswers } from './quick-answer.ts';
import { replyTo } from './reply-to.ts';
import { StudyFiles } from './study-files.ts';
import { WholeAnswer } from './whole-answer.ts';

/** The core in a thread of its own. The page has two of them: one for quick answers, one for whole ones. */
export function startWorker(): void {
  const files = new StudyFiles();
  const send = (reply: Reply): void => self.postMessage(reply);
  const quick = new QuickAnswers(files, send, nextTask);
  const whole = new WholeAnswer();

  async function answer(question: Exclude<Question, { kind: 'quick' }>): Promise<Reply> {
    const { number } = question;
    const onProgress = (share: number, words: string): void =>
      send({ kind: 'progress', number, share, words });
    switch (question.kind) {
      case 'whole': {
        const { study, units } = question;
        const read = files.readerOf(study);
        return { kind: 'whole', number, ...whole.run(study.file, read, units, onProgress) };
      }
      case 'matrix':
        return { kind: 'whole', number, ...whole.matrix(onProgress) };
      case 'take': {
        const { parcel } = question;
        return { kind: 'taken', number, parcel, files: whole.take(parcel, onProgress) };
      }
    }
  }

  self.onmessage = async ({ data }: MessageEvent<Question>): Promise<void> => {
    if ('study' in data) files.take(data.study);
    if (data.kind === 'quick') await quick.ask(data);
    else send(await replyTo(data.number, () => answer(data)));
  };
}

/** Until what came in meanwhile has been taken: a timer would wait for milliseconds. */
function nextTask(): Promise<void> {
  return new Promise((resolve) => {
    const { port1, port2 } = new MessageChannel();
    port1.onmessage = () => {
      port1.close();
      resolve();
    };
    port2.postMessage(null);
  });
}
