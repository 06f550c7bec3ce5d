/**
 * Markup that is safe to put into a page: made only by the `html` tag, which escapes every text that it is given.
 * The private field keeps any other object, and any string, from passing for it.
 */
export class Html {
  readonly #text: string;

  private constructor(text: string) {
    this.#text = text;
  }

  toString(): string {
    return this.#text;
  }

  /** The tag: see `html`. */
  static tag(strings: TemplateStringsArray, ...values: readonly HtmlValue[]): Html {
    let text = strings[0]!;
    for (let i = 0; i < values.length; i++) text += written(values[i]!) + strings[i + 1]!;
    return new Html(text);
  }
}

/** What may stand in a template: text and numbers are escaped, markup is kept, null and false leave nothing. */
export type HtmlValue = string | number | Html | null | false | readonly (Html | null | false)[];

/**
 * Tagged template for HTML and SVG, text and attributes in double quotes alike: `` html`<td title="${name}">${name}</td>` ``.
 * Arrays of markup are joined without a separator.
 *
 * @throws RangeError for a number that is not finite: no NaN may reach a page.
 */
export const html = Html.tag;

const ENTITY: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};

// What XML 1.0 forbids even as a reference would make a standalone SVG unreadable: it is shown as U+FFFD.
const FORBIDDEN = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]/g;

function written(value: HtmlValue): string {
  if (value === null || value === false) return '';
  if (typeof value === 'string')
    return value.replace(/[&<>"']/g, (c) => ENTITY[c]!).replace(FORBIDDEN, '\ufffd');
  if (typeof value === 'number') {
    if (!Number.isFinite(value)) throw new RangeError(`${value} in markup`);
    return String(value);
  }
  if (value instanceof Html) return value.toString();
  return value.map(written).join('');
}

/** Markup with a separator between its parts. */
export function joined(parts: readonly Html[], separator: string): Html {
  return html`${parts.map((part, i) => (i === 0 ? part : html`${separator}${part}`))}`;
}
