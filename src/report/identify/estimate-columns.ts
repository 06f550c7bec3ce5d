import type { TableColumn } from '../sections/table.ts';

/** Head of a table of estimates: see `estimateCells`. */
export const ESTIMATE_COLUMNS: readonly TableColumn[] = [
  { head: 'quantity' },
  { head: 'value', number: true },
  { head: 'standard error', number: true },
  { head: '95 % interval', number: true },
  { head: 'unit' },
];
