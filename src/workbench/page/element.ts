type Attributes = Readonly<Record<string, string | number | boolean>>;

/** An element with attributes (true: without a value; false: left out) and children. */
export function element<Name extends keyof HTMLElementTagNameMap>(
  name: Name,
  attributes: Attributes = {},
  ...children: readonly (Node | string)[]
): HTMLElementTagNameMap[Name] {
  const made = document.createElement(name);
  for (const [key, value] of Object.entries(attributes))
    if (value !== false) made.setAttribute(key, value === true ? '' : String(value));
  made.append(...children);
  return made;
}

/** An element of the page that its own markup has. */
export function part<T extends HTMLElement>(id: string, type: abstract new () => T): T {
  const found = document.getElementById(id);
  if (!(found instanceof type)) throw new RangeError(`the page has no ${id}`);
  return found;
}
