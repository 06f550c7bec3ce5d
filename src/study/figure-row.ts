import type { FigureRecord, Measure } from './figure-measures.ts';

/** One row of the table of figures. */
export interface FigureRow {
  /** The unit is its ending. */
  readonly name: string;
  readonly label: string;
  readonly unit: string;
  /** What the figure is weighted with. */
  readonly weight: 'time' | 'distance' | 'event';
  readonly takesBand: boolean;
  /** The better direction; null where neither is. */
  readonly better: 'lower' | 'higher' | null;
  readonly definition: string;
  readonly source: string;
  /** True: only a run whose plan asks for `detail` has it. */
  readonly detail?: true;
  /** True: for `holdable` it is taken over all of the road too. */
  readonly wholeRoad?: true;
  readonly measure: (record: FigureRecord) => Measure;
}

/** Source of a figure that no document defines. */
export const DEFINED_HERE = 'defined here';
