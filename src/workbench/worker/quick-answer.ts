import { quickAnswerOf } from '../../report/model/quick-answer.ts';
import { viewOf } from '../../report/model/view.ts';
import { candidatesSection } from '../../report/sections/candidates-section.ts';
import { lanesSection } from '../../report/sections/lanes-section.ts';
import { roadSection } from '../../report/sections/road-section.ts';
import { QuickRuns } from '../../run/quick-run.ts';
import type { RunResult } from '../../run/run-result.ts';
import type { Question, Reply } from './messages.ts';
import { replyTo } from './reply-to.ts';
import { sectionTexts } from './section-texts.ts';
import type { StudyFiles } from './study-files.ts';

type QuickQuestion = Extract<Question, { kind: 'quick' }>;

/** Answers what a moving hand asks, one question after the other; of those that wait only the newest. */
export class QuickAnswers {
  private readonly runs = new QuickRuns();
  private waiting: QuickQuestion | null = null;
  private working = false;
  private readonly files: StudyFiles;
  private readonly send: (reply: Reply) => void;
  private readonly pause: () => Promise<void>;

  /** @param pause lets newer questions come in */
  constructor(files: StudyFiles, send: (reply: Reply) => void, pause: () => Promise<void>) {
    this.files = files;
    this.send = send;
    this.pause = pause;
  }

  async ask(question: QuickQuestion): Promise<void> {
    this.waiting = question;
    if (this.working) return;
    this.working = true;
    for (let next = this.next(); next !== null; next = this.next()) {
      const reply = await this.answer(next);
      if (reply !== null) this.send(reply);
    }
    this.working = false;
  }

  private next(): QuickQuestion | null {
    const next = this.waiting;
    this.waiting = null;
    return next;
  }

  /** null: left for one that is not part of the same movement. */
  private answer(question: QuickQuestion): Promise<Reply | null> {
    return replyTo(question.number, async () => {
      const steps = this.runs.run({
        file: question.study.file,
        read: this.files.readerOf(question.study),
      });
      for (;;) {
        await this.pause();
        if (this.waiting?.moving === false) return null;
        const { done, value } = steps.next();
        if (done) return quickReply(question, value);
      }
    });
  }
}

function quickReply({ number, units, road }: QuickQuestion, run: RunResult): Reply {
  const view = viewOf(run, units);
  const sections = [...(road ? [roadSection(view)] : []), candidatesSection(view), lanesSection(view)];
  return { kind: 'quick', number, sentence: quickAnswerOf(view), sections: sectionTexts(sections) };
}
