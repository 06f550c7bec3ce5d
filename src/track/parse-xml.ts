import { SaxesParser } from 'saxes';
import { InputError } from '../problems/input-error.ts';
import { lineOf } from './line-of.ts';
import { XmlNode } from './xml-node.ts';

const DEEPEST = 64;
const MOST_ELEMENTS = 4_000_000;

/**
 * Reads an XML document strictly into the small tree of XmlNode.
 *
 * Well-formedness is required as in XML 1.0; a document type declaration is refused, so that no entity is
 * ever expanded or fetched. Elements of a namespace other than the root's, and everything inside
 * `<extensions>`, are left out: an elevation there is not the point's own.
 *
 * @param text the whole document, decoded, without byte order mark
 * @param file name for messages
 * @returns a node above the root element
 * @throws InputError `xml-syntax`, `xml-doctype`, `xml-too-deep`, `xml-too-large`, with line and column
 */
export function parseXml(text: string, file: string): XmlNode {
  const sax = new SaxesParser();
  const document = new XmlNode('#document', NO_ATTRIBUTES, null, 0);
  let at = document;
  let depth = 0;
  let elements = 0;
  let leftOut = 0;
  let prefixes: ReadonlySet<string> = new Set();

  const refuse = (code: string, message: string, allowed?: string): never => {
    const place = { file, line: sax.line, column: sax.column + 1 };
    throw new InputError({ code, place, message, ...(allowed === undefined ? {} : { allowed }) });
  };
  sax.on('error', (error) => {
    const bare = bareAmpersand(text);
    if (bare === null || bare > sax.position) return refuse('xml-syntax', plain(error.message));
    // The parser looks for the end of the entity as far as the end of the file.
    throw new InputError({
      code: 'xml-syntax',
      place: { file, ...lineOf(text, bare) },
      message: 'an ampersand that begins no entity',
      allowed: '&amp;',
    });
  });
  sax.on('doctype', () => refuse('xml-doctype', 'a document type declaration is not allowed in a track'));
  sax.on('opentag', (tag) => {
    if (++depth > DEEPEST) refuse('xml-too-deep', 'elements are nested too deep', `${DEEPEST} levels`);
    if (++elements > MOST_ELEMENTS)
      refuse('xml-too-large', 'the file has too many elements', `${MOST_ELEMENTS}`);
    const attributes = tag.attributes as Record<string, string>;
    const colon = tag.name.indexOf(':');
    const prefix = colon < 0 ? '' : tag.name.slice(0, colon);
    const name = colon < 0 ? tag.name : tag.name.slice(colon + 1);
    if (depth === 1) prefixes = prefixesOfRoot(prefix, attributes);
    if (leftOut > 0 || name === 'extensions' || !prefixes.has(prefix)) {
      leftOut++;
      return;
    }
    const node = new XmlNode(name, compact(attributes), at, sax.line);
    at.append(node);
    at = node;
  });
  const write = (part: string): void => {
    if (leftOut === 0 && at.firstChild === null) at.text += part;
  };
  sax.on('text', write);
  sax.on('cdata', write);
  sax.on('closetag', () => {
    depth--;
    if (leftOut > 0) leftOut--;
    else if (at.parent !== null) at = at.parent;
  });
  sax.write(text).close();
  return document;
}

const NO_ATTRIBUTES: readonly string[] = [];

/** Names and values in turn: the parser's own attribute objects are hash tables of some 200 bytes, one an element. */
function compact(attributes: Readonly<Record<string, string>>): readonly string[] {
  const names = Object.keys(attributes);
  if (names.length === 0) return NO_ATTRIBUTES;
  const flat = new Array<string>(2 * names.length);
  for (let i = 0; i < names.length; i++) {
    flat[2 * i] = names[i]!;
    flat[2 * i + 1] = attributes[names[i]!]!;
  }
  return flat;
}

/** The prefixes that stand for the root's own namespace: its own, and others bound to the same name there. */
function prefixesOfRoot(prefix: string, attributes: Readonly<Record<string, string>>): ReadonlySet<string> {
  const own = new Set([prefix]);
  const namespace = attributes[prefix === '' ? 'xmlns' : `xmlns:${prefix}`];
  if (namespace === undefined) return own;
  for (const [key, value] of Object.entries(attributes)) {
    if (value !== namespace) continue;
    if (key === 'xmlns') own.add('');
    else if (key.startsWith('xmlns:')) own.add(key.slice('xmlns:'.length));
  }
  return own;
}

/** Offset of the first `&` that cannot begin a reference; null where there is none. */
function bareAmpersand(text: string): number | null {
  const at = text.search(/&(?!#?[\w:.-]+;)/);
  return at < 0 ? null : at;
}

/** The parser's message without its own place in front and full stop behind. */
function plain(message: string): string {
  return message.replace(/^(?:\S*:)?\d+:\d+: /, '').replace(/\.$/, '');
}
