import type { MatrixList } from '../../case/matrix-of.ts';
import type { MatrixResult } from '../../run/matrix-result.ts';
import { isNone, type Requirement } from '../../study/findings.ts';
import { lineKey } from '../charts/line-key.ts';
import { type Html, html } from '../html.ts';
import { figureLabel, figureTextBeside } from '../model/figure-text.ts';
import { type MatrixColumns, matrixColumns } from '../model/matrix-columns.ts';
import {
  type CellFinding,
  endOf,
  type MatrixRow,
  type MatrixStanding,
  matrixRows,
  matrixStandings,
  worstOf,
} from '../model/matrix-standing.ts';
import { combinationText, itemText, LIST_WORDS, loadText } from '../model/matrix-words.ts';
import type { View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { bandText, placeText } from '../quantity.ts';
import { limitText, STANDING, whereWords } from './answer-section.ts';
import { type MatrixCards, matrixCards, outcomeText } from './matrix-cards.ts';
import type { Section } from './section.ts';
import { verdictMark } from './verdict-mark.ts';

/** Behind the answer: every requirement in every combination of loads, winds, directions, gears and set speeds. */
export function matrixSection(view: View, matrix: MatrixResult): Section {
  const rows = matrixRows(matrix);
  const columns = matrixColumns(matrix, view.speed);
  const cards = matrixCards(view, matrix, rows);
  const body = html`${matrixStandings(matrix).map((standing) => standingLine(view, matrix, standing))}
${matrixTable(view, matrix, rows, columns, cards)}
${notes(view, matrix, columns)}
<h3>Where each is worst</h3>
<p>Speed error around the place, all pictures on the same scales; shaded: the band of ${bandText(view.result.band, view.speed)}, broken line: the place.</p>
${cards.cards}`;
  return { id: 'matrix', number: 2, title: 'The matrix', body };
}

/** `pi-60s: met in 22 of 24 combinations; worst: ...` */
function standingLine(view: View, matrix: MatrixResult, standing: MatrixStanding): Html {
  const { candidate, worst } = standing;
  const look = view.candidates.find(({ name }) => name === candidate);
  const { finding, cell } = worst;
  return html`<p class="matrix-line"><span class="who">${look !== undefined && lineKey(look, PAGE_PAINT)} <strong>${candidate}</strong></span>: ${countWords(standing)}; worst: ${combinationText(cell, matrix.lists, view.speed)} (${finding.requirement.id} ${finding.verdict}: ${outcomeText(view, worst)}).</p>`;
}

/** `met in 22 of 24 combinations, not met in 2`. */
function countWords({ counts, combinations }: MatrixStanding): string {
  const others = (['not met', 'too close to call', 'not judged'] as const).filter(
    (verdict) => counts[verdict] > 0,
  );
  const rest = others.map((verdict) => `, ${verdict} in ${counts[verdict]}`).join('');
  return `every requirement met in ${counts.met} of ${combinations} combinations${rest}`;
}

function valueText(view: View, { finding }: CellFinding): string {
  const { requirement, measured } = finding;
  const { unit } = figureLabel(requirement.figure);
  return figureTextBeside(measured, [requirement.atLeast ?? requirement.atMost ?? 0], unit, view.speed);
}

function matrixTable(
  view: View,
  matrix: MatrixResult,
  rows: readonly MatrixRow[],
  columns: MatrixColumns,
  cards: MatrixCards,
): Html {
  const head = columns.heads.map(
    (list, level) =>
      html`<tr><th scope="row" class="head">${LIST_WORDS[list]}</th>${spans(columns, level).map(
        ({ text, count }) =>
          html`<th scope="${count > 1 ? 'colgroup' : 'col'}"${count > 1 && html` colspan="${count}"`}>${text}</th>`,
      )}</tr>`,
  );
  const body = rows.map((row) => {
    const { requirement, candidate } = row.findings[0]!.finding;
    const look = view.candidates.find(({ name }) => name === candidate);
    return html`<tr><th scope="row"><span class="who">${requirement.id} ${look !== undefined && lineKey(look, PAGE_PAINT)} ${candidate}</span><br><span class="small">${figureLabel(requirement.figure).label} ${limitText(row.findings[0]!.finding, view.speed)}, ${ownWhere(requirement)}</span></th>${columns.columns.map(
      ({ cells }) =>
        tableCell(
          view,
          cells.map((i) => row.findings[i]!),
          cards,
        ),
    )}</tr>`;
  });
  const name = `Requirements in ${matrix.cells.length} combinations`;
  return html`<div class="scroll" role="region" aria-label="${name}" tabindex="0"><table class="dense matrix"><thead>${head}</thead><tbody>${body}</tbody></table></div>
`;
}

/** A stretch has other kilometres on the way back: here it is only said that it is one. */
const ownWhere = (requirement: Requirement): string =>
  typeof requirement.where === 'string' ? whereWords(requirement) : 'on its stretch';

/** Neighbours with the same head, and the same heads above, share it. */
function spans({ columns }: MatrixColumns, level: number): readonly { text: string; count: number }[] {
  const found: { key: string; text: string; count: number }[] = [];
  for (const { items } of columns) {
    const key = JSON.stringify(items.slice(0, level + 1));
    const last = found.at(-1);
    if (last?.key === key) last.count++;
    else found.push({ key, text: items[level]!, count: 1 });
  }
  return found;
}

function tableCell(view: View, findings: readonly CellFinding[], cards: MatrixCards): Html {
  const worst = worstOf(findings);
  if (worst === null) return html`<td></td>`;
  const { verdict, measured } = worst.finding;
  const { look } = STANDING[verdict];
  const link = cards.linkTo(worst);
  const met = findings.filter(({ finding }) => finding.verdict === 'met').length;
  const mark = verdictMark(verdict, verdict === 'too close to call' ? 'too close' : verdict);
  const end = endOf(worst);
  const words = Number.isFinite(end)
    ? `ended ${placeText(end)}`
    : isNone(measured)
      ? ''
      : valueText(view, worst);
  return html`<td class="wash ${look}" title="${worst.finding.words}">${link === null ? mark : html`<a href="${link}">${mark}</a>`}<br><span class="small">${words}${findings.length > 1 && html`<br>${met} of ${findings.length}`}</span></td>`;
}

function notes(view: View, matrix: MatrixResult, { folded }: MatrixColumns): Html {
  const { lists, cells } = matrix;
  const own = cells.find((cell) => cell.own);
  const unable = cells.filter(({ reason }) => reason !== null);
  const loads = lists.includes('loads')
    ? [...new Map(cells.map(({ combination }) => [combination.load.label, loadText(combination)]))]
    : [];
  const single = lists.filter(
    (list) => new Set(cells.map(({ combination }) => itemText(combination, list, view.speed))).size === 1,
  );
  const words = folded.filter((list) => !single.includes(list)).map((list) => LIST_WORDS[list]);
  return html`<p class="note">${words.length > 0 && `A column shows the worst over every ${words.join(' and ')}, and how many of its combinations meet the requirement; all of them are in matrix.csv. `}${
    loads.length > 0 &&
    `Carried by rider, payload and pillion: ${loads.map(([label, mass]) => `${label} ${mass}`).join('; ')}. `
  }${own !== undefined && `The case itself: ${combinationText(own, lists, view.speed)}. `}${
    unable.length > 0 && `Not judged, which counts as not met: ${reasons(view, matrix)}. `
  }</p>
<p class="note">Each combination is the case itself with these values in place of its own, every candidate replayed with the gains of the case. Looked at in the case itself alone: hills with their causes and what would hold, limit cycles, segments. A figure near its limit is too close to call by the spread that it has in the case itself. On the way back stretches, changes of set speed and shifts stay at their places on the ground; kilometres count along the way that is driven.</p>`;
}

function reasons(view: View, { cells, lists }: MatrixResult): string {
  const by = new Map<string, string[]>();
  for (const cell of cells) {
    if (cell.reason === null) continue;
    by.set(cell.reason, [
      ...(by.get(cell.reason) ?? []),
      combinationText(cell, shortLists(lists, cells), view.speed),
    ]);
  }
  return [...by].map(([reason, where]) => `${[...new Set(where)].join('; ')}: ${reason}`).join('. ');
}

/** Lists on which it depends whether a combination can be run: gears and set speeds, where they are given. */
function shortLists(lists: readonly MatrixList[], cells: MatrixResult['cells']): readonly MatrixList[] {
  const short = lists.filter((list) => list === 'gears' || list === 'set_speeds_kmh');
  return short.length > 0 && cells.length > 0 ? short : lists;
}
