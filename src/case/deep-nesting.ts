/** Far deeper than any file is written, far shallower than what makes a parser slow. */
const TOO_DEEP = 500;

/**
 * Where a YAML text is nested far too deep, by a count of brackets and of indicators in a row; -1: nowhere. Quotes and
 * comments are not looked at: nobody opens so many brackets there either. The parser itself takes seconds over what this
 * refuses in a millisecond.
 *
 * @returns index of the character
 */
export function deepNestingAt(text: string): number {
  let brackets = 0;
  let indicators = 0;
  let wordStarts = true;
  for (let i = 0; i < text.length; i++) {
    const character = text[i]!;
    if (character === '[' || character === '{') brackets++;
    else if ((character === ']' || character === '}') && brackets > 0) brackets--;
    if (character === '\n') indicators = 0;
    if (character === ' ' || character === '\n') wordStarts = true;
    else {
      if (wordStarts) indicators = '-?&!'.includes(character) ? indicators + 1 : 0;
      wordStarts = false;
    }
    if (brackets > TOO_DEEP || indicators > TOO_DEEP) return i;
  }
  return -1;
}
