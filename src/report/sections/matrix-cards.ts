import type { MatrixResult } from '../../run/matrix-result.ts';
import { isNone } from '../../study/findings.ts';
import { cellPicture, errorScale, isCutOff } from '../charts/cell-picture.ts';
import { type Html, html } from '../html.ts';
import { figureLabel, figureTextBeside, marginText } from '../model/figure-text.ts';
import { BY_WEIGHT, type CellFinding, endOf, type MatrixRow, worstOf } from '../model/matrix-standing.ts';
import { combinationText } from '../model/matrix-words.ts';
import type { View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { placeText } from '../quantity.ts';
import { limitText } from './answer-section.ts';
import { verdictMark } from './verdict-mark.ts';

/** Cards that a page can hold: more would be slow to open. */
const MOST_CARDS = 240;

/** Anchor of a card. */
const cardId = ({ cell, index }: CellFinding): string => `m${index + 1}-${cell.number}`;

/** The cards of a matrix: which findings have one, and the cards of each row. */
export interface MatrixCards {
  /** Link to the card of a finding; null where the page has none. */
  readonly linkTo: (finding: CellFinding) => string | null;
  /** The worst of every row in the open, the others folded away. */
  readonly cards: Html;
}

/**
 * Decides which findings get a card: the worst of every row first, then those that weigh most, until the page is full.
 */
export function matrixCards(view: View, matrix: MatrixResult, rows: readonly MatrixRow[]): MatrixCards {
  const worst = rows.flatMap(({ findings }) => worstOf(findings) ?? []);
  const others = BY_WEIGHT.flatMap((verdict) =>
    rows.flatMap(({ findings }) => findings.filter((one) => one.finding.verdict === verdict)),
  );
  const shown = new Set([...worst, ...others].map(cardId).slice(0, MOST_CARDS + worst.length));
  const pictures = rows.flatMap(({ findings }) =>
    findings.flatMap(({ cell, index }) => cell.pictures[index] ?? []),
  );
  const errors = errorScale(view, pictures);
  const card = (one: CellFinding): Html => cardOf(view, matrix, one, errors);
  return {
    linkTo: (one) => (shown.has(cardId(one)) ? `#${cardId(one)}` : null),
    cards: html`<div class="cards">${worst.map(card)}</div>${rows.map(({ findings }) => {
      const rest = findings.filter((one) => !worst.includes(one) && shown.has(cardId(one)));
      const left = findings.length - 1 - rest.length;
      const { requirement, candidate } = findings[0]!.finding;
      return (
        rest.length > 0 &&
        html`<details><summary>The ${left === 0 ? 'other' : `next ${rest.length}`} combinations of ${requirement.id}, ${candidate}</summary><div class="cards">${rest.map(card)}</div>${left > 0 && html`<p class="note">${left} more are in matrix.csv.</p>`}</details>`
      );
    })}`,
  };
}

function cardOf(view: View, matrix: MatrixResult, one: CellFinding, errors: readonly [number, number]): Html {
  const { cell, index, finding } = one;
  const { requirement } = finding;
  const { label } = figureLabel(requirement.figure);
  const picture = cell.pictures[index] ?? null;
  const candidate = view.candidates.find(({ name }) => name === finding.candidate);
  const id = cardId(one);
  return html`<article class="card" id="${id}"><h4>${verdictMark(finding.verdict)} ${combinationText(cell, matrix.lists, view.speed)}</h4><p>${requirement.id}, ${finding.candidate}: ${label.toLowerCase()}: ${outcomeText(view, one)}. ${picture !== null && placeWords(view, matrix, one, picture.at)}${picture !== null && isCutOff(view, picture, errors) && ' The error goes beyond the scale.'}</p>${
    picture !== null &&
    candidate !== undefined &&
    cellPicture(view, picture, candidate, errors, {
      id: `${id}p`,
      paint: PAGE_PAINT,
      width: 380,
      narrow: true,
    })
  }</article>`;
}

/** The figure against its limit, or that the run ended before it could be held against it. */
export function outcomeText(view: View, { finding }: CellFinding): string {
  const { requirement, measured, margin } = finding;
  if (isNone(measured)) return measured.none;
  if (isNone(margin)) return margin.none;
  const { unit } = figureLabel(requirement.figure);
  const limit = requirement.atLeast ?? requirement.atMost ?? 0;
  return `${figureTextBeside(measured, [limit], unit, view.speed)} against ${limitText(finding, view.speed)}, margin ${marginText(margin, unit, view.speed)}`;
}

/** Where the picture is; the other way round with the same place on the way of the case itself. */
function placeWords(view: View, { direction }: MatrixResult, one: CellFinding, at: number): string {
  const turned = one.cell.combination.direction !== direction;
  const other = `${placeText(view.length - at)} of the way ${direction}`;
  // Where a run ended stands before these words already.
  if (Number.isFinite(endOf(one))) return turned ? `That is ${other}.` : '';
  const what = one.finding.worstAt === null ? 'Greatest error at' : 'Worst at';
  return `${what} ${placeText(at)}${turned ? `, ${other}` : ''}.`;
}
