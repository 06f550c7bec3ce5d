import { editCase } from '../../case/edit-case.ts';
import { readCaseFile } from '../../case/read-case-file.ts';
import { readVehicleFile } from '../../case/read-vehicle-file.ts';
import { readYaml, valueAt } from '../../case/yaml-source.ts';
import { formatProblem, InputError, type Problem } from '../../problems/input-error.ts';
import type { Units } from '../../report/quantity.ts';
import type { Parcel, Reply } from '../worker/messages.ts';
import { Answers } from './answers.ts';
import { download, fileLink } from './download.ts';
import { element, part } from './element.ts';
import { History } from './history.ts';
import { type BroughtFile, placeFiles } from './place-files.ts';
import { Sections } from './show-sections.ts';
import { fileOf, type Study, textOf, withText } from './study.ts';
import { type FiledNumber, ValuesPanel } from './values-panel.ts';

const PARCELS: readonly Parcel[] = ['report', 'data', 'charts'];

/** The page at work: its state is the texts of a case and its files, and what is shown follows from them. */
export class Bench {
  private history: History<Study> | null = null;
  private units: Units = 'kmh';
  /** More than controllers changed since the last whole answer. */
  private road = true;
  /** What is shown is the whole answer of these values. */
  private settled = false;
  private readonly answers: Answers;
  private readonly panel: ValuesPanel;
  private readonly sections: Sections;
  private readonly words = part('words', HTMLElement);
  private readonly progress = part('progress', HTMLProgressElement);
  private readonly stop = part('stop', HTMLButtonElement);
  private readonly again = part('again', HTMLButtonElement);
  private readonly matrix = part('matrix', HTMLButtonElement);
  private readonly quick = part('quick', HTMLElement);
  private readonly faults = part('faults', HTMLElement);
  private readonly taken = part('taken', HTMLElement);
  private readonly spoken = part('spoken', HTMLElement);
  private readonly source = part('source', HTMLTextAreaElement);

  /** @param code of the worker */
  constructor(code: string) {
    this.answers = new Answers(code, {
      onReply: (reply) => this.hear(reply),
      onStopped: (words) => this.stopped(words),
    });
    this.panel = new ValuesPanel(
      part('fields', HTMLElement),
      (field, value) => this.change(field, value),
      () => this.history?.rest(),
    );
    this.sections = new Sections(part('sections', HTMLElement), part('contents', HTMLElement));
    this.listen();
  }

  /** Begins with a study. */
  begin(study: Study): void {
    this.history = new History(study);
    part('bench', HTMLElement).removeAttribute('data-empty');
    this.sections.clear();
    this.road = true;
    this.refresh({ anew: true, moving: false });
  }

  /** Puts files into the study, or makes one of them. */
  bring(brought: readonly BroughtFile[]): void {
    try {
      const study = placeFiles(this.history?.present ?? null, brought);
      if (this.history === null || study.file !== this.history.present.file) {
        this.begin(study);
        return;
      }
      this.history.put(study);
      this.road = true;
      this.refresh({ anew: true, moving: false });
    } catch (error) {
      this.refuse(error);
    }
  }

