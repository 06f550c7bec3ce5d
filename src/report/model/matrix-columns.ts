import type { MatrixList } from '../../case/matrix-of.ts';
import type { MatrixCell, MatrixResult } from '../../run/matrix-result.ts';
import type { SpeedUnit } from '../quantity.ts';
import { itemText } from './matrix-words.ts';

/** Columns that a page has room for. */
const MOST_COLUMNS = 12;

/** Combinations that share one column of the table. */
export interface MatrixColumn {
  /** One a list that is not folded: what all of them have of it. */
  readonly items: readonly string[];
  /** Indices of the cells. */
  readonly cells: readonly number[];
}

export interface MatrixColumns {
  /** Lists with a row of heads each. */
  readonly heads: readonly MatrixList[];
  /** Lists of which a column shows the worst. */
  readonly folded: readonly MatrixList[];
  readonly columns: readonly MatrixColumn[];
}

/**
 * The combinations as columns of a table: one each where there is room; else lists are folded, the last ones first, and
 * a column stands for all that they have. One list that is too long alone is cut into pieces.
 */
export function matrixColumns({ lists, cells }: MatrixResult, speed: SpeedUnit): MatrixColumns {
  const text = (cell: MatrixCell, list: MatrixList): string => itemText(cell.combination, list, speed);
  const sizes = lists.map((list) => new Set(cells.map((cell) => text(cell, list))).size);
  const heads: MatrixList[] = [];
  let count = 1;
  lists.forEach((list, i) => {
    if (count * sizes[i]! > MOST_COLUMNS) return;
    count *= sizes[i]!;
    heads.push(list);
  });
  const many = heads.every((list) => sizes[lists.indexOf(list)] === 1);
  const folded = lists.filter((list) => !heads.includes(list));
  if (many && folded[0] !== undefined) return cut(cells, folded[0], folded.slice(1), text);
  const columns = new Map<string, { items: string[]; cells: number[] }>();
  cells.forEach((cell, i) => {
    const items = heads.map((list) => text(cell, list));
    const key = JSON.stringify(items);
    const column = columns.get(key) ?? { items, cells: [] };
    column.cells.push(i);
    columns.set(key, column);
  });
  return { heads, folded, columns: [...columns.values()] };
}

/** One list in pieces of equal count, each by its first and last item. */
function cut(
  cells: readonly MatrixCell[],
  list: MatrixList,
  folded: readonly MatrixList[],
  text: (cell: MatrixCell, list: MatrixList) => string,
): MatrixColumns {
  const items = [...new Set(cells.map((cell) => text(cell, list)))];
  const size = Math.ceil(items.length / MOST_COLUMNS);
  const columns = Array.from({ length: Math.ceil(items.length / size) }, (_, k): MatrixColumn => {
    const piece = items.slice(k * size, (k + 1) * size);
    const [first, last] = [piece[0]!, piece.at(-1)!];
    return {
      items: [first === last ? first : `${first} to ${last}`],
      cells: cells.flatMap((cell, i) => (piece.includes(text(cell, list)) ? [i] : [])),
    };
  });
  return { heads: [list], folded, columns };
}
