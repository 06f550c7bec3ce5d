import { sha256 } from '@noble/hashes/sha2.js';
import { utf8ToBytes } from '@noble/hashes/utils.js';
import { base64 } from './base64.ts';
import { type Html, html } from './html.ts';
import type { Section } from './sections/section.ts';
import { STYLE } from './style.ts';

/** A page as a memo: what stands at its head, its sections, its foot. */
export interface Page {
  /** Of the document. */
  readonly title: string;
  readonly heading: string;
  /** Names and values under the heading. */
  readonly memo: readonly (readonly [name: string, value: string])[];
  /** The first of them is the answer. */
  readonly sections: readonly Section[];
  readonly foot: Html;
}

/**
 * A page that needs nothing else: no script, no font, no picture is fetched, and a content security policy holds it
 * to that. Texts that came from files are escaped by construction.
 */
export function renderPage({ title, heading, memo, sections, foot }: Page): string {
  const policy = `default-src 'none'; style-src 'sha256-${base64(sha256(utf8ToBytes(STYLE)))}'; img-src data:; base-uri 'none'; form-action 'none'`;
  const head = html`<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="${policy}">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="referrer" content="no-referrer">
<title>${title}</title>
`;
  const body = html`<a class="skip" href="#answer">Skip to the answer</a>
<div class="sheet">
<header><h1>${heading}</h1><dl class="memo">${memo.map(([name, value]) => html`<div><dt>${name}</dt><dd>${value}</dd></div>`)}</dl></header>
<nav aria-label="Contents"><ol>${sections.map(({ id, number, title }) => html`<li><a href="#${id}"><span class="n">${number}</span> ${title}</a></li>`)}</ol></nav>
<main>
${sections.map(
  ({ id, number, title, body }) =>
    html`<section id="${id}" aria-labelledby="${id}-h"><h2 id="${id}-h"><span class="n">${number}</span> ${title}</h2>
${body}</section>
`,
)}</main>
<footer>${foot}</footer>
</div>`;
  // The style sheet is a constant of this program: its text must stand unescaped, and its hash is in the policy.
  return `<!doctype html>\n<html lang="en">\n<head>\n${head}<style>${STYLE}</style>\n</head>\n<body>\n${body}\n</body>\n</html>\n`;
}
