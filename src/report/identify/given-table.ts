import type { GivenNumber } from '../../run/identification.ts';
import { type Html, html } from '../html.ts';
import { table } from '../sections/table.ts';

/** Units that files write in plain letters. */
const UNIT_WORDS: Readonly<Record<string, string>> = { 'kg/m3': 'kg/m³', 'deg C': '°C' };

/** What a fit took for granted, and where it is from. */
export const givenTable = (given: readonly GivenNumber[]): Html =>
  table(
    'Taken for granted',
    [{ head: 'quantity' }, { head: 'value', number: true }, { head: 'unit' }, { head: 'from' }],
    given.map(({ name, value, unit, from, isDefault }) => [
      name,
      String(value),
      UNIT_WORDS[unit] ?? unit,
      html`<span class="wrap what">${isDefault ? html`<strong>default</strong>, ` : null}${from}</span>`,
    ]),
  );
