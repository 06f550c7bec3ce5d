import type { Html } from '../html.ts';

/** A part of the page: its id is the anchor, its number and title stand in the contents. */
export interface Section {
  readonly id: string;
  readonly number: number;
  readonly title: string;
  readonly body: Html;
}
