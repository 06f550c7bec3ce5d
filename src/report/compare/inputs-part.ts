import { fromKmh } from '../../units/convert.ts';
import { type Html, html } from '../html.ts';
import { fixed, lengthText, NO_VALUE, type SpeedUnit, speedText, withUnit } from '../quantity.ts';
import type { Section } from '../sections/section.ts';
import { table } from '../sections/table.ts';
import type { Comparison } from './compare-results.ts';
import type { FileChange, UsedValue, ValueChange } from './input-changes.ts';
import type { ResultSummary } from './read-summary.ts';

/** A longer value is shown around its first difference. */
const LONGEST = 44;
/** Digits of a SHA-256 that tell files apart for people. */
const HASH_DIGITS = 12;

/** 2: what is different in what went in. */
export function inputsPart(comparison: Comparison, speed: SpeedUnit): Section {
  const { before, after, inputs, onlyBefore, onlyAfter } = comparison;
  const { values, overrides } = inputs;
  const body = html`${factsTable(before, after, speed)}
<h3>Files</h3>
${filesTable(inputs.files)}
<p class="note">The first ${HASH_DIGITS} digits of each SHA-256; compare.json has them whole.</p>
<h3>Values</h3>
${
  values === null
    ? html`<p>A summary of schema 1.0 does not tell what the case and the vehicle gave: what changed in them cannot be said. Run that case again.</p>`
    : values.length === 0
      ? html`<p>Case and vehicle gave the same values, and the same defaults were used.</p>`
      : valuesTable(values)
}
${overridesText(overrides.before, overrides.after)}
${onlyWords('only before', onlyBefore)}${onlyWords('only after', onlyAfter)}`;
  return { id: 'inputs', number: 2, title: 'What changed in the inputs', body };
}

function factsTable(before: ResultSummary, after: ResultSummary, speed: SpeedUnit): Html {
  const facts = (result: ResultSummary): readonly (readonly [string, string])[] => [
    ['Title', result.title],
    [
      'Road',
      `${result.route.name}, ${lengthText(result.route.length_m)}, ${fixed(result.route.climb_m)} m of climb`,
    ],
    ['Holdable share of the road', withUnit(fixed(result.route.holdable_pct, 1), '%')],
    ['Vehicle', `${result.vehicle.name}, ${fixed(result.vehicle.mass_kg, 1)} kg`],
    ['Set speed', speedText(fromKmh(result.hold.set_speed_kmh), speed)],
    ['Solver', result.scheme],
    ['Made by', `Ridgehold ${result.tool.version}`],
  ];
  const is = facts(after);
  const rows = facts(before).map(([name, value], i) => {
    const [, now] = is[i]!;
    return [name, value, now, value === now ? '' : html`<span class="verdict open">changed</span>`];
  });
  return table(
    'The two results',
    [{ head: 'what' }, { head: 'before' }, { head: 'after' }, { head: 'change' }],
    rows,
  );
}

function filesTable(files: readonly FileChange[]): Html {
  const cell = (file: FileChange['before']) =>
    file === null
      ? NO_VALUE
      : html`<span class="wrap">${file.name}<br><code class="hash">${file.sha256.slice(0, HASH_DIGITS)}</code></span>`;
  const rows = files.map(({ role, change, before, after }) => [
    role === 'case' ? 'case' : 'file of the case',
    cell(before),
    cell(after),
    change === 'same' ? 'same' : html`<span class="verdict open">${change}</span>`,
  ]);
  return table(
    'Files read',
    [{ head: 'role' }, { head: 'before' }, { head: 'after' }, { head: 'change' }],
    rows,
  );
}

function valuesTable(values: readonly ValueChange[]): Html {
  const rows = values.map(({ of, key, before, after }) => [
    html`<code>${key}</code>`,
    of,
    valueCell(before, after),
    valueCell(after, before),
  ]);
  return table(
    'Values that changed',
    [{ head: 'key' }, { head: 'of the' }, { head: 'before' }, { head: 'after' }],
    rows,
  );
}

function valueCell(used: UsedValue | null, other: UsedValue | null): Html | string {
  if (used === null) return 'not there';
  return html`<span class="wrap"><code>${aroundDifference(used.value, other?.value ?? '')}</code>${used.isDefault && html` <span class="small">default</span>`}</span>`;
}

/** As much of a long value as shows where it is another one. */
export function aroundDifference(value: string, other: string): string {
  if (value.length <= LONGEST) return value;
  let same = 0;
  while (same < value.length && value[same] === other[same]) same++;
  const from = other === '' ? 0 : Math.max(0, Math.min(same - 8, value.length - LONGEST));
  const part = value.slice(from, from + LONGEST);
  return `${from > 0 ? '…' : ''}${part}${from + LONGEST < value.length ? '…' : ''}`;
}

function overridesText(before: readonly string[], after: readonly string[]): Html | null {
  if (before.length === 0 && after.length === 0) return null;
  const words = (overrides: readonly string[]) => (overrides.length === 0 ? 'nothing' : overrides.join('; '));
  return html`<p class="note">Changed beside the case: before ${words(before)}; after ${words(after)}.</p>`;
}

const onlyWords = (side: string, names: readonly string[]): Html | null =>
  names.length === 0
    ? null
    : html`<p class="note">${names.length === 1 ? 'A candidate' : 'Candidates'} ${side}: ${names.join(', ')}.</p>`;
