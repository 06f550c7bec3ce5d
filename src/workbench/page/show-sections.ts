import type { SectionText } from '../worker/messages.ts';

/**
 * Sections of the page. A section is swapped only when its text changed; what was open in it stays open, tables stay
 * where they were scrolled to, and the focus stays on what took its place.
 */
export class Sections {
  private readonly shown = new Map<string, string>();
  private readonly main: HTMLElement;
  private readonly contents: HTMLElement;
  private listed = '';

  constructor(main: HTMLElement, contents: HTMLElement) {
    this.main = main;
    this.contents = contents;
  }

  get isEmpty(): boolean {
    return this.shown.size === 0;
  }

  /** All sections, in their order; those that are no longer among them go. */
  showAll(sections: readonly SectionText[]): void {
    const kept = new Set(sections.map(({ id }) => id));
    for (const id of this.shown.keys())
      if (!kept.has(id)) {
        document.getElementById(id)?.remove();
        this.shown.delete(id);
      }
    let before: Element | null = null;
    for (const section of sections) {
      const element = document.getElementById(section.id) ?? this.made(section);
      const next: Element | null = before === null ? this.main.firstElementChild : before.nextElementSibling;
      if (next !== element) this.main.insertBefore(element, next);
      const heading = element.querySelector('h2');
      if (heading !== null) setHeading(heading, section);
      this.fill(element, section);
      element.removeAttribute('data-older');
      before = element;
    }
    this.listContents(sections);
  }

  /** Some sections with newer texts; the others are from now on of earlier values. */
  showSome(sections: readonly SectionText[]): void {
    const newer = new Set(sections.map(({ id }) => id));
    for (const id of this.shown.keys())
      document.getElementById(id)?.toggleAttribute('data-older', !newer.has(id));
    for (const section of sections) {
      const element = document.getElementById(section.id);
      if (element !== null) this.fill(element, section);
    }
  }

  clear(): void {
    this.main.replaceChildren();
    this.contents.replaceChildren();
    this.shown.clear();
    this.listed = '';
  }

  private made({ id }: SectionText): HTMLElement {
    const element = document.createElement('section');
    element.id = id;
    element.setAttribute('aria-labelledby', `${id}-h`);
    const heading = document.createElement('h2');
    heading.id = `${id}-h`;
    const body = document.createElement('div');
    element.append(heading, body);
    return element;
  }

  private fill(element: HTMLElement, { id, body }: SectionText): void {
    if (this.shown.get(id) === body) return;
    this.shown.set(id, body);
    const holder = element.lastElementChild;
    if (holder !== null) swap(holder, body);
  }

  private listContents(sections: readonly SectionText[]): void {
    const listed = JSON.stringify(sections.map(({ id, number, title }) => [id, number, title]));
    if (listed === this.listed) return;
    this.listed = listed;
    this.contents.replaceChildren(
      ...sections.map((section) => {
        const item = document.createElement('li');
        const link = document.createElement('a');
        link.href = `#${section.id}`;
        setHeading(link, section);
        item.append(link);
        return item;
      }),
    );
  }
}

function setHeading(element: Element, { number, title }: SectionText): void {
  const mark = document.createElement('span');
  mark.className = 'n';
  mark.textContent = String(number);
  element.replaceChildren(mark, ` ${title}`);
}

const OPEN = 'details';
const SCROLLED = '.scroll';
const FOCUSABLE = 'a[href],button,summary,[tabindex="0"]';

/** Puts markup of `report/`, escaped by construction, in place of what a holder has. */
function swap(holder: Element, body: string): void {
  const open = [...holder.querySelectorAll<HTMLDetailsElement>(OPEN)].map((one) => one.open);
  const scrolled = [...holder.querySelectorAll(SCROLLED)].map((one) => one.scrollLeft);
  const focused = [...holder.querySelectorAll(FOCUSABLE)].indexOf(document.activeElement as Element);
  holder.innerHTML = body;
  for (const [i, one] of holder.querySelectorAll<HTMLDetailsElement>(OPEN).entries())
    one.open = open[i] ?? false;
  for (const [i, one] of holder.querySelectorAll(SCROLLED).entries())
    if ((scrolled[i] ?? 0) > 0) one.scrollLeft = scrolled[i] ?? 0;
  if (focused >= 0) holder.querySelectorAll<HTMLElement>(FOCUSABLE)[focused]?.focus({ preventScroll: true });
}
