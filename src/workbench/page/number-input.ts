import type { NumberField } from '../../case/number-fields.ts';
import { type DragRange, dragRange, rounded } from './drag-range.ts';
import { element } from './element.ts';

export interface NumberInputEvents {
  /** A value was typed or dragged; what is no number comes as typed. */
  readonly onValue: (value: number | string) => void;
  /** The hand let go. */
  readonly onRest: () => void;
}

/** One number of a file: typed, dragged beside it, brought back to the file's value; its fault stands below it. */
export class NumberInput {
  readonly root: HTMLElement;
  private readonly typed: HTMLInputElement;
  private readonly dragged: HTMLInputElement;
  private readonly back: HTMLButtonElement;
  private readonly fault: HTMLElement;
  private range: DragRange;
  private field: NumberField;
  private readonly given: number;

  /**
   * @param id unique on the page
   * @param short what the key is called within its group
   */
  constructor(field: NumberField, id: string, short: string, events: NumberInputEvents) {
    this.field = field;
    this.given = field.value;
    this.range = dragRange(field, field.value);
    const unit = field.unit === '' ? '' : ` [${field.unit}]`;
    const allowed = `${field.whole ? 'whole numbers ' : ''}from ${field.least} to ${field.most}${field.unit === '' ? '' : ` ${field.unit}`}`;
    this.typed = element('input', {
      id,
      type: 'text',
      inputmode: 'decimal',
      autocomplete: 'off',
      spellcheck: 'false',
      'aria-describedby': `${id}-range ${id}-fault`,
    });
    this.dragged = element('input', { type: 'range', 'aria-label': `${field.words}${unit}, dragged` });
    this.back = element('button', { type: 'button', class: 'back', hidden: true });
    this.back.textContent = `back to ${field.value}`;
    this.back.setAttribute(
      'aria-label',
      `${field.words}: back to ${field.value}${unit}, the value of the file`,
    );
    this.fault = element('p', { id: `${id}-fault`, class: 'fault', hidden: true });
    this.root = element(
      'div',
      { class: 'field' },
      element('label', { for: id }, field.words, ' ', element('code', {}, short)),
      element(
        'div',
        { class: 'entry' },
        this.typed,
        element('span', { class: 'unit' }, field.unit),
        this.dragged,
        this.back,
      ),
      element('span', { id: `${id}-range`, class: 'unseen' }, allowed),
      this.fault,
    );
    this.typed.addEventListener('input', () => events.onValue(numberIn(this.typed.value)));
    this.typed.addEventListener('blur', events.onRest);
    this.typed.addEventListener('keydown', (event) => {
      const steps = event.key === 'ArrowUp' ? 1 : event.key === 'ArrowDown' ? -1 : 0;
      if (steps === 0) return;
      event.preventDefault();
      const next = rounded(this.field.value + steps * this.range.step);
      events.onValue(Math.min(this.field.most, Math.max(this.field.least, next)));
    });
    this.dragged.addEventListener('input', () => events.onValue(rounded(this.dragged.valueAsNumber)));
    // By keys every step is a change of its own: a movement ends where the hand leaves the slider.
    this.dragged.addEventListener('blur', events.onRest);
    this.dragged.addEventListener('pointerup', events.onRest);
    this.back.addEventListener('click', () => {
      events.onValue(this.given);
      events.onRest();
      this.typed.focus();
    });
    this.show(field);
  }

  /** The value as the file has it now. What is being typed is left as it is where it means the same. */
  show(field: NumberField): void {
    this.field = field;
    const { value } = field;
    if (numberIn(this.typed.value) !== value) this.typed.value = String(value);
    if (value < this.range.low || value > this.range.high) this.range = dragRange(field, value);
    const { low, high, step } = this.range;
    this.dragged.min = String(low);
    this.dragged.max = String(high);
    this.dragged.step = String(step);
    this.dragged.value = String(value);
    this.back.hidden = value === this.given;
  }

  /** @param words what is wrong with it; null: nothing */
  tell(words: string | null): void {
    this.fault.hidden = words === null;
    this.fault.textContent = words ?? '';
    this.typed.toggleAttribute('aria-invalid', words !== null);
    if (words !== null) this.typed.setAttribute('aria-invalid', 'true');
  }
}

/** A decimal point only, as in the file; anything else is left for the core to refuse. */
function numberIn(text: string): number | string {
  const bare = text.trim().replace('\u2212', '-');
  return /^[-+]?(?:\d+\.?\d*|\.\d+)(?:e[-+]?\d+)?$/i.test(bare) ? Number(bare) : text;
}
