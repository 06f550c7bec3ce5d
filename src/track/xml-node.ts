/**
 * The few parts of a DOM element that a GPX reader needs. Names carry no namespace prefix. An element with
 * children keeps no text of its own: GPX has no mixed content. Children are a chain and not an array each, which
 * for half a million points is a third of the memory.
 */
export class XmlNode {
  readonly tagName: string;
  /** Names and values in turn. */
  readonly attributes: readonly string[];
  readonly parent: XmlNode | null;
  readonly line: number;
  text = '';
  firstChild: XmlNode | null = null;
  nextSibling: XmlNode | null = null;
  #lastChild: XmlNode | null = null;

  constructor(tagName: string, attributes: readonly string[], parent: XmlNode | null, line: number) {
    this.tagName = tagName;
    this.attributes = attributes;
    this.parent = parent;
    this.line = line;
  }

  get innerHTML(): string {
    return this.text.trim();
  }

  getAttribute(name: string): string | null {
    for (let i = 0; i < this.attributes.length; i += 2)
      if (this.attributes[i] === name) return this.attributes[i + 1]!;
    return null;
  }

  append(child: XmlNode): void {
    if (this.#lastChild === null) this.firstChild = child;
    else this.#lastChild.nextSibling = child;
    this.#lastChild = child;
    this.text = '';
  }

  /** The first direct child of that name. */
  child(name: string): XmlNode | null {
    for (let node = this.firstChild; node !== null; node = node.nextSibling)
      if (node.tagName === name) return node;
    return null;
  }

  /** The first descendant of that name, depth first. */
  querySelector(name: string): XmlNode | null {
    for (let node = this.firstChild; node !== null; node = node.nextSibling) {
      if (node.tagName === name) return node;
      const deep = node.firstChild === null ? null : node.querySelector(name);
      if (deep !== null) return deep;
    }
    return null;
  }

  /** All descendants of that name in document order. */
  querySelectorAll(name: string, found: XmlNode[] = []): XmlNode[] {
    for (let node = this.firstChild; node !== null; node = node.nextSibling) {
      if (node.tagName === name) found.push(node);
      if (node.firstChild !== null) node.querySelectorAll(name, found);
    }
    return found;
  }
}
