import GpxParser from 'gpxparser';
import { InputError } from '../problems/input-error.ts';
import { parseNumber } from './parse-number.ts';
import { parseXml } from './parse-xml.ts';
import type { XmlNode } from './xml-node.ts';

interface WithParser {
  window?: { DOMParser?: unknown };
}

/**
 * gpxparser over a strict XML reader, the same in Node, a page and a worker. The package takes any document
 * without an error, looks for elements at any depth, reads `46,5` as 46, and fails on long tracks where it sums
 * elevations; those of its methods are replaced here, and its own distances (on a sphere) are not computed.
 */
export class SafeGpxParser extends GpxParser {
  readonly file: string;

  constructor(file: string) {
    super();
    this.file = file;
  }

  /** @throws InputError as parseXml, `not-gpx`, and `not-a-number` for an elevation. */
  override parse(text: string): void {
    const document = parseXml(text, this.file);
    const root = document.firstChild;
    if (root?.tagName !== 'gpx')
      throw new InputError({
        code: 'not-gpx',
        place: { file: this.file, line: root?.line ?? 1 },
        message: 'this XML document is no GPX',
        found: `root element <${root?.tagName}>`,
        allowed: '<gpx>',
      });
    const host = globalThis as unknown as WithParser;
    const made = host.window === undefined;
    const window = host.window ?? {};
    const saved = window.DOMParser;
    // In a page, window is there and must not be assigned.
    if (made) host.window = window;
    window.DOMParser = class {
      parseFromString(): XmlNode {
        return document;
      }
    };
    try {
      super.parse(text);
    } finally {
      if (made) delete host.window;
      else window.DOMParser = saved;
    }
  }

  /** Of direct children only: a name inside a point is not the track's. */
  override getElementValue(parent: XmlNode, needle: string): string | null {
    const node = parent.child(needle);
    if (node === null) return null;
    const text = node.innerHTML;
    if (parent.tagName !== 'trkpt' && parent.tagName !== 'rtept') return text;
    if (text === '') return null;
    if (needle === 'ele') return this.#elevation(text, node.line);
    // The package would take a time without zone for the computer's own; read-gpx.ts reads times itself.
    return needle === 'time' ? null : text;
  }

  override queryDirectSelector(parent: XmlNode, needle: string): XmlNode | null {
    return parent.child(needle);
  }

  override calculDistance(): { total: number; cumul: number[] } {
    return { total: 0, cumul: [] };
  }

  override calcElevation(): Record<'max' | 'min' | 'pos' | 'neg' | 'avg', number | null> {
    return { max: null, min: null, pos: null, neg: null, avg: null };
  }

  override calculSlope(): number[] {
    return [];
  }

  /** `NaN` and the like pass as Infinity, for the cleaning to count. */
  #elevation(text: string, line: number): string {
    const value = parseNumber(text);
    if (value === null)
      throw new InputError({
        code: 'not-a-number',
        place: { file: this.file, line },
        message: 'elevation is not a number',
        found: `'${text}'`,
        allowed: 'a decimal number with a point, in metres',
      });
    return value === Number.POSITIVE_INFINITY ? 'Infinity' : text;
  }
}