  private listen(): void {
    part('undo', HTMLButtonElement).addEventListener('click', () => this.step('undo'));
    part('redo', HTMLButtonElement).addEventListener('click', () => this.step('redo'));
    document.addEventListener('keydown', (event) => {
      if (!(event.ctrlKey || event.metaKey) || event.altKey || event.target === this.source) return;
      const key = event.key.toLowerCase();
      if (key !== 'z' && key !== 'y') return;
      event.preventDefault();
      this.step(key === 'y' || event.shiftKey ? 'redo' : 'undo');
    });
    part('units', HTMLSelectElement).addEventListener('change', ({ target }) => {
      this.units = (target as HTMLSelectElement).value === 'mph' ? 'mph' : 'kmh';
      this.road = true;
      if (this.history !== null) this.refresh({ anew: false, moving: false });
    });
    this.stop.addEventListener('click', () => this.answers.stop());
    this.again.addEventListener('click', () => this.refresh({ anew: false, moving: false }));
    this.matrix.addEventListener('click', () => {
      this.answers.matrix();
      this.working('working out the matrix', 0);
    });
    for (const parcel of PARCELS)
      part(`take-${parcel}`, HTMLButtonElement).addEventListener('click', () => {
        this.answers.takeOut(parcel);
        this.working('making the files', 0);
      });
    part('save-case', HTMLButtonElement).addEventListener('click', () => this.save(this.study?.file ?? null));
    part('save-vehicle', HTMLButtonElement).addEventListener('click', () => this.save(this.vehicleFile()));
    part('apply', HTMLButtonElement).addEventListener('click', () => this.takeOverSource());
  }

  private get study(): Study | null {
    return this.history?.present ?? null;
  }

  private save(name: string | null): void {
    const file = this.study === null || name === null ? undefined : fileOf(this.study, name);
    if (file !== undefined) download(file.name, file.bytes);
  }

  private step(way: 'undo' | 'redo'): void {
    if (this.history === null) return;
    const before = this.history.present;
    this.history[way]();
    if (this.history.present === before) return;
    this.road = true;
    this.refresh({ anew: false, moving: false });
  }

  /** A value as the hand has it; what the file refuses is told at its input, and nothing else happens. */
  private change({ file, key, path }: FiledNumber, value: number | string): void {
    const { study, history } = this;
    if (study === null || history === null) return;
    try {
      const text = editCase(textOf(study, file), path, value);
      check(study, file, text);
      history.put(withText(study, file, text), `${file}: ${key}`);
      this.road ||= file !== study.file || path[0] !== 'candidates';
      this.refresh({ anew: false, moving: true });
    } catch (error) {
      this.refuse(error);
      if (this.settled) this.words.textContent = 'A value is refused; the picture is of the ones before.';
    }
  }

  private takeOverSource(): void {
    const { study, history } = this;
    if (study === null || history === null) return;
    const fault = part('source-fault', HTMLElement);
    fault.hidden = true;
    try {
      check(study, study.file, this.source.value);
      history.put(withText(study, study.file, this.source.value));
      this.road = true;
      this.refresh({ anew: false, moving: false });
    } catch (error) {
      if (!(error instanceof InputError)) throw error;
      fault.textContent = error.message;
      fault.hidden = false;
    }
  }

  /** Shows the inputs of what is, and asks for its answers. */
  private refresh({ anew, moving }: { readonly anew: boolean; readonly moving: boolean }): void {
    const { study, history } = this;
    if (study === null || history === null) return;
    const vehicle = this.vehicleFile();
    this.panel.show(study, vehicle, anew);
    this.panel.tell([]);
    this.faults.replaceChildren();
    part('undo', HTMLButtonElement).disabled = !history.canUndo;
    part('redo', HTMLButtonElement).disabled = !history.canRedo;
    part('save-vehicle', HTMLButtonElement).hidden = vehicle === null;
    if (document.activeElement !== this.source) this.source.value = readable(study);
    this.settle(false);
    this.working('following the values', null);
    this.answers.ask(study, this.units, this.road, moving);
  }

  private vehicleFile(): string | null {
    if (this.study === null) return null;
    try {
      const named = valueAt(readYaml(readable(this.study), this.study.file).value, ['vehicle']);
      return typeof named === 'string' && fileOf(this.study, named) !== undefined ? named : null;
    } catch {
      return null;
    }
  }

