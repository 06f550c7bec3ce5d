import type { GivenNumber } from '../../run/identification.ts';
import { type Html, html } from '../html.ts';
import { table } from '../sections/table.ts';

/** What a fit took for granted, and where it is from. */
export const givenTable = (given: readonly GivenNumber[]): Html =>
  table(
    'Taken for granted',
    [{ head: 'quantity' }, { head: 'value', number: true }, { head: 'unit' }, { head: 'from' }],
    given.map(({ name, value, unit, from, isDefault }) => [
      name,
      String(value),
      unit,
      html`<span class="wrap what">${isDefault ? html`<strong>default</strong>, ` : null}${from}</span>`,
    ]),
  );
