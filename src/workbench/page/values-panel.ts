import { type NumberField, numberFields } from '../../case/number-fields.ts';
import { InputError, type Problem } from '../../problems/input-error.ts';
import { element } from './element.ts';
import { NumberInput } from './number-input.ts';
import { fileOf, type Study, type StudyFile, textOf } from './study.ts';

/** A number of one of the files of a study. */
export interface FiledNumber extends NumberField {
  readonly file: string;
}

interface Group {
  readonly title: string;
  /** Keys before those of the fields. */
  readonly under: string;
  readonly fields: readonly FiledNumber[];
}

const TITLES: Readonly<Record<string, string>> = {
  hold: 'Hold',
  wind: 'Wind',
  air: 'Air',
  road: 'Road',
  track: 'Track',
  rider: 'Rider',
  supervisor: 'Rules of the unit',
  requirements: 'Requirements',
  faults: 'Faults of the sensor',
  segments: 'Segments',
  tune: 'Tuning',
  output: 'Output',
  mass: 'Mass and load',
  road_load: 'Road load',
  drive: 'Drive',
  actuator: 'Actuator',
  speed_sensor: 'Speed sensor',
  traction: 'Grip',
};
/** First what a hand reaches for; the rest in the order of the files. */
const FIRST = ['hold', 'candidates', 'mass', 'wind', 'road_load', 'drive', 'road'];
const OPEN = ['hold', 'candidates', 'wind', 'mass'];
/** Of no use to a moving hand. */
const LEFT_OUT = ['matrix', 'tune', 'output'];

/** The inputs, made anew only when the files have other numbers than before: values alone are put into what is there. */
export class ValuesPanel {
  private readonly root: HTMLElement;
  private readonly onValue: (field: FiledNumber, value: number | string) => void;
  private readonly onRest: () => void;
  private inputs = new Map<string, NumberInput>();
  private structure = '';

  constructor(
    root: HTMLElement,
    onValue: (field: FiledNumber, value: number | string) => void,
    onRest: () => void,
  ) {
    this.root = root;
    this.onValue = onValue;
    this.onRest = onRest;
  }

  /** @param anew whether another study was brought in, whose values are those to come back to */
  show(study: Study, vehicle: string | null, anew: boolean): void {
    const fields = [...fieldsOf(study, study.file, 'case'), ...fieldsOf(study, vehicle, 'vehicle')];
    const structure = JSON.stringify(fields.map(({ file, key }) => [file, key]));
    if (anew || structure !== this.structure) {
      this.structure = structure;
      this.build(fields);
      return;
    }
    for (const field of fields) this.inputs.get(idOf(field))?.show(field);
  }

  /**
   * Tells each fault at its input, or at the first input of the part that it is about.
   *
   * @returns those that have no input
   */
  tell(problems: readonly Problem[]): readonly Problem[] {
    const left: Problem[] = [];
    const told = new Map<string, string>();
    for (const problem of problems) {
      const id = this.inputFor(problem);
      if (id === null) left.push(problem);
      else told.set(id, faultWords(problem));
    }
    for (const [id, input] of this.inputs) input.tell(told.get(id) ?? null);
    return left;
  }

  private inputFor({ place: { file, key } }: Problem): string | null {
    if (file === undefined || key === undefined) return null;
    const id = idOf({ file, key });
    if (this.inputs.has(id)) return id;
    return [...this.inputs.keys()].find((one) => one.startsWith(`${id}.`)) ?? null;
  }

  private build(fields: readonly FiledNumber[]): void {
    const open = new Set(
      [...this.root.querySelectorAll<HTMLDetailsElement>('details[open]')].map(({ dataset }) => dataset.of),
    );
    const first = this.inputs.size === 0;
    this.inputs = new Map();
    this.root.replaceChildren(
      ...groupsOf(fields).map(({ title, under, fields: own }, g) => {
        const id = `group-${g}`;
        const isOpen = first ? OPEN.includes(own[0]?.key.split('.')[0] ?? '') : open.has(under);
        return element(
          'details',
          { 'data-of': under, open: isOpen },
          element('summary', { id }, title),
          element(
            'div',
            { role: 'group', 'aria-labelledby': id },
            ...own.map((field, i) => this.made(field, `value-${g}-${i}`, under)),
          ),
        );
      }),
    );
  }

  private made(field: FiledNumber, id: string, under: string): HTMLElement {
    const short = field.key.slice(under.length + 1);
    const input = new NumberInput(field, id, short, {
      onValue: (value) => this.onValue(field, value),
      onRest: this.onRest,
    });
    this.inputs.set(idOf(field), input);
    return input.root;
  }
}

const idOf = ({ file, key }: { readonly file: string; readonly key: string }): string => `${file}: ${key}`;

function faultWords({ message, found, allowed }: Problem): string {
  const more = [
    found === undefined ? '' : `found ${found}`,
    allowed === undefined ? '' : `allowed: ${allowed}`,
  ];
  const told = more.filter((one) => one !== '').join('; ');
  return `${message}${told === '' ? '' : ` (${told})`}`;
}

/** Numbers of contents that were looked at: a hand that moves changes one file of two. */
const known = new WeakMap<StudyFile, readonly FiledNumber[]>();

/** None of a file that is not here, or that cannot be read at all. */
function fieldsOf(study: Study, name: string | null, kind: 'case' | 'vehicle'): readonly FiledNumber[] {
  const file = name === null ? undefined : fileOf(study, name);
  if (file === undefined) return [];
  const fields = known.get(file) ?? numbersIn(study, file.name, kind);
  known.set(file, fields);
  return fields;
}

function numbersIn(study: Study, file: string, kind: 'case' | 'vehicle'): readonly FiledNumber[] {
  try {
    return numberFields(textOf(study, file), kind)
      .filter(({ path }) => !LEFT_OUT.includes(String(path[0])))
      .map((field) => ({ ...field, file }));
  } catch (error) {
    if (error instanceof InputError) return [];
    throw error;
  }
}

function groupsOf(fields: readonly FiledNumber[]): readonly Group[] {
  const groups = new Map<string, FiledNumber[]>();
  for (const field of fields) {
    const under = field.key.split('.').slice(0, depthOf(field)).join('.');
    groups.set(under, [...(groups.get(under) ?? []), field]);
  }
  const rank = (under: string): number => {
    const at = FIRST.indexOf(topOf(under));
    return at < 0 ? FIRST.length : at;
  };
  return [...groups]
    .map(([under, own]) => ({ under, title: titleOf(under), fields: own }))
    .sort((a, b) => rank(a.under) - rank(b.under));
}

/** A candidate is a group of its own, and so is a part of a vehicle that is written in the case. */
const depthOf = ({ path: [first] }: NumberField): number =>
  first === 'candidates' || first === 'vehicle' ? 2 : 1;

const topOf = (under: string): string => under.replace(/^vehicle\./, '').split('.')[0] ?? '';

function titleOf(under: string): string {
  const [first = '', second] = under.split('.');
  if (first === 'candidates') return second ?? first;
  const key = topOf(under);
  return TITLES[key] ?? key;
}
