const NONE: readonly XmlNode[] = [];

/**
 * The few parts of a DOM element that a GPX reader needs. Names carry no namespace prefix. An element with
 * children keeps no text of its own: GPX has no mixed content, and half a million line breaks cost memory.
 */
export class XmlNode {
  readonly tagName: string;
  readonly attributes: Readonly<Record<string, string>>;
  readonly parent: XmlNode | null;
  readonly line: number;
  children: readonly XmlNode[] = NONE;
  text = '';

  constructor(
    tagName: string,
    attributes: Readonly<Record<string, string>>,
    parent: XmlNode | null,
    line: number,
  ) {
    this.tagName = tagName;
    this.attributes = attributes;
    this.parent = parent;
    this.line = line;
  }

  get childNodes(): readonly XmlNode[] {
    return this.children;
  }

  get innerHTML(): string {
    return this.text.trim();
  }

  getAttribute(name: string): string | null {
    return this.attributes[name] ?? null;
  }

  append(child: XmlNode): void {
    if (this.children === NONE) this.children = [child];
    else (this.children as XmlNode[]).push(child);
    this.text = '';
  }

  /** The first direct child of that name. */
  child(name: string): XmlNode | null {
    for (const node of this.children) if (node.tagName === name) return node;
    return null;
  }

  /** The first descendant of that name, depth first. */
  querySelector(name: string): XmlNode | null {
    for (const node of this.children) {
      if (node.tagName === name) return node;
      const deep = node.querySelector(name);
      if (deep !== null) return deep;
    }
    return null;
  }

  /** All descendants of that name in document order. */
  querySelectorAll(name: string, found: XmlNode[] = []): XmlNode[] {
    for (const node of this.children) {
      if (node.tagName === name) found.push(node);
      if (node.children.length > 0) node.querySelectorAll(name, found);
    }
    return found;
  }
}
