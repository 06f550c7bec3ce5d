import { type Html, type HtmlValue, html } from '../html.ts';

export interface TableColumn {
  readonly head: HtmlValue;
  /** Figures stand at the right. */
  readonly number?: boolean;
}

/** A row that names what the rows below it are about. */
export interface GroupRow {
  readonly group: string;
}
export type TableRow = readonly HtmlValue[] | GroupRow;

/**
 * A table that scrolls inside itself where it is too wide; the first cell of a row is its head.
 *
 * @param name what it is, for those who do not see it; unique on the page, because a region bears it
 * @param look `dense` for one with many columns
 */
export function table(
  name: string,
  columns: readonly TableColumn[],
  rows: readonly TableRow[],
  look: 'plain' | 'dense' = 'plain',
): Html {
  const cell = (column: TableColumn | undefined) => (column?.number === true ? html` class="num"` : null);
  return html`<div class="scroll" role="region" aria-label="${name}" tabindex="0"><table${look === 'dense' && html` class="dense"`}><thead><tr>${columns.map(
    (column) => html`<th scope="col"${cell(column)}>${column.head}</th>`,
  )}</tr></thead><tbody>${rows.map((row) =>
    'group' in row
      ? html`<tr class="group"><th scope="colgroup" colspan="${columns.length}"><span>${row.group}</span></th></tr>`
      : html`<tr>${row.map((value, i) =>
          i === 0
            ? html`<th scope="row"${cell(columns[i])}>${value}</th>`
            : html`<td${cell(columns[i])}>${value}</td>`,
        )}</tr>`,
  )}</tbody></table></div>
`;
}
