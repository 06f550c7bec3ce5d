import type { DefaultUsed } from '../case/list-defaults.ts';
import type { Warning } from '../problems/warning.ts';
import type { Road } from '../road/road.ts';
import type { InputFile } from './run-result.ts';

/** A road alone: what `ridgehold road` reads and writes. Plain data. */
export interface RoadResult {
  readonly schemaVersion: string;
  readonly toolVersion: string;
  /** Name of the track or case file without folder and ending. */
  readonly name: string;
  readonly inputs: readonly InputFile[];
  readonly overrides: readonly string[];
  readonly road: Road;
  /** Of the keys that concern the road. */
  readonly defaults: readonly DefaultUsed[];
  readonly warnings: readonly Warning[];
}
