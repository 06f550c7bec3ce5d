import type { Section } from '../../report/sections/section.ts';
import type { SectionText } from './messages.ts';

/** Sections as texts, which can be sent and compared. */
export const sectionTexts = (sections: readonly Section[]): readonly SectionText[] =>
  sections.map(({ body, ...rest }) => ({ ...rest, body: body.toString() }));