  private hear(reply: Reply): void {
    switch (reply.kind) {
      case 'quick':
        if (this.settled) return;
        if (this.sections.isEmpty) this.sections.showAll(reply.sections);
        else this.sections.showSome(reply.sections);
        this.quick.textContent = reply.sentence;
        this.quick.hidden = false;
        return;
      case 'progress':
        this.working(`working out the whole: ${reply.words}`, reply.share);
        return;
      case 'whole':
        this.road = false;
        this.panel.tell([]);
        this.sections.showAll(reply.sections);
        this.showHead(reply.head.title, reply.head.memo);
        this.quick.hidden = true;
        this.settle(true);
        this.words.textContent = 'Worked out whole, with these values.';
        this.spoken.textContent = reply.sentence;
        this.matrix.hidden = reply.cells === 0;
        this.matrix.textContent = `Work out the matrix: ${reply.cells} combinations`;
        return;
      case 'taken':
        this.settle(true);
        this.words.textContent = 'Worked out whole, with these values.';
        this.handOver(reply.parcel, reply.files);
        return;
      case 'refused':
        this.refuse(new InputError(...(reply.problems as [Problem, ...Problem[]])));
        this.idle(
          this.sections.isEmpty
            ? 'It cannot be worked out yet.'
            : 'These values are refused; the picture is of the last ones that were not.',
        );
        return;
      case 'failed':
        this.idle(`A fault of the program: ${reply.message}`);
        return;
    }
  }

  private handOver(parcel: Parcel, files: readonly { readonly name: string; readonly text: string }[]): void {
    const [first] = files;
    if (parcel === 'report' && first !== undefined) {
      download(first.name, first.text);
      return;
    }
    for (const link of this.taken.querySelectorAll('a')) URL.revokeObjectURL(link.href);
    this.taken.replaceChildren(...files.map(({ name, text }) => element('li', {}, fileLink(name, text))));
    this.taken.hidden = false;
    this.taken.querySelector('a')?.focus();
  }

  /** Tells what was refused, at its input where it has one. */
  private refuse(error: unknown): void {
    if (!(error instanceof InputError)) throw error;
    const list = this.history === null ? part('welcome-faults', HTMLElement) : this.faults;
    const left = this.history === null ? error.problems : this.panel.tell(error.problems);
    list.replaceChildren(
      ...left.map((problem) => element('li', {}, element('p', { class: 'fault' }, formatProblem(problem)))),
    );
    this.spoken.textContent = error.problems.map(({ message }) => message).join('; ');
  }

  private stopped(words: string | null): void {
    this.idle(words === null ? 'Stopped.' : `A fault of the program: ${words}`);
    this.again.hidden = false;
  }

  private working(words: string, share: number | null): void {
    this.words.textContent = `${words[0]?.toUpperCase()}${words.slice(1)} \u2026`;
    this.progress.hidden = share === null;
    if (share !== null) this.progress.value = share;
    this.stop.hidden = share === null;
    this.again.hidden = true;
    for (const parcel of PARCELS) part(`take-${parcel}`, HTMLButtonElement).disabled = true;
    this.matrix.hidden = true;
  }

  private idle(words: string): void {
    this.words.textContent = words;
    this.progress.hidden = true;
    this.stop.hidden = true;
  }

  private settle(settled: boolean): void {
    this.settled = settled;
    if (settled) this.idle('');
    else {
      this.taken.hidden = true;
      this.taken.replaceChildren();
    }
    for (const parcel of PARCELS) part(`take-${parcel}`, HTMLButtonElement).disabled = !settled;
  }

  private showHead(title: string, memo: readonly (readonly [string, string])[]): void {
    part('title', HTMLElement).textContent = title;
    document.title = `${title}: Ridgehold workbench`;
    part('memo', HTMLElement).replaceChildren(
      ...memo.map(([name, value]) => element('div', {}, element('dt', {}, name), element('dd', {}, value))),
    );
  }
}

/** @throws InputError with every problem that a file has by itself */
function check(study: Study, file: string, text: string): void {
  if (file === study.file) readCaseFile(text, file);
  else readVehicleFile(text, file);
}

/** Text of the case; empty where it is none. */
function readable(study: Study): string {
  try {
    return textOf(study, study.file);
  } catch {
    return '';
  }
}
