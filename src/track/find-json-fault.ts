const BLANKS = /[ \t\r\n]*/y;
const STRING = /"(?:[^"\\\u0000-\u001f]|\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4}))*"/y;
const PLAIN = /(?:-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][-+]?\d+)?|true|false|null)(?![\w.+-])/y;

type Expected = 'value' | 'value or ]' | 'key' | 'key or }' | 'colon' | 'comma or end';

/**
 * Finds where a text stops being JSON (RFC 8259). Engines that refuse a text do not all say where.
 *
 * @returns offset of the first character that cannot stand there, the length of the text where it ends too early,
 *   or null for valid JSON
 */
export function findJsonFault(text: string): number | null {
  const open: ('[' | '{')[] = [];
  let expected: Expected = 'value';
  let at = skip(text, BLANKS, 0);
  while (at < text.length) {
    const mark = text[at]!;
    const inside = open.at(-1);
    let next = at + 1;
    if (expected === 'comma or end') {
      if (mark === ',' && inside !== undefined) expected = inside === '[' ? 'value' : 'key';
      else if ((mark === ']' && inside === '[') || (mark === '}' && inside === '{')) open.pop();
      else return at;
    } else if (expected === 'colon') {
      if (mark !== ':') return at;
      expected = 'value';
    } else if ((expected === 'value or ]' && mark === ']') || (expected === 'key or }' && mark === '}')) {
      open.pop();
      expected = 'comma or end';
    } else if (expected === 'key' || expected === 'key or }') {
      next = skip(text, STRING, at);
      if (next === at) return at;
      expected = 'colon';
    } else if (mark === '[' || mark === '{') {
      open.push(mark);
      expected = mark === '[' ? 'value or ]' : 'key or }';
    } else {
      next = skip(text, mark === '"' ? STRING : PLAIN, at);
      if (next === at) return at;
      expected = 'comma or end';
    }
    at = skip(text, BLANKS, next);
  }
  return expected === 'comma or end' && open.length === 0 ? null : text.length;
}

function skip(text: string, pattern: RegExp, at: number): number {
  pattern.lastIndex = at;
  return pattern.test(text) ? pattern.lastIndex : at;
}
