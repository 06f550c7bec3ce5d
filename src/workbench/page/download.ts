import { element } from './element.ts';

/** Time in which a browser takes a file over [ms]. */
const HANDED_OVER = 60_000;

/** A link that saves a file when it is followed. */
export function fileLink(name: string, content: string | Uint8Array): HTMLAnchorElement {
  const part = typeof content === 'string' ? content : new Uint8Array(content);
  const url = URL.createObjectURL(new Blob([part], { type: 'application/octet-stream' }));
  return element('a', { href: url, download: name.split(/[\\/]/).at(-1) ?? name }, name);
}

/** Saves a file at once. */
export function download(name: string, content: string | Uint8Array): void {
  const link = fileLink(name, content);
  link.click();
  setTimeout(() => URL.revokeObjectURL(link.href), HANDED_OVER);
}
