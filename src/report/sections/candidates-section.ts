import { figureRow } from '../../study/figure-table.ts';
import type { Figure } from '../../study/findings.ts';
import { toKmh } from '../../units/convert.ts';
import { rectangle, segment } from '../charts/canvas.ts';
import { lineKey } from '../charts/line-key.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { controllerWords } from '../model/controller-words.ts';
import { statusWords } from '../model/design-standing.ts';
import { FIGURE_GROUPS, type FigureGroup } from '../model/figure-groups.ts';
import { figureTextBeside } from '../model/figure-text.ts';
import { shiftMarks } from '../model/hold-marks.ts';
import { type ErrorRange, settledRange, wholeRange } from '../model/settled-range.ts';
import { setSpeedMarks } from '../model/settling.ts';
import type { CandidateView, View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { bandText, changeText, NO_VALUE, placeText } from '../quantity.ts';
import { cycles } from './cycles.ts';
import { loggedRides } from './logged-rides.ts';
import { loopMarginRows } from './loop-margin-rows.ts';
import type { Section } from './section.ts';
import { type TableRow, table } from './table.ts';

const changesNote = (what: string): string =>
  `Furthest below and above are told outside of the ${what}. All other figures here include them: until the set speed is reached again, the difference counts as error.`;

/** What takes a hold off its set speed by plan; null: nothing does. */
function plannedWords(view: View): string | null {
  const shifts = shiftMarks(view).length > 0;
  const changes = setSpeedMarks(view).length > 0;
  if (!shifts && !changes) return null;
  return [...(changes ? ['changes of set speed'] : []), ...(shifts ? ['shifts of the rider'] : [])].join(
    ' and ',
  );
}

/** Best is what is nearest to zero: time gained is no better than time lost. */
const BEST_IS_NONE = 'time_lost_s';

const BAR = 96;

const endedEarly = ({ result }: CandidateView): boolean => result.status !== 'completed';
/** Behind a figure of a run that ended early. */
const UP_TO_THERE = html`\u00a0<span class="small" title="up to where the run ended">†</span>`;

/** 3: all candidates on the same road, the locked throttle first. */
export function candidatesSection(view: View): Section {
  const { candidates } = view;
  const columns = [
    { head: 'over the whole road' },
    ...candidates.map((candidate) => ({
      head: html`<span class="who">${lineKey(candidate, PAGE_PAINT)} ${candidate.name}</span>${endedEarly(candidate) && html`<br><span class="flag small">ended at ${placeText(candidate.result.endDistance)} †</span>`}`,
    })),
  ];
  const rows: TableRow[] = [
    [
      'throttle',
      ...candidates.map(
        (candidate) =>
          html`<span class="wrap small">${controllerWords(candidate.controller, view.speed)}</span>`,
      ),
    ],
    ['run', ...candidates.map(statusWords)],
    rangeRow(view),
    ...groupRows(view, ({ shown }) => shown),
    ...marginRows(candidates),
  ];
  const more = groupRows(view, (group) => group.more);
  const look = candidates.length > 4 ? 'dense' : 'plain';
  const planned = plannedWords(view);
  const early = candidates.some(endedEarly);
  const body = html`${candidates.length > 1 && html`<p>Bars of one row share one scale. Bold is the best of the designs, where one direction is better${early && '; a run that ended early is not compared'}.</p>`}
${table('Candidates side by side', columns, rows, look)}
${more.length > 0 && html`<details><summary>More figures</summary>${table('More figures of the candidates', columns, more, look)}</details>`}
${(early || planned !== null) && html`<p class="note">${early && '† Up to where that run ended, not over the whole road. '}${planned !== null && changesNote(planned)}</p>`}
${view.rides.map((ride) => loggedRides(view, ride))}
${cycles(view)}`;
  return { id: 'candidates', number: 3, title: 'Candidates side by side', body };
}

/** The rows of each group under its name; a group without any is left out. */
function groupRows(view: View, namesOf: (group: FigureGroup) => readonly string[]): readonly TableRow[] {
  return FIGURE_GROUPS.flatMap((group): readonly TableRow[] => {
    const rows = namesOf(group).flatMap((name) => figureCells(view, name));
    return rows.length === 0 ? [] : [{ group: group.words }, ...rows];
  });
}

function marginRows(candidates: readonly CandidateView[]): readonly TableRow[] {
  const rows = loopMarginRows(candidates);
  return rows.length === 0 ? [] : [{ group: 'The linear loop' }, ...rows];
}

const numberOf = (figure: Figure | undefined): number | null => (typeof figure === 'number' ? figure : null);

function figureCells(view: View, name: string): readonly HtmlValue[][] {
  const row = figureRow(name);
  if (row === undefined) return [];
  const values = view.candidates.map((candidate) => numberOf(candidate.figures[name]));
  const exist = values.filter((value) => value !== null);
  if (exist.length === 0 || (exist.every((value) => value === 0) && name !== 'recovery_s')) return [];
  const whole = values.filter((value, i) => value !== null && !endedEarly(view.candidates[i]!));
  const [low, high] = [Math.min(0, ...whole.map(Number)), Math.max(0, ...whole.map(Number))];
  const merits = name === BEST_IS_NONE ? values.map((value) => value && Math.abs(value)) : values;
  const beside = row.unit === 'km/h' ? [toKmh(view.result.band)] : [];
  const texts = values.map((value) =>
    value === null ? NO_VALUE : figureTextBeside(value, beside, row.unit, view.speed),
  );
  // What all tell as nothing gets no bar: it would show what stands behind the last digit.
  const bars =
    high > low &&
    view.candidates.length > 1 &&
    texts.some((text, i) => !endedEarly(view.candidates[i]!) && /[1-9]/.test(text.split('\u00a0')[0]!));
  const best = bestOf(view.candidates, merits, row.better, texts);
  const head = row.takesBand ? `${row.label}, ${bandText(view.result.band, view.speed)}` : row.label;
  return [
    [
      html`<span class="wrap" title="${row.definition}">${head}</span>`,
      ...view.candidates.map((candidate, i) => {
        const value = values[i]!;
        if (value === null) return NO_VALUE;
        const text = texts[i]!;
        if (endedEarly(candidate)) return html`${text}${UP_TO_THERE}`;
        return html`${i === best ? html`<strong>${text}</strong>` : text}${bars && bar(value, low, high, candidate)}`;
      }),
    ],
  ];
}

/** Index of the best design that reached the end; none where two are equal to what is shown, or only one design ran. */
function bestOf(
  candidates: readonly CandidateView[],
  values: readonly (number | null)[],
  better: 'lower' | 'higher' | null,
  texts: readonly string[],
): number | null {
  if (better === null) return null;
  const designs = candidates.flatMap((candidate, i) => {
    const value = values[i];
    return candidate.locked || endedEarly(candidate) || value === null || value === undefined
      ? []
      : [{ i, value }];
  });
  if (designs.length < 2) return null;
  const order = designs.sort((a, b) => (better === 'lower' ? a.value - b.value : b.value - a.value));
  const [first, second] = [order[0]!, order[1]!];
  return Math.abs(first.value - second.value) <= 0.005 * Math.abs(second.value) ||
    texts[first.i] === texts[second.i]
    ? null
    : first.i;
}

function bar(value: number, low: number, high: number, candidate: CandidateView): Html {
  const at = (v: number): number => ((v - low) / (high - low)) * BAR;
  const [left, right] = value < 0 ? [at(value), at(0)] : [at(0), at(value)];
  const fill = PAGE_PAINT.series[candidate.colour]!;
  return html`<svg class="bar" viewBox="0 0 ${BAR} 8" width="${BAR}" height="8" aria-hidden="true">${rectangle({ left: 0, top: 3.5, width: BAR, height: 1 }, PAGE_PAINT.grid)}${rectangle({ left, top: 0, width: Math.max(1, right - left), height: 8 }, fill)}</svg>`;
}

/** Furthest below and above as a range mark around the set speed, the band behind it; all on one scale. */
function rangeRow(view: View): HtmlValue[] {
  const { band } = view.result;
  const ranges = view.candidates.map((candidate) => settledRange(view, candidate));
  const low = Math.min(-band, ...ranges.map((range) => range?.low ?? 0));
  const high = Math.max(band, ...ranges.map((range) => range?.high ?? 0));
  const at = (v: number): number => 2 + ((v - low) / (high - low)) * (BAR - 4);
  const cells = view.candidates.map((candidate, i): HtmlValue => {
    const range = ranges[i];
    if (range === null || range === undefined) return NO_VALUE;
    const stroke = PAGE_PAINT.series[candidate.colour]!;
    const [a, b] = [at(range.low), at(range.high)];
    return html`${rangeWords(view, range)}${endedEarly(candidate) && UP_TO_THERE}<svg class="bar" viewBox="0 0 ${BAR} 12" width="${BAR}" height="12" aria-hidden="true">${rectangle({ left: at(-band), top: 0, width: at(band) - at(-band), height: 12 }, PAGE_PAINT.band)}${segment(a, 6, b, 6, { stroke, width: 2.5 })}${segment(a, 2, a, 10, { stroke, width: 2 })}${segment(b, 2, b, 10, { stroke, width: 2 })}${segment(at(0), 0, at(0), 12, { stroke: PAGE_PAINT.ink })}</svg>${changesWords(view, candidate, range)}`;
  });
  return [html`<span class="wrap">Furthest below to furthest above</span>`, ...cells];
}

const rangeWords = (view: View, { low, high }: ErrorRange): string =>
  `${changeText(low, view.speed)} to ${changeText(high, view.speed)}`;

/** What the changes of set speed add to the range, where they add anything. */
function changesWords(view: View, candidate: CandidateView, range: ErrorRange): Html | null {
  const whole = wholeRange(candidate);
  if (whole === null || (whole.low === range.low && whole.high === range.high)) return null;
  return html`<span class="small">with ${plannedWords(view) ?? 'all of it'}<br>${rangeWords(view, whole)}</span>`;
}
