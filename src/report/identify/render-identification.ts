import type { Identification } from '../../run/identification.ts';
import { TOOL_VERSION } from '../../run/tool-version.ts';
import { html } from '../html.ts';
import { renderPage } from '../page.ts';
import { SPEED_UNITS, type SpeedUnit, type Units } from '../quantity.ts';
import type { Section } from '../sections/section.ts';
import { answerSection } from './answer-part.ts';
import { coastDownSections } from './coast-down-sections.ts';
import { rideSections } from './ride-sections.ts';
import { stepSections } from './step-sections.ts';

export interface IdentificationOptions {
  /** Unit of speeds for people; all else is metric. */
  readonly units: Units;
  /** Name of the file that was written beside the page. */
  readonly output: string;
}

const TITLES: Readonly<Record<Identification['kind'], string>> = {
  'coast-down': 'Coast-down: the vehicle from its logs',
  step: 'Step test: the loop from its logs',
  ride: 'A ride beside its vehicle',
};

function sectionsOf(result: Identification, speed: SpeedUnit): readonly Section[] {
  switch (result.kind) {
    case 'coast-down':
      return coastDownSections(result, speed);
    case 'step':
      return stepSections(result, speed);
    case 'ride':
      return rideSections(result, speed);
  }
}

/** What logs told as one page, in the look of the report and under the same policy: it asks for nothing. */
export function renderIdentification(
  result: Identification,
  { units, output }: IdentificationOptions,
): string {
  const speed = SPEED_UNITS[units];
  const title = TITLES[result.kind];
  return renderPage({
    title,
    heading: title,
    memo: [
      ['Logs', result.logs.join(', ')],
      ['Written', output],
      ['Speeds in', speed.name],
    ],
    sections: [answerSection(result), ...sectionsOf(result, speed)],
    foot: html`Ridgehold ${TOOL_VERSION}. A measurement on paper is no approval to ride.`,
  });
}
