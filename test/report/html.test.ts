import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { Html, html, joined } from '../../src/report/html.ts';

/** What an HTML parser makes of the five entities; everything else must have come through as it was. */
const unescaped = (text: string): string =>
  text
    .replaceAll('&lt;', '<')
    .replaceAll('&gt;', '>')
    .replaceAll('&quot;', '"')
    .replaceAll('&#39;', "'")
    .replaceAll('&amp;', '&');

describe('the html tag', () => {
  it('escapes text in elements and in attributes', () => {
    const name = `<script>alert("x")</script> & 'so'`;
    expect(html`<p title="${name}">${name}</p>`.toString()).toBe(
      '<p title="&lt;script&gt;alert(&quot;x&quot;)&lt;/script&gt; &amp; &#39;so&#39;">&lt;script&gt;alert(&quot;x&quot;)&lt;/script&gt; &amp; &#39;so&#39;</p>',
    );
  });

  it('lets no text open a tag or leave an attribute, and loses nothing of it', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'grapheme' }), (text) => {
        const made = html`${text}`.toString();
        expect(made).not.toMatch(/[<>"']/);
        expect(unescaped(made)).toBe(
          text.replace(/[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]/g, '\ufffd'),
        );
      }),
      { seed: 11, numRuns: 500 },
    );
  });

  it('keeps markup, joins lists, and leaves nothing for null and false', () => {
    const items = ['a', '<b>'].map((text) => html`<li>${text}</li>`);
    expect(html`<ul>${items}${null}${false}</ul>`.toString()).toBe('<ul><li>a</li><li>&lt;b&gt;</li></ul>');
    expect(joined(items, ', ').toString()).toBe('<li>a</li>, <li>&lt;b&gt;</li>');
  });

  it('refuses numbers that are not finite', () => {
    expect(html`${1.5}`.toString()).toBe('1.5');
    for (const value of [Number.NaN, Number.POSITIVE_INFINITY])
      expect(() => html`${value}`).toThrow(RangeError);
  });

  it('takes an object that only looks like markup for none', () => {
    const fake = { toString: () => '<script>' } as unknown as Html;
    expect(() => html`${fake}`.toString()).toThrow();
    expect(html``).toBeInstanceOf(Html);
  });
});
